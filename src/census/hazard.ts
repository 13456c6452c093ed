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

/**
 * Hazard by month of tenure: lost / atRisk, the Kaplan-Meier estimate with one step a month. An account is at risk in a month only when
 * the whole month lies before asOf, so young accounts bias nothing and no half-observed month needs a correction.
 * One aggregated query: accounts by (months observed, month of loss). From a sample, the counts are scaled up.
 * Source: Kaplan and Meier (1958), "Nonparametric estimation from incomplete observations" (cited from memory).
 */
export async function hazardByMonth(
  table: AccountTable,
  asOf: Day,
  settleDays: number,
  segment?: string,
): Promise<TenureCounts> {
  const date = (day: string): string => `(DATE '1970-01-01' + ${day})`;
  const only = segment === undefined ? '' : ` AND segment = '${segment.replaceAll("'", "''")}'`;
  const every = Math.max(1, Math.round(table.report.accounts / SAMPLED_ABOVE));
  const sampled = every === 1 ? '' : ` AND key % ${every} = 0`;
  const rows = await rowsOf(
    table.connection,
    `SELECT least(datesub('month', ${date('start_day')}, ${date(String(asOf - settleDays))}), ${LONGEST})::INTEGER AS observed,
       CASE WHEN end_day IS NOT NULL THEN least(datesub('month', ${date('start_day')}, ${date('(end_day - 1)')}) + 1, ${LONGEST + 1})::INTEGER END AS loss,
       count(*)::INTEGER AS accounts
     FROM ${table.table} WHERE start_day <= ${asOf - settleDays}${only}${sampled} GROUP BY 1, 2`,
  );
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
