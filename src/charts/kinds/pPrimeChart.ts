import { sigmaOfZ } from '../checks/sigmaOfZ.ts';
import type { Chart, SubgroupCount } from '../types.ts';
import { type PChartOptions, pChart } from './pChart.ts';

/**
 * Laney p' chart: a p chart whose sigma is widened (or narrowed) by how much the points really vary from one to the next.
 * @param counts  as for pChart; at least two used baseline points are needed for a moving range
 * @returns       the p chart with sigma times sigmaZ, limits from it, and sigmaZ; sigmaZ is 1 when there is no moving range, or the rate is 0 or 1
 * @throws RangeError when there is no subgroup
 * Method: z_i = (p_i - center) / sigma_i; sigmaZ = mean |z_i - z_(i-1)| over neighbouring baseline points / 1.128. A single shift inside the
 * baseline adds one large range only, where the dispersion test counts every point after it.
 * Source: Laney DB, Improved control charts for attributes, Quality Engineering 14(4):531-537, 2002 (formulas seen in secondary sources).
 * Example: 20 weeks of A&E attendances seen within four hours have sigmaZ = 10.640; 16 weeks lie outside the p chart, none outside this one.
 */
export function pPrimeChart(counts: readonly SubgroupCount[], options: PChartOptions = {}): Chart {
  const plain = pChart(counts, options);
  const { baseline, center } = plain;
  const used = plain.points.filter((point) => point.index <= baseline.last && !baseline.excluded.includes(point.index));
  const sigmaZ = sigmaOfZ(used.map((point) => (point.sigma > 0 ? (point.value - center) / point.sigma : 0)));
  return {
    ...plain,
    kind: 'p-prime',
    sigmaZ,
    // The exact limits of the plain chart are the binomial's, which these points do not follow.
    points: plain.points.map(({ exactLower: _lower, exactUpper: _upper, ...point }) => {
      const sigma = point.sigma * sigmaZ;
      return { ...point, sigma, lower: Math.max(0, center - 3 * sigma), upper: Math.min(1, center + 3 * sigma) };
    }),
  };
}
