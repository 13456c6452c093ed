import { type Adjusted, ascending, decided } from './types.ts';

/**
 * Step-up adjustment: the smallest, over this p value and all larger ones, of p times the factor of its rank; at most 1.
 * @param p       p values in [0, 1], any order
 * @param factor  for rank 1 (smallest) to m
 */
function stepUp(p: readonly number[], level: number, factor: (rank: number, m: number) => number): Adjusted {
  const adjusted = new Array<number>(p.length);
  let least = 1;
  for (const [back, at] of ascending(p).reverse().entries()) {
    least = Math.min(least, p[at]! * factor(p.length - back, p.length));
    adjusted[at] = least;
  }
  return decided(adjusted, level);
}

/**
 * Benjamini and Hochberg: of everything called a finding, the expected part that is none is at most `level`, when the tests are independent
 * or positively dependent.
 * @param p      p values in [0, 1], any order
 * @param level  the false discovery rate allowed, e.g. 0.05
 * Source: Benjamini Y and Hochberg Y, JRSS B 57:289-300, 1995. Example: of its 15 p values 4 are rejected at 0.05.
 */
export function benjaminiHochberg(p: readonly number[], level: number): Adjusted {
  return stepUp(p, level, (rank, m) => m / rank);
}

/**
 * Benjamini and Yekutieli: the same promise under any dependence, at the price of the factor 1 + 1/2 + ... + 1/m.
 * Source: Benjamini Y and Yekutieli D, Annals of Statistics 29:1165-1188, 2001 (reference from memory).
 */
export function benjaminiYekutieli(p: readonly number[], level: number): Adjusted {
  const harmonic = p.reduce((sum, _, i) => sum + 1 / (i + 1), 0);
  return stepUp(p, level, (rank, m) => (harmonic * m) / rank);
}

/**
 * Hochberg: the chance of even one false finding is at most `level`, for independent or positively dependent tests.
 * Source: Hochberg Y, Biometrika 75:800-802, 1988 (reference from memory).
 */
export function hochberg(p: readonly number[], level: number): Adjusted {
  return stepUp(p, level, (rank, m) => m - rank + 1);
}
