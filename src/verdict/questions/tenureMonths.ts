import type { TenureCounts } from '../../census/hazard.ts';
import { wilsonInterval } from '../../charts/intervals/wilson.ts';
import { kaplanMeier } from '../../charts/survival/kaplanMeier.ts';
import { nelsonAalen } from '../../charts/survival/nelsonAalen.ts';
import { survivalInterval } from '../../charts/survival/survivalInterval.ts';
import { type SurvivalQuantile, survivalQuantile } from '../../charts/survival/survivalQuantile.ts';
import type { RiskSet } from '../../charts/survival/types.ts';
import type { TenureMonth } from './planFindings.ts';

/** A month is well measured with this many accounts at risk: with fewer, one account more or less is over three points. Our choice, no source. */
export const LEAST_AT_RISK = 30;

/** The months from the first on that are well measured, as risk sets; the first that is not ends them. */
export function measuredMonths(counts: Pick<TenureCounts, 'months'>): RiskSet[] {
  const ends = counts.months.findIndex(({ atRisk }) => atRisk < LEAST_AT_RISK);
  return counts.months
    .slice(0, ends < 0 ? undefined : ends)
    .map(({ month, atRisk, lost }) => ({ time: month, atRisk, lost }));
}

/** Hazard and survival by month of tenure, with their limits. */
export function tenureMonths(sets: readonly RiskSet[], risky: ReadonlySet<number>): TenureMonth[] {
  const cumulative = nelsonAalen(sets);
  return kaplanMeier(sets).map((step, i) => {
    const limits = survivalInterval(step);
    return {
      month: step.time,
      atRisk: step.atRisk,
      lost: step.lost,
      hazard: wilsonInterval(step.lost, step.atRisk),
      survival: step.survival,
      standardError: step.standardError,
      low: limits?.low ?? null,
      high: limits?.high ?? null,
      cumulativeHazard: cumulative[i]?.hazard ?? 0,
      risky: risky.has(step.time),
    };
  });
}

/** The month by which half have left, with its limits; null where the curve does not come down so far. */
export function medianMonth(sets: readonly RiskSet[]): SurvivalQuantile {
  return survivalQuantile(kaplanMeier(sets), 0.5);
}
