import { tenureInWords } from '../../census/tenure.ts';
import { type Day, isoDay } from '../../days.ts';
import { revenueTotals } from '../../verdict/questions/revenue/pooled.ts';
import type { RevenueReading } from './readRevenue.ts';

const iso = (day: Day | null | undefined): string | null => (day === null || day === undefined ? null : isoDay(day));

/** The revenue question's part of the JSON: shares as fractions of the revenue at the start, sums in the unit of the amount column. */
export function revenueFigures(reading: RevenueReading): Record<string, unknown> {
  const { verdict, plan, revenue } = reading;
  const shared = {
    outcome: verdict.outcome,
    tenure: tenureInWords(plan.tenure),
    subgroupSize: plan.subgroupSize,
    currencies: revenue.currencies,
    since: verdict.since ? { ...verdict.since, start: iso(verdict.since.start) } : null,
    before: verdict.before,
    after: verdict.after,
    difference: verdict.difference,
  };
  if (reading.kind === 'refused')
    return { ...shared, refused: reading.refusal, currency: null, totals: null, chart: null, trust: null };
  const { points, judgement, currency, amountsChange } = reading;
  const { chart, series, signals, trust } = judgement;
  return {
    ...shared,
    refused: null,
    currency,
    /** false: one amount for each account, so that contraction and expansion cannot be seen */
    amountsChange,
    totals: revenueTotals(points),
    autocorrelation: series?.neighbours ?? null,
    steadiness: series?.checks ? { splitAfter: series.checks.splitAfter, pValue: series.checks.pValue } : null,
    trust,
    chart: chart && {
      kind: chart.kind,
      center: chart.center,
      averageMovingRange: chart.averageMovingRange,
      movingRangeUpper: chart.rangeUpper,
      baseline: chart.baseline,
      points: chart.points.map((point, i) => {
        const subgroup = points[i];
        if (!subgroup) return point;
        const { revenue: atStart, lostRevenue, contraction, expansion, largest } = subgroup;
        return {
          ...point,
          movingRange: chart.movingRanges[i] ?? null,
          subgroup: subgroup.index,
          revenue: atStart,
          lostRevenue,
          contraction: contraction / atStart,
          expansion: expansion / atStart,
          logo: subgroup.lost / subgroup.accounts,
          largestShare: largest / atStart,
          withoutAmount: subgroup.withoutAmount,
          negative: subgroup.negative,
          firstStart: iso(subgroup.firstStart),
          lastStart: iso(subgroup.lastStart),
          asOf: iso(subgroup.asOf),
        };
      }),
      signals,
    },
  };
}
