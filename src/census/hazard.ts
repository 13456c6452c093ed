import { rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';

/** One month of tenure: accounts that entered it and were observed through it, and those lost in it. */
export interface HazardMonth {
  /** 1 is the first month after the start; a loss exactly at the end of the first month belongs to it */
  readonly month: number;
  readonly atRisk: number;
  readonly lost: number;
}

/** Matured accounts, and those lost, by tenure in whole months, from the same counts. */
export interface TenureCounts {
  readonly months: readonly HazardMonth[];
  /** accounts observed for at least k months, and those of them lost by then; index k - 1 */
  readonly byTenure: readonly { readonly matured: number; readonly lost: number }[];
}

/** More accounts than this are sampled, by their keys: a hazard of 3 % is then known to about 0.1 %, and a million take no longer than these. */
const SAMPLED_ABOVE = 150_000;

/** Months looked at: four years. */
const LONGEST = 48;

export interface HazardScope {
  readonly segment?: string;
  /** only accounts that started on or after this day */
  readonly startedFrom?: Day;
  /** only accounts that started before this day */
  readonly startedBefore?: Day;
  /** count every account, where errors are stated; else a sample of many, scaled up */
  readonly whole?: boolean;
}

/**
 * Hazard by month of tenure: lost / atRisk, the Kaplan-Meier estimate with one step a month. An account is at risk in a month only when
 * the whole month lies before asOf, so young accounts bias nothing and no half-observed month needs a correction.
 * One aggregated query: accounts by (months observed, month of loss).
 * Source: Kaplan and Meier (1958), "Nonparametric estimation from incomplete observations" (cited from memory).
 */
export async function hazardByMonth(
  table: AccountTable,
  asOf: Day,
  settleDays: number,
  scope: HazardScope = {},
): Promise<TenureCounts> {
  const every = scope.whole ? 1 : Math.max(1, Math.round(table.report.accounts / SAMPLED_ABOVE));
  const until = asOf - settleDays;
  if (until < table.report.firstStart) return { months: [], byTenure: [] };
  const rows = await rowsOf(table.connection, monthsSql(table, until, scope, every));
  const cells = rows.map((row) => ({
    observed: Number(row.observed),
    loss: row.loss === null || row.loss === undefined ? Number.POSITIVE_INFINITY : Number(row.loss),
    accounts: Number(row.accounts) * every,
  }));
  const count = (pick: (cell: { observed: number; loss: number }) => boolean): number =>
    cells.reduce((sum, cell) => (pick(cell) ? sum + cell.accounts : sum), 0);
  const longest = Math.max(0, ...cells.map(({ observed }) => observed));
  const months: HazardMonth[] = [];
  const byTenure: { matured: number; lost: number }[] = [];
  for (let month = 1; month <= longest; month++) {
    months.push({
      month,
      atRisk: count(({ observed, loss }) => observed >= month && loss >= month),
      lost: count(({ observed, loss }) => observed >= month && loss === month),
    });
    byTenure.push({
      matured: count(({ observed }) => observed >= month),
      lost: count(({ observed, loss }) => observed >= month && loss <= month),
    });
  }
  return { months, byTenure };
}

/**
 * Accounts by whole months observed and month of loss. Months are counted on the calendar of every day, joined by day number: month
 * arithmetic account by account takes twice as long. A month is complete on the day of the month it began on, or on the last day of a
 * month too short for it.
 */
function monthsSql(table: AccountTable, until: Day, scope: HazardScope, every: number): string {
  const { segment, startedFrom, startedBefore } = scope;
  const only = [
    segment === undefined ? '' : ` AND a.segment = '${segment.replaceAll("'", "''")}'`,
    startedFrom === undefined ? '' : ` AND a.start_day >= ${startedFrom}`,
    startedBefore === undefined ? '' : ` AND a.start_day < ${startedBefore}`,
    every === 1 ? '' : ` AND a.key % ${every} = 0`,
  ].join('');
  return `
WITH days AS MATERIALIZED (
  SELECT day, CAST(12 * EXTRACT(YEAR FROM date) + EXTRACT(MONTH FROM date) AS INTEGER) AS month, CAST(EXTRACT(DAY FROM date) AS INTEGER) AS place,
    CAST(EXTRACT(DAY FROM CAST(date_trunc('month', date) + INTERVAL '1 month' AS DATE) - 1) AS INTEGER) AS length
  FROM (SELECT CAST(day AS INTEGER) AS day, DATE '1970-01-01' + CAST(day AS INTEGER) AS date
    FROM generate_series(${table.report.firstStart}, ${until}) AS every(day)) AS series
)
SELECT LEAST(u.month - s.month - CASE WHEN u.place < LEAST(s.place, u.length) THEN 1 ELSE 0 END, ${LONGEST}) AS observed,
  LEAST(e.month - s.month + CASE WHEN e.place < LEAST(s.place, e.length) THEN 0 ELSE 1 END, ${LONGEST + 1}) AS loss,
  COUNT(*) AS accounts
FROM ${table.table} AS a JOIN days AS s ON a.start_day = s.day JOIN days AS u ON u.day = ${until} LEFT JOIN days AS e ON a.end_day - 1 = e.day
WHERE a.start_day <= ${until}${only} GROUP BY 1, 2`;
}
