import type { ReadReport } from '../accounts/types.ts';
import type { Census, CensusPlan, Tenure } from '../census/types.ts';
import type { Chart } from '../charts/types.ts';
import type { Picture } from '../picture/picture.ts';
import type { Judgement } from '../verdict/judgement.ts';
import type { PointDates, Signal, Trust, Verdict } from '../verdict/types.ts';

export interface Timing {
  readonly readMs: number;
  readonly censusMs: number;
  readonly chartMs: number;
  readonly pictureMs: number;
  readonly totalMs: number;
}

/** A finished answer; what the command line prints as JSON and the channel posts. */
export interface Answer {
  readonly verdict: Verdict;
  readonly chart: Chart | null;
  readonly dates: readonly PointDates[];
  readonly signals: readonly Signal[];
  readonly trust: Trust;
  /** what the numbers say before any words; null for charts that are not judged by the binomial */
  readonly judgement: Judgement | null;
  readonly report: ReadReport | null;
  readonly census: Census | null;
  readonly plan: CensusPlan | null;
  readonly tenure: Tenure | null;
  readonly picture: Picture | null;
  readonly timing: Timing;
}
