import { Z_95 } from '../intervals/wilson.ts';
import type { Interval } from '../types.ts';

/** Mean of a sample with its standard error. */
export interface MeanAmount {
  readonly mean: number;
  readonly standardError: number;
}

/**
 * Lifetime value: mean amount per period times mean lifetime in periods, undiscounted.
 * @param amount    mean > 0
 * @param lifetime  an interval on the log scale, all limits > 0
 * Method: delta method on the log of the product, the two parts taken as independent: accounts that pay more are taken to stay as long as
 * others. The standard error of the log of the lifetime is read back from each side of its interval.
 */
export function lifetimeValue(amount: MeanAmount, lifetime: Interval, z = Z_95): Interval {
  const estimate = amount.mean * lifetime.estimate;
  const ofAmount = (z * amount.standardError) / amount.mean;
  const reach = (limit: number): number =>
    Math.exp(Math.hypot(ofAmount, Math.abs(Math.log(limit / lifetime.estimate))));
  return { estimate, low: estimate / reach(lifetime.low), high: estimate * reach(lifetime.high) };
}
