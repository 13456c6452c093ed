import type { Chart } from '../../../charts/types.ts';
import type { PooledRate } from '../../types.ts';
import type { RevenuePoint } from './judgeRevenue.ts';

/** A stretch of points: the mean of their lost shares with its interval, and what it is made of. */
export interface RevenueRate extends PooledRate {
  readonly points: number;
  readonly revenue: number;
  readonly lostRevenue: number;
}

/** 97.5 % point of the normal distribution. */
const Z = 1.959964;

/**
 * The points first to last as one: the mean of their ratios, as the centre line is one, and the 95 % interval that the points' own spread
 * (sigma from the moving ranges) gives that mean, kept within 0 and 1.
 */
export function pooledRevenue(chart: Chart, points: readonly RevenuePoint[], first: number, last: number): RevenueRate {
  const some = points.slice(first - 1, last);
  const total = (of: (point: RevenuePoint) => number): number => some.reduce((sum, point) => sum + of(point), 0);
  const rate = total(({ lostRevenue, revenue }) => lostRevenue / revenue) / some.length;
  const half = (Z * (chart.points[0]?.sigma ?? 0)) / Math.sqrt(some.length);
  return {
    rate,
    low: Math.max(0, rate - half),
    high: Math.min(1, rate + half),
    points: some.length,
    accounts: total(({ accounts }) => accounts),
    lost: total(({ lost }) => lost),
    revenue: total(({ revenue }) => revenue),
    lostRevenue: total(({ lostRevenue }) => lostRevenue),
  };
}

/** Totals over all points, each over the revenue at the start. */
export interface RevenueTotals {
  readonly revenue: number;
  readonly lost: number;
  readonly contraction: number;
  readonly expansion: number;
  readonly logo: number;
}

/** @returns null when there is no revenue to divide by */
export function revenueTotals(points: readonly RevenuePoint[]): RevenueTotals | null {
  const total = (of: (point: RevenuePoint) => number): number => points.reduce((sum, point) => sum + of(point), 0);
  const revenue = total((point) => point.revenue);
  if (revenue <= 0) return null;
  return {
    revenue,
    lost: total(({ lostRevenue }) => lostRevenue) / revenue,
    contraction: total(({ contraction }) => contraction) / revenue,
    expansion: total(({ expansion }) => expansion) / revenue,
    logo: total(({ lost }) => lost) / total(({ accounts }) => accounts),
  };
}
