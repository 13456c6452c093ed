import { poolBaseline, recommendedBaseline } from '../baseline.ts';
import { type ExactLimits, exactLimits } from '../limits/exactLimits.ts';
import type { Chart, SubgroupCount } from '../types.ts';

export interface PChartOptions {
  /** last baseline point; recommended from the number of points when absent */
  readonly baselineLast?: number;
  /** baseline points left out by decision */
  readonly excluded?: readonly number[];
}

/**
 * p chart of lost accounts per subgroup, equal or unequal sizes.
 * @param counts  one or more subgroups in time order, each with accounts >= 1 and 0 <= lost <= accounts
 * @returns       points with value = lost / accounts, sigma = sqrt(p(1-p)/n) at each point's own n, limits center -/+ 3 sigma clipped to [0, 1],
 *                and beside them the exact binomial limits at the same tail areas
 * @throws RangeError when there is no subgroup
 * Method: center is the baseline's pooled rate, frozen for later points. Assumes that accounts leave independently of each other.
 * Source: NIST/SEMATECH e-Handbook of Statistical Methods, section 6.3.3.2, Proportions Control Charts.
 * Example: 30 counts summing to 347 at n = 50 have center 0.2313 and limits 0.0524 to 0.4102.
 */
export function pChart(counts: readonly SubgroupCount[], options: PChartOptions = {}): Chart {
  const last = Math.min(options.baselineLast ?? recommendedBaseline(counts.length), counts.length);
  const baseline = poolBaseline(counts, last, options.excluded);
  const center = baseline.lost / baseline.accounts;
  const firstSize = counts[0]!.accounts;
  const exactAt = new Map<number, ExactLimits>();
  return {
    kind: 'p',
    sigmaZ: 1,
    subgroupSize: counts.every((count) => count.accounts === firstSize) ? firstSize : null,
    center,
    baseline,
    points: counts.map(({ accounts, lost }, i) => {
      const sigma = Math.sqrt((center * (1 - center)) / accounts);
      const exact = exactAt.get(accounts) ?? exactLimits(accounts, center);
      exactAt.set(accounts, exact);
      return {
        index: i + 1,
        accounts,
        lost,
        value: lost / accounts,
        sigma,
        lower: Math.max(0, center - 3 * sigma),
        upper: Math.min(1, center + 3 * sigma),
        exactLower: exact.lowest / accounts,
        exactUpper: exact.highest / accounts,
      };
    }),
  };
}
