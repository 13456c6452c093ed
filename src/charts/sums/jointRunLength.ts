import { seededUniform } from '../random/uniform.ts';
import { accountsToAlarm, type WatchSum } from './watchSum.ts';

export interface JointRunLength {
  /** mean number of accounts until either sum raises an alarm */
  readonly accounts: number;
  readonly method: 'exact' | 'simulated';
  readonly standardError: number | null;
}

const RUNS = 4_000;
/** Losses simulated for one figure at most. */
const LOSS_BUDGET = 3_000_000;

/**
 * Mean number of accounts until one of two sums that watch the same accounts raises an alarm.
 * @param rate  the true rate, strictly between 0 and 1
 * Method: when either sum is sure to be at zero whenever the other reaches its limit, 1 / both = 1 / rise + 1 / fall, exactly. A sum that
 * climbs to its limit takes the other down by at least the same height and by the difference of the two drifts for every account of the
 * climb; limits that do not differ more than that make it sure. Otherwise, and with head starts, it is simulated, seeded.
 * Source: van Dobben de Bruyn CS, Cumulative Sum Tests, 1968 (reference from memory); the condition for these steps is worked out here.
 */
export function jointRunLength(rise: WatchSum, fall: WatchSum, rate: number, seed = 6): JointRunLength {
  if (!areApart(rise, fall)) return simulated(rise, fall, rate, seed);
  return {
    accounts: 1 / (1 / accountsToAlarm(rise, rate) + 1 / accountsToAlarm(fall, rate)),
    method: 'exact',
    standardError: null,
  };
}

/** True when each sum is at zero whenever the other reaches its limit. */
export function areApart(rise: WatchSum, fall: WatchSum): boolean {
  if (rise.start > 0 || fall.start > 0) return false;
  const high = rise.gamma.numerator / rise.gamma.denominator;
  const low = fall.gamma.numerator / fall.gamma.denominator;
  const riseLimit = rise.limit / rise.gamma.denominator;
  const fallLimit = fall.limit / fall.gamma.denominator;
  return fallLimit * (1 - high) <= riseLimit * (1 - low) && riseLimit * low <= fallLimit * high;
}

/** Jumps from loss to loss: the kept accounts between two are geometric in number. */
function simulated(rise: WatchSum, fall: WatchSum, rate: number, seed: number): JointRunLength {
  const uniform = seededUniform(seed);
  const logKept = Math.log1p(-rate);
  let runs = 0;
  let losses = 0;
  let total = 0;
  let squares = 0;
  while (runs < RUNS && losses < LOSS_BUDGET) {
    let up = rise.start;
    let down = fall.start;
    let accounts = 0;
    for (;;) {
      const kept = Math.floor(Math.log(uniform()) / logKept);
      const climb = Math.ceil((fall.limit - down) / fall.keptStep);
      if (kept >= climb) {
        accounts += climb;
        break;
      }
      accounts += kept + 1;
      losses++;
      up = Math.max(0, up + kept * rise.keptStep) + rise.lostStep;
      if (up >= rise.limit) break;
      down = Math.max(0, down + kept * fall.keptStep + fall.lostStep);
    }
    runs++;
    total += accounts;
    squares += accounts * accounts;
  }
  const mean = total / runs;
  return {
    accounts: mean,
    method: 'simulated',
    standardError: Math.sqrt(Math.max(0, squares / runs - mean * mean) / runs),
  };
}
