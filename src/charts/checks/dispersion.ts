import chiSquareCdf from '@stdlib/stats-base-dists-chisquare-cdf';
import type { SubgroupCount } from '../types.ts';

export interface Dispersion {
  /** sum of squared standardised distances from the pooled rate */
  readonly chiSquare: number;
  readonly degreesOfFreedom: number;
  /** chance of at least this much spread when only the binomial acts */
  readonly pValue: number;
  /** chiSquare / degreesOfFreedom: near 1 when binomial */
  readonly ratio: number;
}

/**
 * Binomial dispersion test: do the points vary more than chance alone allows?
 * @returns null for fewer than 2 points, or when nobody or everybody was lost
 * Source: Fisher's index of dispersion for binomial counts; X2 = sum (p_i - p)^2 / (p(1-p)/n_i) on k-1 degrees of freedom.
 */
export function dispersion(counts: readonly SubgroupCount[]): Dispersion | null {
  const accounts = counts.reduce((sum, count) => sum + count.accounts, 0);
  const lost = counts.reduce((sum, count) => sum + count.lost, 0);
  if (counts.length < 2 || lost === 0 || lost === accounts) return null;
  const p = lost / accounts;
  const chiSquare = counts.reduce((sum, { accounts: n, lost: d }) => sum + (d / n - p) ** 2 / ((p * (1 - p)) / n), 0);
  const degreesOfFreedom = counts.length - 1;
  return {
    chiSquare,
    degreesOfFreedom,
    pValue: 1 - chiSquareCdf(chiSquare, degreesOfFreedom),
    ratio: chiSquare / degreesOfFreedom,
  };
}
