import type { Chart, SubgroupCount } from '../types.ts';
import { type PChartOptions, pChart } from './pChart.ts';
import { pPrimeChart } from './pPrimeChart.ts';
import { smoother } from './smoothed.ts';

/** How strongly an EWMA smooths and how wide its limits are. */
export interface Smoothing {
  /** weight of the newest point, in (0, 1] */
  readonly lambda: number;
  /** L: limits in sigmas of the smoothed value */
  readonly width: number;
}

/**
 * What is taken when nothing else is said. Lambda 0.1 sees small lasting moves soonest among the common choices, and smooths enough for
 * skewed counts to be near to normal; with this width an old chart of normal values raises a false flag about once in 500 points.
 * Source: Lucas JM and Saccucci MS, Technometrics 32:1-12, 1990 (tables as quoted in textbooks).
 */
export const USUAL_SMOOTHING: Smoothing = { lambda: 0.1, width: 2.814 };

export interface EwmaChartOptions extends PChartOptions {
  readonly smoothing?: Smoothing;
  /** true to widen sigma by how much the points really vary from one to the next, as a Laney p' chart does */
  readonly widened?: boolean;
}

/**
 * EWMA chart of the lost share of equal or unequal subgroups.
 * @param counts  as for pChart
 * @returns       a chart whose values are the smoothed shares, sigma that of the smoothed value, limits center -/+ width sigma clipped to
 *                [0, 1]: they start narrow and widen with the chart's age; accounts and lost are the point's own
 * @throws RangeError when there is no subgroup
 * Method: see smoother; the center is the baseline's pooled rate, frozen, and the average starts there before the first point.
 * Source: Roberts SW, Technometrics 1:239-250, 1959 (reference from memory); Lucas and Saccucci 1990.
 */
export function ewmaChart(counts: readonly SubgroupCount[], options: EwmaChartOptions = {}): Chart {
  const smoothing = options.smoothing ?? USUAL_SMOOTHING;
  const { lambda, width } = smoothing;
  const plain = options.widened ? pPrimeChart(counts, options) : pChart(counts, options);
  const smooth = smoother(lambda, plain.center);
  return {
    ...plain,
    kind: 'ewma',
    smoothing,
    points: plain.points.map(({ exactLower: _lower, exactUpper: _upper, ...point }) => {
      const { value, sigma } = smooth(point.value, point.sigma);
      return {
        ...point,
        value,
        sigma,
        lower: Math.max(0, plain.center - width * sigma),
        upper: Math.min(1, plain.center + width * sigma),
      };
    }),
  };
}
