import { quoteText, rowsOf } from '../accounts/sql.ts';
import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';
import type { LossRequest } from './lossPlaces.ts';
import { checkTenure, tenurePoint, tenurePointSql } from './tenure.ts';

/** Losses in order of the day they happened, over the days on which they could be seen. */
export interface LossDays {
  /** day of each loss within the tenure, ascending, one entry a loss */
  readonly days: readonly Day[];
  /** first day watched: the first account's tenure point; before it there were ever fewer accounts that could be lost */
  readonly from: Day;
  /** last day watched */
  readonly to: Day;
}

/**
 * The days on which accounts were lost within the tenure, from the first account's tenure point to the data-through date. Every loss counts
 * on its day, whether its account's own tenure point has come or not: the days are watched, not the accounts.
 * @param most  no more losses than this are fetched; one more than it means that there are
 */
export async function lossDays(table: AccountTable, request: LossRequest, most: number): Promise<LossDays | null> {
  checkTenure(request.tenure);
  const only = request.segment === undefined ? '' : ` AND a.segment = ${quoteText(request.segment)}`;
  const [bounds] = await rowsOf(
    table.connection,
    `SELECT MIN(a.start_day) AS first_start, MAX(a.start_day) AS last_start FROM ${table.table} AS a WHERE a.start_day <= ${request.asOf}${only}`,
  );
  if (bounds?.first_start == null) return null;
  const firstStart = Number(bounds.first_start);
  const from = tenurePoint(firstStart, request.tenure);
  const to = request.asOf - request.settleDays;
  if (to <= from) return null;
  const rows = await rowsOf(
    table.connection,
    `WITH points AS (
  SELECT start_day, ${tenurePointSql('start_day', request.tenure)} AS tenure_point
  FROM (SELECT CAST(day AS INTEGER) AS start_day FROM generate_series(${firstStart}, ${Number(bounds.last_start)}) AS every(day)) AS series
)
SELECT a.end_day FROM ${table.table} AS a JOIN points AS p ON a.start_day = p.start_day
WHERE a.end_day <= p.tenure_point AND a.end_day > ${from} AND a.end_day <= ${to}${only} ORDER BY a.end_day LIMIT ${most + 1}`,
  );
  return { days: rows.map((row) => Number(row.end_day)), from, to };
}
