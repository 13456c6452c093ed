import type { SeriesJudgement } from '../../charts/series/judgeSeries.ts';
import type { Chart } from '../../charts/types.ts';
import type { Day } from '../../days.ts';
import type { PointDates, PooledRate, Signal, Trust } from '../types.ts';

export type GapFinding = 'too-few' | 'no-level' | 'unsteady-baseline' | 'risen' | 'fallen' | 'steady';

/** Everything the gaps say, before any words. */
export interface GapJudgement {
  readonly finding: GapFinding;
  /** null when nobody was lost */
  readonly chart: Chart | null;
  readonly series: SeriesJudgement | null;
  readonly signals: readonly Signal[];
  readonly trust: Trust;
  /** losses over accounts (g) or days (t) of the usual level, and when churn moved of the points since then */
  readonly usual: PooledRate | null;
  readonly before: PooledRate | null;
  readonly after: PooledRate | null;
  /** the gaps clearly vary more than chance allows, and the limits come from how much they really do (Nelson's power) */
  readonly byPower: boolean;
}

/** What the words need to know besides the gaps. */
export interface GapContext {
  readonly kind: 'g' | 't';
  /** "3 months"; null for ready gaps, whose meaning only their owner knows */
  readonly tenure: string | null;
  /** for each gap the days between which it lies, and one entry more for what came since the last loss */
  readonly dates: readonly PointDates[];
  readonly losses: number;
  /** accounts, or days, since the last loss */
  readonly open: number;
  /** accounts looked at; null where days are */
  readonly accounts: number | null;
  /** days looked at, first and last; null where accounts are, and for ready gaps */
  readonly watched: { readonly from: Day; readonly to: Day } | null;
  readonly immature: number;
  /** accounts a week that reach the tenure point; 0 when unknown */
  readonly inflowPerWeek: number;
  readonly asOf: Day | null;
  readonly asOfInferred: boolean;
  readonly segment: string | null;
  /** why this chart and not another: sentences */
  readonly whyThisChart: readonly string[];
  /** why this tenure point, when the program chose it: sentences */
  readonly howChosen: readonly string[];
  readonly readCautions: readonly string[];
}
