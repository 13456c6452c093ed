import { geometricGaps } from '../series/geometric.ts';
import type { Chart } from '../types.ts';
import { type GapChartOptions, gapChart } from './gapChart.ts';

/**
 * g chart: accounts kept from one loss to the next, for losses too rare to count per subgroup.
 *
 * The account that is lost does not count in its gap: a loss right after a loss is a gap of 0, and with a share p lost the mean gap is
 * (1 - p)/p. `accounts` of a point does count it, so that the points' accounts, with those since the last loss, add up to all.
 * @param gaps  one or more whole numbers >= 0 in order of the accounts; the first is counted from the first account, which for independent
 *              losses is a gap like any other
 * @returns     center = median, lower and upper = the last gaps within the 3 sigma tail areas, edges = the same for all zones, sigma =
 *              sqrt(mean (mean + 1)), mean = that of the baseline
 * @throws RangeError when there is no gap
 * Method: exact geometric quantiles. Limits at mean -/+ 3 sigma would flag 1.8 % of the gaps with nothing changed, 14 times the 0.13 % they
 * are taken for. Even a gap of 0 is mostly too likely for a lower limit: then none exists, and single short gaps are never flagged.
 * Source: see geometricEdges. Example: [4, 12, 30, 7, 55, 18, 3, 22, 41, 9, 16, 27] has mean 20.33, median 14, upper limit 137.
 */
export function gChart(gaps: readonly number[], options: GapChartOptions = {}): Chart {
  return gapChart({ kind: 'g', scale: 'accounts', family: geometricGaps, accountsIn: (gap) => gap + 1 }, gaps, options);
}
