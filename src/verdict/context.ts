import type { CensusView } from '../census/types.ts';
import type { Day } from '../days.ts';
import type { PointDates } from './types.ts';

/** What the words need to know besides the chart: whose accounts, read at which age, and what is still to come. */
export interface VerdictContext {
  /** how the accounts were ordered and cut; by start when absent */
  readonly view?: CensusView;
  /** calendar view: the month under way when the data ends, left out; null when there is none */
  readonly withheld?: { readonly first: Day; readonly last: Day } | null;
  /** "3 months", or null for ready counts, whose meaning only their owner knows */
  readonly tenure: string | null;
  readonly dates: readonly PointDates[];
  /** accounts in a full subgroup; null for ready counts of unequal size */
  readonly subgroupSize: number | null;
  readonly accounts: number;
  readonly matured: number;
  readonly waiting: number;
  readonly immature: number;
  readonly nextPointOn: Day | null;
  /** day on which this many accounts will have matured, from those already started; null when more must start first */
  readonly maturedOn: (accounts: number) => Day | null;
  /** matured accounts a week; 0 when unknown */
  readonly inflowPerWeek: number;
  readonly asOf: Day | null;
  /** true when the data-through date was inferred and not given */
  readonly asOfInferred: boolean;
  /** name of the segment column, and the value looked at when the question named one */
  readonly segmentColumn: string | null;
  readonly segment: string | null;
  readonly segmentValues: readonly string[];
  /** why this tenure point and this size, when the program chose them: sentences */
  readonly howChosen: readonly string[];
  /** cautions that reading the file gave rise to */
  readonly readCautions: readonly string[];
}
