import chiSquareCdf from '@stdlib/stats-base-dists-chisquare-cdf';
import type { SubgroupCount } from '../types.ts';
import { freemanHalton } from './freemanHalton.ts';

export interface Homogeneity {
  readonly chiSquare: number;
  readonly degreesOfFreedom: number;
  readonly pValue: number;
  /** when an expected count is under 5 Fisher's test: 'exact', or 'simulated' where there are too many tables to go through; else 'chi-square' */
  readonly method: 'chi-square' | 'exact' | 'simulated';
  /** of a simulated pValue, else null */
  readonly standardError: number | null;
}

/**
 * Do groups lose accounts at the same rate?
 * @param groups  counts per group; groups without accounts are left out
 * @returns null for fewer than two groups, or when nobody or everybody was lost
 * Method: Pearson's chi-square for homogeneity of k proportions (Fleiss 1981, ch. 9, chapter from memory). When an expected count is under 5
 * (common practice), Fisher's exact test of the table of lost and kept by group (Freeman and Halton).
 * Example: 83, 90, 129, 70 of 86, 93, 136, 82 give X2 = 12.600411 on 3 degrees of freedom, p = 0.005585.
 */
export function homogeneity(groups: readonly SubgroupCount[], seed = 6): Homogeneity | null {
  const used = groups.filter((group) => group.accounts > 0);
  const accounts = used.reduce((sum, group) => sum + group.accounts, 0);
  const lost = used.reduce((sum, group) => sum + group.lost, 0);
  if (used.length < 2 || lost === 0 || lost === accounts) return null;
  const sizes = used.map((group) => group.accounts);
  const chiSquare = pearson(
    sizes,
    used.map((group) => group.lost),
    lost / accounts,
  );
  const degreesOfFreedom = used.length - 1;
  const rarer = Math.min(lost, accounts - lost);
  const sparse = sizes.some((n) => (n * rarer) / accounts < 5);
  if (!sparse) {
    const pValue = 1 - chiSquareCdf(chiSquare, degreesOfFreedom);
    return { chiSquare, degreesOfFreedom, pValue, method: 'chi-square', standardError: null };
  }
  const table = [used.map((group) => group.lost), used.map((group) => group.accounts - group.lost)];
  return { chiSquare, degreesOfFreedom, ...freemanHalton(table, { seed })! };
}

function pearson(sizes: readonly number[], lost: ArrayLike<number>, p: number): number {
  let sum = 0;
  for (let i = 0; i < sizes.length; i++) sum += (lost[i]! - sizes[i]! * p) ** 2 / (sizes[i]! * p * (1 - p));
  return sum;
}
