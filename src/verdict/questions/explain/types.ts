import type { ReadReport } from '../../../accounts/types.ts';
import type { Census } from '../../../census/types.ts';
import type { Chart } from '../../../charts/types.ts';
import type { Judgement } from '../../judgement.ts';
import type { PointDates, Signal, Trust, Verdict } from '../../types.ts';

/** What a verdict was reached from. */
export interface Explained {
  readonly report: ReadReport | null;
  readonly census: Census | null;
  readonly chart: Chart | null;
  readonly dates: readonly PointDates[];
  readonly signals: readonly Signal[];
  readonly trust: Trust;
  readonly judgement: Judgement | null;
  readonly verdict: Verdict;
  /** "3 months", or null where nothing is read at an age */
  readonly tenure: string | null;
  /** how the verdict was put: the values on the chart are shares of accounts lost in subgroups in order of start */
  readonly bySubgroups: boolean;
}

/** One step of the way, in sentences and as numbers. */
export interface Step {
  readonly title: string;
  readonly sentences: readonly string[];
  readonly figures: Readonly<Record<string, unknown>>;
}
