import { firstRow, quoteText } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';

const YEAR_DAYS = 365;
const QUARTER_DAYS = 91;

/**
 * New accounts a year brings: those of the last year of starts up to a day; scaled up from what there is when it is less than a year.
 * @param until  the last start day looked at; mostly the last one that has matured
 * @returns      0 when nobody started by then
 */
export async function yearlyInflow(table: AccountTable, until: Day, segment?: string): Promise<number> {
  const only = segment === undefined ? '' : ` AND segment = ${quoteText(segment)}`;
  const bounds = await firstRow(
    table.connection,
    `SELECT MIN(start_day) AS first_start, MAX(start_day) AS last_start FROM ${table.table} WHERE start_day <= ${until}${only}`,
  );
  if (bounds.first_start == null) return 0;
  const to = Number(bounds.last_start);
  const from = Math.max(Number(bounds.first_start), to - YEAR_DAYS + 1);
  const { accounts } = await firstRow(
    table.connection,
    `SELECT CAST(COUNT(*) AS INTEGER) AS accounts FROM ${table.table} WHERE start_day BETWEEN ${from} AND ${to}${only}`,
  );
  // A few days of starts say little about a year.
  return (Number(accounts) * YEAR_DAYS) / Math.max(to - from + 1, QUARTER_DAYS);
}
