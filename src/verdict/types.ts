import type { CensusView } from '../census/types.ts';
import type { Chart, Interval, ShiftTest, Side, TestEpisode } from '../charts/types.ts';
import type { Day } from '../days.ts';

export type Outcome = 'risen' | 'fallen' | 'steady' | 'too-early' | 'cannot-say';

/** standing: the last stretch differs beyond the calibrated threshold; watching: new and not standing yet; passed: no longer stands. */
export type SignalState = 'standing' | 'watching' | 'passed';

export interface Signal extends TestEpisode {
  readonly state: SignalState;
  /** the test in words: "nine points in a row below the usual level" */
  readonly words: string;
}

export interface PooledRate {
  readonly rate: number;
  readonly low: number;
  readonly high: number;
  readonly lost: number;
  readonly accounts: number;
  /** Wilson's interval, or the exact one where few were lost or kept; absent where it is neither */
  readonly interval?: 'wilson' | 'exact';
  /** given where losses are counted over days and not over accounts: rate, low and high are then losses a day */
  readonly days?: number;
}

export interface Since {
  /** first point of the moved stretch */
  readonly point: number;
  /** first start date of that point; null for ready counts */
  readonly start: Day | null;
  /** first and last point the likelihood does not rule out as the first of the stretch */
  readonly candidates: readonly [number, number];
}

/** From a lasting move to the first flag, on average. */
export interface Delay {
  /** the moved rate */
  readonly rate: number;
  /** null when it is hardly ever flagged */
  readonly points: number | null;
  readonly accounts: number | null;
  /** at the recent pace of accounts that reach the age; null when that is not known */
  readonly weeks: number | null;
}

export interface Trust {
  /** points between two false flags of the shift tests when nothing changed */
  readonly falseAlarmEvery: number | null;
  readonly method: 'exact' | 'simulated';
  readonly standardError: number | null;
  /** what the false-alarm figures were computed for; this and the next three are absent where no run length was */
  readonly settings?: {
    /** accounts a point; null when the points differ */
    readonly n: number | null;
    /** rate of the usual level, taken as true */
    readonly p: number;
    /** the tests whose flags count, numbered as by Nelson */
    readonly tests: readonly ShiftTest[];
    /** how much more the points vary than the binomial allows, as a factor on sigma; 1 on a p chart */
    readonly sigmaZ: number;
  };
  /** points to the first false flag when nothing changed: on average, and within which half, 10 % and 90 % of such charts raise it */
  readonly runLength?: {
    readonly mean: number;
    readonly median: number | null;
    readonly p10: number | null;
    readonly p90: number | null;
  } | null;
  /** how long a rise by half and a halving take to be flagged; null for a rate that cannot be */
  readonly delay?: { readonly rise: Delay | null; readonly fall: Delay | null };
  /** the false-alarm figure when the usual level is not known but estimated from as many points as here */
  readonly estimated?: {
    /** points that set the usual level */
    readonly points: number;
    readonly falseAlarmEvery: number | null;
    /** in 8 of 10 such charts the false-alarm figure lies between these */
    readonly low: number;
    readonly high: number | null;
  } | null;
  readonly falseVerdictChance: number | null;
  readonly wouldSee: {
    readonly rise: number | null;
    readonly fall: number | null;
    readonly chance: number;
  } | null;
}

export interface Verdict {
  readonly outcome: Outcome;
  readonly headline: string;
  readonly evidence: readonly string[];
  readonly cautions: readonly string[];
  readonly next: readonly string[];
  readonly since: Since | null;
  readonly before: PooledRate | null;
  readonly after: PooledRate | null;
  readonly difference: Interval | null;
}

/** A point with the dates of the accounts in it; null dates for ready counts. */
export interface PointDates {
  readonly firstStart: Day | null;
  readonly lastStart: Day | null;
  readonly asOf: Day | null;
}

/** All that the picture needs: finished numbers only, nothing left to compute. */
export interface PictureInput {
  /** how the accounts were ordered and cut; by start when absent */
  readonly view?: CensusView;
  readonly chart: Chart | null;
  readonly dates: readonly PointDates[];
  readonly signals: readonly Signal[];
  readonly verdict: Verdict;
  /** withheld subgroup: accounts it holds, its size, and when it can be plotted */
  readonly waiting: {
    readonly accounts: number;
    readonly of: number;
    readonly on: Day | null;
  } | null;
  /** accounts too young to be counted */
  readonly immature: number;
  /** "lost within 3 months of starting" */
  readonly measure: string;
  /** what was counted: dataset name and filter, "Marrowby Seed Club export, Orchard plan" */
  readonly subject: string;
  /** data complete through this day; null for ready counts */
  readonly asOf: Day | null;
  /** the smallest moves that would by now have been seen; drawn when nothing moved, so that "steady" never stands alone */
  readonly wouldSee?: Trust['wouldSee'];
  /** why flags that do not stand were raised, when it is known: replaces "did not last" on the picture */
  readonly flagsExplained?: string;
  /** the levels before and since a move as they are plotted, where the chart does not plot rates; null where there is none to plot */
  readonly levels?: { readonly before: number | null; readonly after: number | null };
  /** where the points that should set the usual level fall apart into two levels: after this point */
  readonly split?: { readonly after: number } | null;
}

export type { Side };
