import { exponentialGaps, wholeDayGaps } from '../series/exponential.ts';
import type { SeriesFamily } from '../series/family.ts';
import type { Chart } from '../types.ts';
import { type GapChartOptions, gapChart } from './gapChart.ts';

/** Whole numbers are taken as whole days, between which losses fall at any hour; anything else as times measured as finely as given. */
export function timeFamily(gaps: readonly number[]): SeriesFamily {
  return gaps.every(Number.isInteger) ? wholeDayGaps : exponentialGaps;
}

/**
 * t chart: days from one loss to the next.
 *
 * Two losses on one day are a gap of 0 days. Nothing is added to it or left out: whole days have a distribution of their own, in which a 0
 * is as likely as it should be (see wholeDayGaps). The chart takes the number of customers as about constant; with twice as many, losses
 * come twice as often at the same share lost.
 * @param gaps  one or more numbers >= 0 in time order
 * @returns     center = median, lower and upper = quantiles at the 3 sigma tail areas, edges = the same for all zones, sigma = mean;
 *              `accounts` of a point is the lost account alone
 * @throws RangeError when there is no gap
 * Source: exponential quantiles in closed form. Nelson's power (see gapsByPower) is for gaps that scatter otherwise.
 */
export function tChart(gaps: readonly number[], options: GapChartOptions = {}): Chart {
  return gapChart({ kind: 't', scale: 'days', family: timeFamily(gaps), accountsIn: () => 1 }, gaps, options);
}
