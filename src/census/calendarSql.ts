import { OTHER_SEGMENT } from './censusSql.ts';
import type { CensusRequest } from './types.ts';

const text = (value: string): string => `'${value.replaceAll("'", "''")}'`;

/** A month as a whole number: years times twelve and the months before it. */
export type MonthNumber = number;

/**
 * The calendar view as one SQL text: customers of each month, counted per segment.
 * One row per month and segment: month (a MonthNumber), segment, customers, lost, passed (started and ended in that very month).
 * customers are the accounts that started before the month and had not ended before it; lost are those of them whose end lies in it.
 * Accounts are counted once by their month of start and month of end; the months then come from running sums over these counts, so that
 * no account is joined to its months. It keeps to what DuckDB and Postgres have in common.
 * @param table     columns start_day, end_day, segment
 * @param segments  values counted by themselves; all others are pooled; none: no split
 */
export function calendarSql(
  table: string,
  request: Pick<CensusRequest, 'segment'>,
  first: MonthNumber,
  last: MonthNumber,
  segments: readonly string[],
): string {
  const segment =
    segments.length === 0
      ? 'NULL'
      : `CASE WHEN segment IN (${segments.map(text).join(', ')}) THEN segment ELSE ${text(OTHER_SEGMENT)} END`;
  const only = request.segment === undefined ? '' : ` WHERE segment = ${text(request.segment)}`;
  const sum = (what: string): string => `CAST(SUM(${what}) AS INTEGER)`;
  return `
WITH flows AS (
  SELECT ${monthSql('start_day')} AS started, ${monthSql('end_day')} AS ended, ${segment} AS segment, COUNT(*) AS accounts
  FROM ${table}${only} GROUP BY 1, 2, 3
), events AS (
  SELECT started AS month, segment, accounts AS starts, 0 AS ends, CASE WHEN ended = started THEN accounts ELSE 0 END AS passed FROM flows
  UNION ALL
  SELECT ended, segment, 0, accounts, 0 FROM flows WHERE ended IS NOT NULL
), months AS (
  SELECT CAST(number AS INTEGER) AS month FROM generate_series(${first}, ${last}) AS every(number)
), cells AS (
  SELECT m.month, s.segment, 0 AS starts, 0 AS ends, 0 AS passed FROM months AS m CROSS JOIN (SELECT DISTINCT segment FROM flows) AS s
  UNION ALL SELECT month, segment, starts, ends, passed FROM events WHERE month <= ${last}
), summed AS (
  SELECT month, segment, SUM(starts) AS starts, SUM(ends) AS ends, SUM(passed) AS passed FROM cells GROUP BY month, segment
), running AS (
  SELECT month, segment, ends, passed,
    SUM(starts - ends) OVER (PARTITION BY segment ORDER BY month) - starts + ends AS customers
  FROM summed
)
SELECT month, segment, ${sum('customers')} AS customers, ${sum('ends - passed')} AS lost, ${sum('passed')} AS passed
FROM running WHERE month >= ${first} GROUP BY month, segment ORDER BY month, segment`;
}

function monthSql(day: string): string {
  const date = `(DATE '1970-01-01' + ${day})`;
  return `CAST(EXTRACT(YEAR FROM ${date}) * 12 + EXTRACT(MONTH FROM ${date}) - 1 AS INTEGER)`;
}
