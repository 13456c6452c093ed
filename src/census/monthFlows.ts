import { quoteText, rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import { addMonths, type Day, dayFromParts, isoDay } from '../days.ts';

/** Accounts that started in one calendar month and ended in another; months are numbered from January of year 0. */
export interface MonthCell {
  readonly started: number;
  /** null while they are customers, or when they end after the data-through date */
  readonly lost: number | null;
  readonly accounts: number;
}

export interface MonthFlows {
  readonly cells: readonly MonthCell[];
  /** first month in which there are customers on its first day or somebody starts */
  readonly firstMonth: number;
  /** last month the data covers to its end */
  readonly lastMonth: number;
}

/** The number of a day's calendar month: 12 times the year, plus 0 for January. */
export function monthOf(day: Day): number {
  const [year = 0, month = 0] = isoDay(day).split('-').map(Number);
  return 12 * year + month - 1;
}

export function firstDayOfMonth(month: number): Day {
  return dayFromParts(Math.floor(month / 12), (month % 12) + 1, 1) ?? 0;
}

/**
 * Everybody ever a customer, by calendar month of start and of end, an end counting in the month of its date: the first day on which an
 * account is no longer a customer. All ages count, unlike in the census: that is how monthly figures are made.
 * It keeps to what DuckDB and Postgres have in common.
 */
export async function takeMonthFlows(
  table: AccountTable,
  scope: { readonly asOf: Day; readonly segment?: string },
): Promise<MonthFlows> {
  const { asOf, segment } = scope;
  const only = segment === undefined ? '' : ` AND segment = ${quoteText(segment)}`;
  const month = (day: string): string =>
    `CAST(12 * EXTRACT(YEAR FROM DATE '1970-01-01' + ${day}) + EXTRACT(MONTH FROM DATE '1970-01-01' + ${day}) - 1 AS INTEGER)`;
  // Days before months: adding up days first leaves few dates to take apart.
  const rows = await rowsOf(
    table.connection,
    `SELECT ${month('start_day')} AS started, CASE WHEN end_day <= ${asOf} THEN ${month('end_day')} END AS lost, CAST(SUM(accounts) AS INTEGER) AS accounts
     FROM (SELECT start_day, end_day, COUNT(*) AS accounts FROM ${table.table} WHERE start_day <= ${asOf}${only} GROUP BY 1, 2) AS days
     GROUP BY 1, 2 ORDER BY 1, 2`,
  );
  const cells = rows.map((row) => ({
    started: Number(row.started),
    lost: row.lost === null ? null : Number(row.lost),
    accounts: Number(row.accounts),
  }));
  const current = monthOf(asOf);
  const complete = addMonths(firstDayOfMonth(current), 1) - 1 === asOf ? current : current - 1;
  return { cells, firstMonth: cells[0]?.started ?? current, lastMonth: complete };
}
