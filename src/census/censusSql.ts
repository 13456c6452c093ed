import type { Day } from '../days.ts';
import { tenurePointSql } from './tenure.ts';
import type { CensusRequest } from './types.ts';

const text = (value: string): string => `'${value.replaceAll("'", "''")}'`;

export const OTHER_SEGMENT = 'other';

/**
 * The census as one SQL text: matured accounts in order of start (ties by key), cut into consecutive subgroups of n, counted per segment.
 * One row per subgroup and segment: subgroup, segment, accounts, lost, first_start, last_start. Young accounts are never looked at.
 * It keeps to what DuckDB and Postgres have in common.
 * @param table         columns key, start_day, end_day, segment
 * @param maturedUntil  the last start day that has matured
 * @param segments      values counted by themselves; all others are pooled; none: no split
 */
export function censusSql(
  table: string,
  request: CensusRequest,
  maturedUntil: Day,
  segments: readonly string[],
): string {
  const segment =
    segments.length === 0
      ? 'NULL'
      : `CASE WHEN segment IN (${segments.map(text).join(', ')}) THEN segment ELSE ${text(OTHER_SEGMENT)} END`;
  const only = request.segment === undefined ? '' : ` AND segment = ${text(request.segment)}`;
  const subgroup = `CAST(FLOOR(place / ${request.subgroupSize}) AS INTEGER)`;
  return `
SELECT ${subgroup} AS subgroup, segment, CAST(COUNT(*) AS INTEGER) AS accounts, CAST(SUM(lost) AS INTEGER) AS lost,
  MIN(start_day) AS first_start, MAX(start_day) AS last_start
FROM (
  SELECT start_day, ${segment} AS segment, CASE WHEN end_day <= ${tenurePointSql('start_day', request.tenure)} THEN 1 ELSE 0 END AS lost,
    ROW_NUMBER() OVER (ORDER BY start_day, key) - 1 AS place
  FROM ${table} WHERE start_day <= ${maturedUntil}${only}
) AS matured
GROUP BY 1, 2 ORDER BY 1, 2`;
}

/** Accounts by start day from a day on: one row per day, start_day and accounts. */
export function startsSql(table: string, from: Day, segment: string | undefined): string {
  const only = segment === undefined ? '' : ` AND segment = ${text(segment)}`;
  return `SELECT start_day, CAST(COUNT(*) AS INTEGER) AS accounts FROM ${table} WHERE start_day >= ${from}${only} GROUP BY 1 ORDER BY 1`;
}
