import chiSquareCdf from '@stdlib/stats-base-dists-chisquare-cdf';
import { seededUniform } from '../random/uniform.ts';
import type { SubgroupCount } from '../types.ts';

export interface Homogeneity {
  readonly chiSquare: number;
  readonly degreesOfFreedom: number;
  readonly pValue: number;
  /** 'chi-square', or 'exact' when an expected count is under 5: the conditional distribution, by seeded simulation */
  readonly method: 'chi-square' | 'exact';
}

/** Draws that the conditional test may cost. */
const DRAW_BUDGET = 2_000_000;

/**
 * Do groups lose accounts at the same rate?
 * @param groups  counts per group; groups without accounts are left out
 * @returns null for fewer than two groups, or when nobody or everybody was lost
 * Method: Pearson's chi-square for homogeneity of k proportions (Fleiss 1981, ch. 9, chapter from memory). When an expected count is under 5,
 * the same statistic against its exact conditional distribution given the totals, sampled.
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
  const pValue = sparse
    ? conditionalPValue(sizes, rarer, chiSquare, seed)
    : 1 - chiSquareCdf(chiSquare, degreesOfFreedom);
  return { chiSquare, degreesOfFreedom, pValue, method: sparse ? 'exact' : 'chi-square' };
}

function pearson(sizes: readonly number[], lost: ArrayLike<number>, p: number): number {
  let sum = 0;
  for (let i = 0; i < sizes.length; i++) sum += (lost[i]! - sizes[i]! * p) ** 2 / (sizes[i]! * p * (1 - p));
  return sum;
}

function conditionalPValue(sizes: readonly number[], events: number, observed: number, seed: number): number {
  const uniform = seededUniform(seed);
  const total = sizes.reduce((sum, n) => sum + n, 0);
  const tables = Math.max(200, Math.min(5_000, Math.floor(DRAW_BUDGET / events)));
  let atLeast = 0;
  for (let table = 0; table < tables; table++) {
    const rest = [...sizes];
    const lost = new Array<number>(sizes.length).fill(0);
    for (let event = 0; event < events; event++) {
      let pick = uniform() * (total - event);
      let group = 0;
      while (group < rest.length - 1 && pick >= rest[group]!) {
        pick -= rest[group]!;
        group++;
      }
      rest[group]!--;
      lost[group]!++;
    }
    if (pearson(sizes, lost, events / total) >= observed * (1 - 1e-12)) atLeast++;
  }
  return (1 + atLeast) / (1 + tables);
}
