import { maxLogLikelihood } from '../logLikelihood.ts';
import { simulateHistories } from '../standing/histories.ts';
import type { SubgroupCount } from '../types.ts';

export interface Steadiness {
  /** last point before the split that tells the two halves most apart, numbered within the points given */
  readonly splitAfter: number;
  /** largest binomial log likelihood ratio over all splits */
  readonly ratio: number;
  /** chance of a ratio at least this large with one rate throughout */
  readonly pValue: number;
}

const HISTORIES = 999;

/**
 * Is one rate behind all these points? Largest likelihood-ratio split, its null distribution by seeded simulation at the pooled rate.
 * @param overdispersion  factor by which the points vary more than the binomial; the ratio shrinks by it (quasi-likelihood)
 * @returns null when there are fewer than 4 points, or no loss, or no account kept: nothing could be told apart
 */
export function steadiness(counts: readonly SubgroupCount[], overdispersion = 1, seed = 5): Steadiness | null {
  const accounts = counts.map((count) => count.accounts);
  const all = accounts.reduce((sum, n) => sum + n, 0);
  const lost = counts.reduce((sum, count) => sum + count.lost, 0);
  if (counts.length < 4 || lost === 0 || lost === all) return null;
  const here = largestSplit(
    accounts,
    counts.map((count) => count.lost),
  );
  let atLeast = 0;
  simulateHistories(
    { accounts, baselineLast: accounts.length, excluded: [] },
    [{ from: 1, rate: lost / all }],
    HISTORIES,
    seed,
    (simulated) => {
      if (largestSplit(accounts, simulated).ratio >= here.ratio / overdispersion) atLeast++;
    },
  );
  return { ...here, pValue: (1 + atLeast) / (1 + HISTORIES) };
}

function largestSplit(accounts: readonly number[], lost: ArrayLike<number>): { splitAfter: number; ratio: number } {
  let all = 0;
  let allLost = 0;
  for (let i = 0; i < accounts.length; i++) {
    all += accounts[i]!;
    allLost += lost[i]!;
  }
  const whole = maxLogLikelihood(allLost, all);
  let n = 0;
  let d = 0;
  let ratio = 0;
  let splitAfter = 1;
  for (let i = 0; i + 1 < accounts.length; i++) {
    n += accounts[i]!;
    d += lost[i]!;
    const here = maxLogLikelihood(d, n) + maxLogLikelihood(allLost - d, all - n) - whole;
    if (here > ratio) {
      ratio = here;
      splitAfter = i + 1;
    }
  }
  return { splitAfter, ratio };
}
