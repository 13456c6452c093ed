import type { Day } from '../days.ts';

/** A fixed age at which churn is read. Calendar months clamp to the month's last day. */
export interface Tenure {
  readonly count: number;
  readonly unit: 'day' | 'week' | 'month';
}

/** start: accounts in order of start; renewal: renewals in order of their date; calendar: customers of each calendar month. */
export type CensusView = 'start' | 'renewal' | 'calendar';

export interface CensusRequest {
  readonly tenure: Tenure;
  readonly subgroupSize: number;
  readonly settleDays: number;
  readonly asOf: Day;
  readonly view: CensusView;
  /** only accounts whose segment equals this value */
  readonly segment?: string;
}

/** One subgroup of exactly n matured accounts, in order of start. */
export interface CensusSubgroup {
  readonly index: number;
  readonly accounts: number;
  readonly lost: number;
  readonly firstStart: Day;
  readonly lastStart: Day;
  /** the day its last member reached the tenure point (plus settleDays): the answer is as of this day */
  readonly asOf: Day;
}

/** Counts of one segment value inside each subgroup; arrays have one entry per subgroup. */
export interface SegmentCounts {
  readonly segment: string;
  readonly accounts: readonly number[];
  readonly lost: readonly number[];
}

export interface Census {
  readonly request: CensusRequest;
  readonly subgroups: readonly CensusSubgroup[];
  /** matured accounts, those waiting in the unfinished subgroup included */
  readonly matured: number;
  /** matured accounts in the unfinished, withheld subgroup */
  readonly waiting: number;
  /** accounts too young to be counted */
  readonly immature: number;
  /** day on which the withheld subgroup will be complete, from accounts already started; null when not enough have started */
  readonly nextPointOn: Day | null;
  /** accounts too young to be counted, by the day on which they mature; sorted */
  readonly maturing: readonly { readonly day: Day; readonly accounts: number }[];
  /** matured accounts a week, over the last quarter of a year of matured starts: the inflow that sets waiting times */
  readonly inflowPerWeek: number;
  /** per segment value (at most 12, the rest pooled as 'other'); empty when there is no segment column or the request names one */
  readonly segments: readonly SegmentCounts[];
}

/** What is recommended when the question leaves n or T open, and why, in words the reply can use. */
export interface CensusPlan {
  readonly tenure: Tenure;
  readonly tenureWhy: string;
  readonly subgroupSize: number;
  readonly sizeWhy: string;
  /** the three sizes of which one is recommended */
  readonly sizes: { readonly fiveLosses: number; readonly positiveLowerLimit: number; readonly seesHalving: number };
  /** overall lost share among matured accounts at this tenure */
  readonly rate: number;
}
