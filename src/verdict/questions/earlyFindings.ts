import type { JointRunLength } from '../../charts/sums/jointRunLength.ts';
import type { Day } from '../../days.ts';
import type { PooledRate } from '../types.ts';

/** Where one of the two sums of an account-by-account watch stands. */
export interface WatchState {
  readonly direction: 'rise' | 'fall';
  /** the moved rate it looks for */
  readonly to: number;
  /** part of the way to its alarm; 1 and more: an alarm */
  readonly share: number;
  /** the accounts since it was last at zero, and when the first of them started; null when it is at zero */
  readonly since: { readonly start: Day; readonly rate: PooledRate } | null;
  /** a standing alarm: the account that raised it started and reached the tenure point on these days */
  readonly alarm: { readonly start: Day; readonly readOn: Day } | null;
  /** alarms that have come back below the limit, the last one's days of start */
  readonly passed: { readonly count: number; readonly first: Day; readonly last: Day } | null;
  /** with nothing changed it gets as far as it stands now about once in this many accounts; null at zero and in an alarm */
  readonly likeThisEvery: number | null;
  /** mean number of accounts until a lasting move to `to` raises the alarm */
  readonly toAlarm: number;
}

/** All that the early watch says: finished numbers, rates as fractions. */
export interface EarlyFindings {
  readonly tenure: string;
  readonly segment: string | null;
  readonly usual: PooledRate;
  readonly baselinePoints: number;
  /** fewer points than make a level firm */
  readonly provisional: boolean;
  /** the points that set the level vary more than chance makes them */
  readonly overdispersed: boolean;
  /** the mix of groups moved, which a watch of all accounts cannot tell from a move */
  readonly mixMoved: boolean;
  readonly watched: { readonly accounts: number; readonly lost: number; readonly first: Day; readonly last: Day };
  /** of the watched accounts, those that wait for their point to be full */
  readonly unfinished: number;
  readonly rise: WatchState;
  readonly fall: WatchState;
  readonly falseAlarmEvery: JointRunLength;
  /** the same if the usual level were really at the ends of its interval */
  readonly falseAlarmBetween: readonly [number, number];
  readonly inflowPerWeek: number;
  readonly verdict: string | null;
}

/** quiet, climbing (from half of the way), or in alarm; the sum that is furthest decides. */
export type WatchMood = 'quiet' | 'climbing' | 'alarm';

/** From here on a sum is called climbing. Our choice, no source. */
const CLIMBING = 0.5;

export function moodOf({ share }: WatchState): WatchMood {
  return share >= 1 ? 'alarm' : share >= CLIMBING ? 'climbing' : 'quiet';
}

/** The sum that is furthest on its way. */
export function leading({ rise, fall }: Pick<EarlyFindings, 'rise' | 'fall'>): WatchState {
  return rise.share >= fall.share ? rise : fall;
}
