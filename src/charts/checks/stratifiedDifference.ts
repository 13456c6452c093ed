import { Z_95 } from '../intervals/wilson.ts';
import type { SubgroupCount } from '../types.ts';

/** Counts of one group before and after. */
export interface Stratum {
  readonly before: SubgroupCount;
  readonly after: SubgroupCount;
}

export interface StratifiedDifference {
  /** Mantel-Haenszel weighted difference of rates within groups, after minus before */
  readonly difference: number;
  /** 95 % limits of that difference, by the normal approximation with each group's own binomial variance */
  readonly low: number;
  readonly high: number;
  /** Cochran-Mantel-Haenszel chi-square on 1 degree of freedom, without continuity correction */
  readonly chiSquare: number;
}

/**
 * The difference between before and after that is left when every group is compared with itself: what a moving mix cannot explain.
 * @returns null when no group has accounts on both sides, or nobody or everybody was lost
 * Source: Cochran WG, Biometrics 10:417-451, 1954; Mantel N and Haenszel W, JNCI 22:719-748, 1959 (references from memory).
 */
export function stratifiedDifference(strata: readonly Stratum[]): StratifiedDifference | null {
  let weighted = 0;
  let weights = 0;
  let excess = 0;
  let variance = 0;
  let spread = 0;
  for (const { before, after } of strata) {
    const n = before.accounts + after.accounts;
    if (before.accounts === 0 || after.accounts === 0) continue;
    const weight = (before.accounts * after.accounts) / n;
    weights += weight;
    weighted += weight * (after.lost / after.accounts - before.lost / before.accounts);
    const lost = before.lost + after.lost;
    spread += weight * weight * (binomialVariance(after) + binomialVariance(before));
    excess += after.lost - (after.accounts * lost) / n;
    if (n > 1) variance += (before.accounts * after.accounts * lost * (n - lost)) / (n * n * (n - 1));
  }
  if (weights === 0 || variance === 0) return null;
  const difference = weighted / weights;
  const reach = (Z_95 * Math.sqrt(spread)) / weights;
  return { difference, low: difference - reach, high: difference + reach, chiSquare: (excess * excess) / variance };
}

/** Variance of an observed proportion; a group of one account tells nothing of its spread. */
function binomialVariance({ lost, accounts }: SubgroupCount): number {
  const p = lost / accounts;
  return (p * (1 - p)) / accounts;
}
