import type { TenureCounts } from '../../census/hazard.ts';
import { constantLifetime } from '../../charts/lifetimes/constantLifetime.ts';
import { intervalDifference } from '../../charts/lifetimes/intervalDifference.ts';
import { lifetimeValue, type MeanAmount } from '../../charts/lifetimes/lifetimeValue.ts';
import { measuredLifetime } from '../../charts/lifetimes/measuredLifetime.ts';
import type { RiskSet } from '../../charts/survival/types.ts';
import type { Interval, SubgroupCount } from '../../charts/types.ts';
import { measuredMonths, tenureMonths } from './tenureMonths.ts';
import type { Era, EraLifetime, Values, WorthFindings } from './worthFindings.ts';

/** Mean amount per month, and of how many accounts. */
export interface MonthlyAmount extends MeanAmount {
  readonly accounts: number;
}

/**
 * Lifetimes and values of the accounts of one time.
 * @param earlier  hazards of the accounts from before a move, for the months that these have not reached
 */
export function eraOf(
  counts: SubgroupCount,
  tenureInMonths: number,
  hazards: TenureCounts,
  amount: MonthlyAmount | null,
  earlier?: TenureCounts,
): Era {
  const sets = measuredMonths(hazards);
  const measured = sets.length === 0 ? null : lifetimeOf(sets, earlier ? measuredMonths(earlier) : []);
  const constant = counts.accounts === 0 ? null : constantLifetime(counts, tenureInMonths);
  return {
    counts: { lost: counts.lost, accounts: counts.accounts },
    constant,
    measured,
    months: tenureMonths(sets, new Set()),
    watched: hazards.months[0]?.atRisk ?? 0,
    values: amount && valuesOf(amount, measured, constant),
  };
}

function lifetimeOf(sets: readonly RiskSet[], earlier: readonly RiskSet[]): EraLifetime {
  const own = measuredLifetime(sets);
  const later = earlier.slice(sets.length);
  // With everybody gone there are no later months.
  if (later.length === 0 || own.survival.at(-1) === 0) return { ...own, borrowed: null, reached: own.survival };
  const whole = measuredLifetime([...sets, ...later]);
  return {
    ...own,
    tail: whole.tail,
    total: whole.total,
    borrowed: { from: sets.length + 1, to: whole.horizon },
    reached: whole.survival,
  };
}

function valuesOf(amount: MonthlyAmount, measured: Era['measured'], constant: Era['constant']): Values {
  const value = (lifetime: Interval | null | undefined): Interval | null =>
    lifetime ? lifetimeValue(amount, lifetime) : null;
  const whole = constant?.mean;
  return {
    perMonth: amount.mean,
    accounts: amount.accounts,
    restricted: value(measured?.restricted),
    measured: value(measured?.total),
    constant:
      whole && whole.estimate !== null && whole.high !== null
        ? value({ estimate: whole.estimate, low: whole.low, high: whole.high })
        : null,
  };
}

/** Mean stay over the months that both times were watched for. */
export function commonMonths(now: TenureCounts, before: TenureCounts): WorthFindings['common'] {
  const [later, earlier] = [measuredMonths(now), measuredMonths(before)];
  const months = Math.min(later.length, earlier.length);
  if (months === 0) return null;
  const over = (sets: readonly RiskSet[]): Interval => measuredLifetime(sets.slice(0, months)).restricted;
  const pair = { now: over(later), before: over(earlier) };
  return { months, ...pair, difference: intervalDifference(pair.now, pair.before) };
}
