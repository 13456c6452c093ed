import { FULL_BASELINE, recommendedBaseline } from '../baseline.ts';
import type { Chart } from '../types.ts';
import type { PChartOptions } from './pChart.ts';

/** 3 / d2(2) as the tables print it: from a mean moving range to three sigma. */
const THREE_SIGMA = 2.66;
/** D4(2) as the tables print it: the upper limit of a moving range. */
const RANGE_LIMIT = 3.267;

/** One value of the chart, with the counts it stands for. */
export interface IndividualValue {
  readonly value: number;
  readonly accounts: number;
  readonly lost: number;
}

/** Distances between neighbours: one fewer than there are values. */
export function movingRanges(values: readonly number[]): number[] {
  return values.slice(1).map((value, i) => Math.abs(value - values[i]!));
}

export interface IndividualsLimits {
  readonly center: number;
  readonly averageMovingRange: number;
  readonly sigma: number;
  readonly lower: number;
  readonly upper: number;
  /** upper limit of the moving ranges; their lower one is 0 */
  readonly rangeUpper: number;
}

/**
 * Limits of individual values from their mean moving range of span 2.
 * @param values  n >= 1 finite values in time order, any unit; limits come back in that unit, not clipped
 * @returns       with a single value, or values that are all equal, the mean moving range and sigma are 0 and the limits lie on the centre line
 * @throws RangeError when there is no value
 * Method: center -/+ 2.66 MRbar, moving range limit 3.267 MRbar (3 / d2 and D4 for two values, as printed). Assumes independent points:
 * positive autocorrelation makes the limits too narrow.
 * Source: NIST/SEMATECH e-Handbook of Statistical Methods, section 6.3.2.2 (section number from memory).
 * Example: 49.6 47.6 49.9 51.3 47.8 51.2 52.6 52.4 53.6 52.1 have center 50.81, MRbar 1.8778, limits 45.815 to 55.805.
 */
export function individualsLimits(values: readonly number[]): IndividualsLimits {
  if (values.length === 0) throw new RangeError('individual limits need at least one value');
  const mean = (list: readonly number[]): number => list.reduce((sum, x) => sum + x, 0) / list.length;
  const center = mean(values);
  const ranges = movingRanges(values);
  const averageMovingRange = ranges.length === 0 ? 0 : mean(ranges);
  const reach = THREE_SIGMA * averageMovingRange;
  return {
    center,
    averageMovingRange,
    sigma: reach / 3,
    lower: center - reach,
    upper: center + reach,
    rangeUpper: RANGE_LIMIT * averageMovingRange,
  };
}

export interface IndividualsChart extends Chart {
  readonly kind: 'individuals';
  readonly averageMovingRange: number;
  /** one a point; null for the first */
  readonly movingRanges: readonly (number | null)[];
  readonly rangeUpper: number;
}

/**
 * Individuals chart with its moving ranges, for ratios that are no counts.
 * @param values   one or more points in time order; finite ratios
 * @param options  as for pChart; moving ranges of the limits are taken between neighbouring used baseline points
 * @param possible lowest and highest value there can be; the limits are clipped to it. Default: 0 and no upper end
 * @returns        center = mean of the baseline's values (not the pooled ratio: each subgroup counts once), frozen for later points
 * @throws RangeError when no baseline point is left
 * Method and source: see individualsLimits.
 */
export function individualsChart(
  values: readonly IndividualValue[],
  options: PChartOptions = {},
  possible: readonly [number, number] = [0, Number.POSITIVE_INFINITY],
): IndividualsChart {
  const last = Math.min(options.baselineLast ?? recommendedBaseline(values.length), values.length);
  const excluded = (options.excluded ?? []).filter((point) => point <= last);
  const used = values.slice(0, last).filter((_, i) => !excluded.includes(i + 1));
  const limits = individualsLimits(used.map(({ value }) => value));
  const total = (of: 'accounts' | 'lost'): number => used.reduce((sum, point) => sum + point[of], 0);
  const ranges = movingRanges(values.map(({ value }) => value));
  const firstSize = values[0]!.accounts;
  return {
    kind: 'individuals',
    sigmaZ: 1,
    subgroupSize: values.every(({ accounts }) => accounts === firstSize) ? firstSize : null,
    center: limits.center,
    baseline: {
      first: 1,
      last,
      excluded,
      provisional: used.length < FULL_BASELINE,
      accounts: total('accounts'),
      lost: total('lost'),
    },
    averageMovingRange: limits.averageMovingRange,
    movingRanges: values.map((_, i) => (i === 0 ? null : ranges[i - 1]!)),
    rangeUpper: limits.rangeUpper,
    points: values.map(({ value, accounts, lost }, i) => ({
      index: i + 1,
      accounts,
      lost,
      value,
      sigma: limits.sigma,
      lower: Math.max(possible[0], limits.lower),
      upper: Math.min(possible[1], limits.upper),
    })),
  };
}
