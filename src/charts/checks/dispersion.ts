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
 * Binomial dispersion test: do the points vary around the pooled rate of their stretch more than chance alone allows?
 * @param stretches  points in one or more stretches, each with a rate of its own; stretches in which nobody or everybody was lost,
 *                   or of a single point, tell nothing and are left out
 * @returns null when no stretch is left
 * Source: Fisher's index of dispersion for binomial counts; X2 = sum (p_i - p)^2 / (p(1-p)/n_i), on points minus stretches degrees of freedom.
 */
export function dispersion(...stretches: readonly (readonly SubgroupCount[])[]): Dispersion | null {
  let chiSquare = 0;
  let degreesOfFreedom = 0;
  for (const counts of stretches) {
    const accounts = counts.reduce((sum, count) => sum + count.accounts, 0);
    const lost = counts.reduce((sum, count) => sum + count.lost, 0);
    if (counts.length < 2 || lost === 0 || lost === accounts) continue;
    const p = lost / accounts;
    chiSquare += counts.reduce((sum, { accounts: n, lost: d }) => sum + (d / n - p) ** 2 / ((p * (1 - p)) / n), 0);
    degreesOfFreedom += counts.length - 1;
  }
  if (degreesOfFreedom === 0) return null;
  return {
    chiSquare,
    degreesOfFreedom,
    pValue: 1 - chiSquareCdf(chiSquare, degreesOfFreedom),
    ratio: chiSquare / degreesOfFreedom,
  };
}
