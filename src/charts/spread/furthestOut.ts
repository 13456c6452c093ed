import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import type { SubgroupCount } from '../types.ts';

export interface FarPoint {
  /** its place among the counts given, from 0 */
  readonly at: number;
  /** distance from the rate in sigma */
  readonly z: number;
  /** points that many would have so many lost or more (above the rate), so few or fewer (below), with only chance acting */
  readonly expected: number;
}

/**
 * The points furthest from a rate, furthest first.
 * @param rate  strictly between 0 and 1
 */
export function furthestOut(counts: readonly SubgroupCount[], rate: number, most = 3): FarPoint[] {
  return counts
    .map(({ accounts, lost }, at) => ({ at, z: (lost - accounts * rate) / Math.sqrt(accounts * rate * (1 - rate)) }))
    .sort((x, y) => Math.abs(y.z) - Math.abs(x.z) || x.at - y.at)
    .slice(0, most)
    .map(({ at, z }) => {
      const { accounts, lost } = counts[at]!;
      const tail =
        z < 0 ? binomialCdf(lost, accounts, rate) : lost === 0 ? 1 : 1 - binomialCdf(lost - 1, accounts, rate);
      return { at, z, expected: tail * counts.length };
    });
}
