import type { Interval } from '../types.ts';

/**
 * Interval for the difference of two independent estimates, first minus second, from the interval of each: every limit takes the sides of
 * the two intervals that lie towards it, so that lopsided intervals stay lopsided.
 * Source: method of variance estimates recovery, Zou GY and Donner A, Statistics in Medicine 27:1693-1702, 2008 (reference from memory);
 * Newcombe's method 10 is the same with Wilson intervals.
 */
export function intervalDifference(first: Interval, second: Interval): Interval {
  const estimate = first.estimate - second.estimate;
  return {
    estimate,
    low: estimate - Math.hypot(first.estimate - first.low, second.high - second.estimate),
    high: estimate + Math.hypot(first.high - first.estimate, second.estimate - second.low),
  };
}
