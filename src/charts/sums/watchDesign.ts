import { type JointRunLength, jointRunLength } from './jointRunLength.ts';
import { accountsToAlarm, designWatch, type WatchSum } from './watchSum.ts';

/** A watch in both directions. */
export interface Watch {
  readonly usual: number;
  readonly rise: WatchSum;
  readonly fall: WatchSum;
  /** accounts between two false alarms of either sum, with nothing changed */
  readonly falseAlarmEvery: JointRunLength;
  /** mean number of accounts from the move to the alarm, when the rate goes to what each sum looks for and stays there */
  readonly toRise: number;
  readonly toFall: number;
}

/**
 * Builds a watch for a rise and a fall of a rate.
 * @param usual   strictly between 0 and 1
 * @param moves   factors on the rate: rise > 1, fall in (0, 1)
 * @param every   accounts between two false alarms of both together
 * Each sum alone gets twice the interval, so that together they have it where neither disturbs the other.
 */
export function buildWatch(
  usual: number,
  moves: { readonly rise: number; readonly fall: number },
  every: number,
): Watch {
  const rise = designWatch(usual, raised(usual, moves.rise), 2 * every);
  const fall = designWatch(usual, usual * moves.fall, 2 * every);
  return {
    usual,
    rise,
    fall,
    falseAlarmEvery: jointRunLength(rise, fall, usual),
    toRise: accountsToAlarm(rise, rise.wanted),
    toFall: accountsToAlarm(fall, fall.wanted),
  };
}

/** A rise by the factor, or where that leaves hardly anybody to keep, the way up halved: a share cannot pass 1. */
export function raised(usual: number, factor: number): number {
  return Math.min(usual * factor, (1 + usual) / 2);
}
