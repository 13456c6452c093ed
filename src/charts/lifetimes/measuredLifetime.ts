import { Z_95 } from '../intervals/wilson.ts';
import type { RiskSet } from '../survival/types.ts';
import type { Interval } from '../types.ts';

/** Periods at the end of the measured ones whose pooled hazard is taken to go on: a year of months, which holds one yearly renewal. */
const TAIL_PERIODS = 12;
/** Fewest periods before the tail's: accounts leave in their first months as they never do again. */
const LEAST_BEFORE_TAIL = 4;

/** Periods pooled for the tail: the last 12, or the later half where so many would reach into the first months. Our choice, no source. */
export function tailPeriods(horizon: number): number {
  return horizon >= TAIL_PERIODS + LEAST_BEFORE_TAIL ? TAIL_PERIODS : Math.min(TAIL_PERIODS, Math.ceil(horizon / 2));
}

/** What comes after the last well-measured period, if the hazard stays as it was there. */
export interface LifetimeTail {
  /** first and last period whose losses are pooled, numbered from 1 */
  readonly from: number;
  readonly to: number;
  readonly lost: number;
  readonly atRisk: number;
  /** pooled hazard per period */
  readonly hazard: number;
  /** mean number of later periods, per account at the start */
  readonly periods: number;
}

export interface MeasuredLifetime {
  /** periods measured: the horizon of the restricted mean */
  readonly horizon: number;
  /** share still there after each period; index 0 is the start */
  readonly survival: readonly number[];
  /** mean number of the first `horizon` periods that are begun; nothing is assumed */
  readonly restricted: Interval;
  /** null when nobody was lost in the last periods, so that no hazard can be carried on, or when nobody is left */
  readonly tail: LifetimeTail | null;
  /** restricted mean and tail together; null when a tail is wanted and cannot be given */
  readonly total: Interval | null;
}

/**
 * Mean lifetime in periods begun, from a measured hazard per period: the restricted mean up to the last period given, and beyond it a tail
 * at the pooled hazard of the last `tailPeriods`.
 * @param sets  period 1, 2, … in order without gaps, each with atRisk >= 1; at least one
 * Method: S(k) = product of (1 - h_j); restricted mean = sum of S(k) over k = 0 … m-1 (present at the start of each period); tail = S(m)/h.
 * Errors by the delta method from independent binomial hazards, of which tail and restricted mean are both functions; limits on the log
 * scale, so that they stay positive. With a constant hazard p measured the total is 1/p.
 * Source: delta method with Greenwood's variance of the hazards; a closed form for geometric lifetimes checks it.
 */
export function measuredLifetime(sets: readonly RiskSet[], z = Z_95): MeasuredLifetime {
  const horizon = sets.length;
  const hazards = sets.map(({ lost, atRisk }) => lost / atRisk);
  const survival = [1];
  for (const hazard of hazards) survival.push(survival.at(-1)! * (1 - hazard));
  const restricted = survival.slice(0, horizon).reduce((sum, share) => sum + share, 0);
  const left = survival[horizon]!;

  const last = sets.slice(-tailPeriods(horizon));
  const lost = last.reduce((sum, set) => sum + set.lost, 0);
  const atRisk = last.reduce((sum, set) => sum + set.atRisk, 0);
  const hazard = lost / atRisk;
  const tail: LifetimeTail | null =
    left === 0 || lost === 0
      ? null
      : { from: horizon - last.length + 1, to: horizon, lost, atRisk, hazard, periods: left / hazard };

  const areas = areasAfter(survival, horizon);
  const gradient = (withTail: boolean): number[] =>
    sets.map((set, j) => {
      // With everybody lost in a period nothing comes after it, and its own variance is zero.
      if (hazards[j] === 1) return 0;
      const scale = 1 - hazards[j]!;
      const inTail = withTail && tail && j + 1 >= tail.from ? (-tail.periods / tail.hazard) * (set.atRisk / atRisk) : 0;
      return -(areas[j]! + (withTail && tail ? tail.periods : 0)) / scale + inTail;
    });
  const interval = (estimate: number, slopes: readonly number[]): Interval => {
    const variance = sets.reduce(
      (sum, set, j) => sum + (slopes[j]! ** 2 * hazards[j]! * (1 - hazards[j]!)) / set.atRisk,
      0,
    );
    const reach = Math.exp((z * Math.sqrt(variance)) / estimate);
    return { estimate, low: estimate / reach, high: estimate * reach };
  };
  const part = interval(restricted, gradient(false));
  const total = left === 0 ? part : tail === null ? null : interval(restricted + tail.periods, gradient(true));
  return {
    horizon,
    survival,
    // Nobody begins more periods than there are.
    restricted: { ...part, high: Math.min(horizon, part.high) },
    tail,
    total,
  };
}

/** For each period: the part of the restricted mean that lies after it, sum of S(k) over k from its end to the horizon. */
function areasAfter(survival: readonly number[], horizon: number): number[] {
  const areas = new Array<number>(horizon).fill(0);
  for (let j = horizon - 2; j >= 0; j--) areas[j] = areas[j + 1]! + survival[j + 1]!;
  return areas;
}
