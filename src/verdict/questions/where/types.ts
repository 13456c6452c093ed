import type { CensusSubgroup } from '../../../census/types.ts';
import type { Chart, Interval } from '../../../charts/types.ts';
import type { Day } from '../../../days.ts';
import type { Judgement } from '../../judgement.ts';
import type { PooledRate } from '../../types.ts';

/**
 * What is said of one group.
 * risen, fallen  moved, and still so once it counts how many groups were looked at
 * alone          reads as moved by itself, but not once that counts
 * steady         judged, and not moved
 * unsteady       the points that should set its usual level are not of one level
 * no-level       nobody, or everybody, was lost in them
 * too-few        not enough accounts
 */
export type GroupFinding = 'risen' | 'fallen' | 'alone' | 'steady' | 'unsteady' | 'no-level' | 'too-few';

/** One group, its own chart, and what it says among the others. */
export interface GroupReading {
  readonly name: string;
  /** of the pooled rest: how many values, and how many accounts without one */
  readonly pooled: { readonly values: number; readonly without: number } | null;
  readonly accounts: number;
  readonly matured: number;
  readonly lost: number;
  readonly subgroupSize: number;
  readonly subgroups: readonly CensusSubgroup[];
  /** null when there is not one full subgroup */
  readonly chart: Chart | null;
  readonly judgement: Judgement | null;
  readonly finding: GroupFinding;
  /** direction of a group that reads as moved, by itself or among the others */
  readonly direction: 'risen' | 'fallen' | null;
  /** p value of "moved"; null when the group could not be judged */
  readonly chance: number | null;
  /** the same, adjusted for all groups that were judged (Benjamini-Hochberg) */
  readonly adjusted: number | null;
  /** of a group with a direction: the level before, the stretch since, and when that began */
  readonly before: PooledRate | null;
  readonly after: PooledRate | null;
  readonly difference: Interval | null;
  readonly since: { readonly point: number; readonly start: Day } | null;
}
