import { firstRow } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';
import { type HazardMonth, hazardByMonth, type TenureCounts } from './hazard.ts';
import { rounded, SOON_POINTS, subgroupSizes } from './sizes.ts';
import { checkTenure, lastMaturedStart, tenureInWords, tenurePointSql } from './tenure.ts';
import type { CensusPlan, Tenure } from './types.ts';

export interface PlanRequest {
  readonly tenure?: Tenure;
  readonly subgroupSize?: number;
  readonly settleDays: number;
  readonly asOf: Day;
  readonly segment?: string;
}

/** 25 points for the usual level and about 15 to judge against it. */
const WANTED_POINTS = 40;
/** A larger size is worth its wait only while it leaves this many points: with fewer, where a move began gets blurred. Our choice, no source. */
const LARGER_WANTS_POINTS = 50;
/** More points than this can't be told apart in a picture on a phone. */
const MOST_POINTS = 150;
const TENURES = [1, 3, 6, 12] as const;

/**
 * Recommends the tenure point and the subgroup size where the question leaves them open, with the reasons in words.
 * @throws EbbError OPTION_INVALID for a tenure that cannot be used
 */
export async function planCensus(table: AccountTable, partial: PlanRequest): Promise<CensusPlan> {
  const chosen = partial.tenure
    ? { tenure: partial.tenure, why: `read at ${tenureInWords(partial.tenure)}, as asked` }
    : recommendTenure(
        await hazardByMonth(
          table,
          partial.asOf,
          partial.settleDays,
          partial.segment === undefined ? {} : { segment: partial.segment },
        ),
      );
  checkTenure(chosen.tenure);
  const { matured, lost, perWeek } = await maturedCounts(table, chosen.tenure, partial);
  const rate = matured === 0 ? 0 : lost / matured;
  const sizes = subgroupSizes(assumedRate(rate, matured));
  const size = partial.subgroupSize
    ? { subgroupSize: partial.subgroupSize, why: `${count(partial.subgroupSize)} accounts a point, as asked` }
    : matured > 0 && (lost === 0 || lost === matured)
      ? sizeOfOneKind(matured, lost)
      : recommendSize(matured, sizes);
  const waits =
    perWeek > 0
      ? `; at about ${oneDigit(perWeek)} new accounts a week a point takes ${weeks(size.subgroupSize / perWeek)}`
      : '';
  return {
    tenure: chosen.tenure,
    tenureWhy: chosen.why,
    subgroupSize: size.subgroupSize,
    sizeWhy: `${size.why}${waits}`,
    sizes,
    rate,
  };
}

/** With nobody or everybody lost there is no rate to size by: points enough to look at, and none of them very small. */
function sizeOfOneKind(matured: number, lost: number): { subgroupSize: number; why: string } {
  const size = Math.max(20, rounded(Math.ceil(matured / WANTED_POINTS)));
  return {
    subgroupSize: size,
    why: `${count(size)} accounts a point: ${lost === 0 ? 'nobody' : 'everybody'} was lost so far, so there is no rate to choose a size by`,
  };
}

/**
 * The rate that sizes are worked out for. With nobody lost, about one loss is assumed, for any real rate could be that low; with everybody
 * lost, about one that stayed; with no account to go by, 5 %.
 */
export function assumedRate(rate: number, matured: number): number {
  return matured === 0 ? 0.05 : Math.min(Math.max(rate, 1 / (matured + 2)), 1 - 1 / (matured + 2));
}

async function maturedCounts(
  table: AccountTable,
  tenure: Tenure,
  partial: PlanRequest,
): Promise<{ matured: number; lost: number; perWeek: number }> {
  const until = lastMaturedStart(partial.asOf, tenure, partial.settleDays);
  const only = partial.segment === undefined ? '' : ` AND segment = '${partial.segment.replaceAll("'", "''")}'`;
  const row = await firstRow(
    table.connection,
    // The tenure point is worked out once a day: calendar months are slow to add.
    `WITH points AS (
       SELECT start_day, ${tenurePointSql('start_day', tenure)} AS tenure_point 
       FROM (SELECT unnest(range(${table.report.firstStart}, ${until + 1}))::INTEGER AS start_day)
     )
     SELECT count(*)::INTEGER AS matured, count(*) FILTER (WHERE end_day <= tenure_point)::INTEGER AS lost,
       count(*) FILTER (WHERE start_day > ${until - 91})::INTEGER AS recent
     FROM ${table.table} JOIN points USING (start_day) WHERE start_day <= ${until}${only}`,
  );
  return { matured: Number(row.matured), lost: Number(row.lost), perWeek: Number(row.recent) / 13 };
}

/**
 * The tenure just after the hazard peaks, rounded up to 1, 3, 6 or 12 months, if enough accounts have got that far for 40 points of five
 * losses; else the nearest earlier one. A peak counts when the month's hazard exceeds the middle one by half and by three standard errors.
 */
export function recommendTenure(counts: TenureCounts): { tenure: Tenure; why: string } {
  const months = (n: number): Tenure => ({ count: n, unit: 'month' });
  const points = (n: number): number => (counts.byTenure[n - 1]?.lost ?? 0) / 5;
  const feasible = TENURES.filter((n) => points(n) >= WANTED_POINTS);
  const peak = hazardPeak(counts);
  if (peak) {
    const after = TENURES.find((n) => n >= peak.month) ?? peak.month;
    const percent = (peak.hazard * 100).toFixed(1);
    const when = `month ${peak.month}, in which ${percent} % of those still there leave`;
    if (points(after) >= WANTED_POINTS)
      return {
        tenure: months(after),
        why: `read at ${tenureInWords(months(after))}, just after the first risky time, ${when}`,
      };
    const earlier = feasible.filter((n) => n < after).at(-1);
    if (earlier !== undefined) {
      return {
        tenure: months(earlier),
        why: `read at ${tenureInWords(months(earlier))}: the first risky time is ${when}, but too few accounts have got that far yet`,
      };
    }
  }
  const even = feasible.includes(3) ? 3 : feasible[0];
  if (even !== undefined) {
    return {
      tenure: months(even),
      why: `read at ${tenureInWords(months(even))}: accounts leave evenly, with no time at which many more go than at others`,
    };
  }
  // Too little data for 40 points at any of them: the one that gives most.
  const most = [...TENURES].sort((a, b) => points(b) - points(a) || a - b)[0] ?? 1;
  const long = TENURES.filter((n) => points(n) >= 0.9 * points(most))[0] ?? most;
  return {
    tenure: months(long),
    why: `read at ${tenureInWords(months(long))}: with so few accounts, this tenure gives the most to look at`,
  };
}

/** A peak this close to the highest is taken as well: the earlier of the two answers sooner. Our choice, no source. */
const NEARLY_AS_HIGH = 2 / 3;

export interface RiskyMonth extends HazardMonth {
  readonly hazard: number;
}

/**
 * Months whose hazard stands out: half again the middle month's, and by three standard errors; in order of month. Only months with
 * enough accounts and losses are looked at.
 */
export function riskyMonths(counts: TenureCounts): {
  /** hazard of the middle month; null when too few months can be looked at */
  readonly usual: number | null;
  readonly risky: readonly RiskyMonth[];
} {
  const usable = counts.months
    .filter(({ atRisk, lost }) => atRisk >= 100 && lost >= 10)
    .map((month) => ({ ...month, hazard: month.lost / month.atRisk }));
  if (usable.length < 2) return { usual: null, risky: [] };
  const hazards = usable.map(({ hazard }) => hazard).sort((a, b) => a - b);
  const usual = hazards[Math.floor((hazards.length - 1) / 2)] ?? 0;
  const risky = usable.filter(({ hazard, atRisk }) => {
    const error = Math.sqrt((hazard * (1 - hazard)) / atRisk);
    return hazard > 1.5 * usual && hazard - usual > 3 * error;
  });
  return { usual, risky };
}

/** The first risky month that is not far below the riskiest. With several risky times, such as renewals, the earliest answers soonest. */
function hazardPeak(counts: TenureCounts): RiskyMonth | undefined {
  const { risky } = riskyMonths(counts);
  const highest = Math.max(...risky.map(({ hazard }) => hazard));
  return risky.find(({ hazard }) => hazard >= NEARLY_AS_HIGH * highest);
}

/**
 * One of the three sizes: the one with a lower limit above zero when it leaves 50 points, else the one that sees a halving, else five losses.
 * @param things  what a point counts, in the words of the reason
 */
export function recommendSize(
  matured: number,
  sizes: CensusPlan['sizes'],
  things = 'accounts',
): { subgroupSize: number; why: string } {
  const points = (size: number): number => Math.floor(matured / size);
  if (points(sizes.positiveLowerLimit) > MOST_POINTS) {
    const size = rounded(Math.ceil(matured / MOST_POINTS));
    return {
      subgroupSize: size,
      why: `${count(size)} ${things} a point: many more than needed, so that ${points(size)} points stay readable`,
    };
  }
  const useful = [sizes.positiveLowerLimit, sizes.seesHalving].filter(
    (size) => size >= sizes.fiveLosses && points(size) >= LARGER_WANTS_POINTS,
  );
  const size = useful[0] ?? sizes.fiveLosses;
  if (size === sizes.positiveLowerLimit) {
    return {
      subgroupSize: size,
      why: `${count(size)} ${things} a point: about the size at which a single very low point begins to stand out`,
    };
  }
  if (size === sizes.seesHalving) {
    return {
      subgroupSize: size,
      why: `${count(size)} ${things} a point: churn cut by half would show within about ${SOON_POINTS} points`,
    };
  }
  const larger = `; ${count(sizes.positiveLowerLimit)} would let a single very low point stand out, but there would be too few points`;
  return {
    subgroupSize: size,
    why: `${count(size)} ${things} a point: about five losses each, the least that can be judged${larger}`,
  };
}

const count = (number: number): string => number.toLocaleString('en-GB');
/** "12", "3.4" */
export const oneDigit = (number: number): string => (number >= 10 ? count(Math.round(number)) : number.toFixed(1));

/** A time in words: "about 5 weeks", "about 3 days". */
export function weeks(number: number): string {
  if (number < 1) return `about ${Math.max(1, Math.round(number * 7))} days`;
  const whole = Math.round(number);
  return whole === 1 ? 'about a week' : `about ${whole} weeks`;
}
