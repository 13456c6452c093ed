import type { AccountTable } from '../../accounts/types.ts';
import type { CensusPlan } from '../../census/types.ts';
import type { Picture } from '../../picture/picture.ts';
import type { Question } from '../../requests/types.ts';
import type { PictureInput } from '../../verdict/types.ts';
import type { Answer } from '../types.ts';
import type { ResolvedPlan, ResolvedScope } from './scope.ts';

/** What one way of answering "has it moved?" is given. */
export interface AskContext {
  readonly table: AccountTable;
  readonly question: Question;
  readonly scope: ResolvedScope;
  /** what the picture calls the data */
  readonly subject: string;
  readonly resolved: ResolvedPlan;
  /** a clock in milliseconds, for the timing figures only */
  readonly clock: () => number;
}

/** A verdict reached, before its picture is drawn. */
export interface Reached
  extends Pick<Answer, 'verdict' | 'chart' | 'dates' | 'signals' | 'trust' | 'judgement' | 'census'> {
  readonly plan: CensusPlan;
  /** all the picture needs beside the chart, its dates, its signals and the verdict */
  readonly drawn: Omit<PictureInput, 'chart' | 'dates' | 'signals' | 'verdict'>;
  /** draws another picture than the chart's, where the chart has one of its own */
  readonly draw?: () => Promise<Picture>;
  /** clock reading when the counting was done */
  readonly countedAt: number;
}

/** One way of answering: which chart is drawn from which counts. */
export type Way = (context: AskContext) => Promise<Reached>;
