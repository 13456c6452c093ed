import { betaBinomialChances } from '../random/binomialChances.ts';
import type { CountChances } from '../random/countChances.ts';
import type { SubgroupCount } from '../types.ts';

/** What a stretch that holds one level says about accounts still to come. */
export interface Outlook {
  /** chances of the number lost among `accounts` accounts that make up `points` points */
  readonly lostAmong: (accounts: number, points?: number) => CountChances;
  /** expected rate, a fraction: a little towards one half of the observed one */
  readonly rate: number;
}

/**
 * Predictive distribution of what the next points will lose if nothing changes, the rate's own uncertainty included.
 * @param pooled       lost and accounts of a stretch that holds one level, accounts >= 1
 * @param correlation  intra-class correlation of accounts within a point, in [0, 1): above 0 when points vary more than the binomial allows
 * @param dispersion   variance of the points over the binomial's, >= 1: the stretch counts for so much less
 * Method: beta posterior of the rate from Jeffreys' prior, Beta(1/2, 1/2); beta-binomial for the count. With a correlation every point has a
 * rate of its own around the level; the variances of level and points are added and one beta distribution of that variance is taken
 * (exact in mean and variance, an approximation in shape).
 * Source: Gelman A et al, Bayesian Data Analysis, sections 1.3 and 2.8 (sections from memory).
 */
export function outlook(pooled: SubgroupCount, correlation = 0, dispersion = 1): Outlook {
  const a = pooled.lost / dispersion + 0.5;
  const b = (pooled.accounts - pooled.lost) / dispersion + 0.5;
  const rate = a / (a + b);
  const ofLevel = 1 / (a + b + 1);
  return {
    rate,
    lostAmong: (accounts, points = 1) =>
      betaBinomialChances(accounts, rate, ofLevel + ((1 - ofLevel) * correlation) / points),
  };
}

/** Chance of at most `most` lost. */
export function chanceOfAtMost({ first, chances }: CountChances, most: number): number {
  let sum = 0;
  for (let i = 0; i < chances.length && first + i <= most; i++) sum += chances[i]!;
  return Math.min(1, sum);
}

/** The narrowest counts that leave no more than `tail` of the chance out on either side. */
export function centralCounts({ first, chances }: CountChances, tail: number): { low: number; high: number } {
  let below = 0;
  let low = 0;
  while (low < chances.length - 1 && below + chances[low]! <= tail) below += chances[low++]!;
  let above = 0;
  let high = chances.length - 1;
  while (high > low && above + chances[high]! <= tail) above += chances[high--]!;
  return { low: first + low, high: first + high };
}
