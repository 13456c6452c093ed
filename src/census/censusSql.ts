import type { Day } from '../days.ts';
import { tenurePointSql } from './tenure.ts';
import type { CensusRequest } from './types.ts';

const text = (value: string): string => `'${value.replaceAll("'", "''")}'`;

export const OTHER_SEGMENT = 'other';

/**
 * The census as one SQL text: matured accounts in order of start (ties by key), cut into consecutive subgroups of n, counted per segment.
 * One row per subgroup and segment: subgroup, segment, accounts, lost, first_start, last_start. Young accounts are never looked at.
 * Only the days on which one subgroup ends and the next begins are sorted by key: on all others the day alone decides. Sorting every
 * account by (start, key) gives the same subgroups and takes three times as long on a million accounts. The tenure point is worked out
 * once a day for the same reason: calendar months are slow to add.
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
      : `CASE WHEN a.segment IN (${segments.map(text).join(', ')}) THEN a.segment ELSE ${text(OTHER_SEGMENT)} END`;
  const only = request.segment === undefined ? '' : ` AND a.segment = ${text(request.segment)}`;
  const matured = `a.start_day <= ${maturedUntil}${only}`;
  const n = request.subgroupSize;
  return `
WITH started AS (
  SELECT DISTINCT a.start_day FROM ${table} AS a WHERE ${matured}
), points AS (
  SELECT start_day, ${tenurePointSql('start_day', request.tenure)} AS tenure_point FROM started
), counted AS (
  SELECT a.start_day, ${segment} AS segment, COUNT(*) AS accounts, COUNT(CASE WHEN a.end_day <= p.tenure_point THEN 1 END) AS lost
  FROM ${table} AS a JOIN points AS p ON a.start_day = p.start_day WHERE ${matured} GROUP BY 1, 2
), days AS (
  SELECT start_day, SUM(SUM(accounts)) OVER (ORDER BY start_day) - SUM(accounts) AS earlier, SUM(accounts) AS accounts
  FROM counted GROUP BY start_day
), members AS (
  SELECT CAST(FLOOR(d.earlier / ${n}) AS INTEGER) AS subgroup, c.segment, c.accounts, c.lost, c.start_day
  FROM counted AS c JOIN days AS d ON c.start_day = d.start_day
  WHERE FLOOR(d.earlier / ${n}) = FLOOR((d.earlier + d.accounts - 1) / ${n})
  UNION ALL
  SELECT CAST(FLOOR((d.earlier + ROW_NUMBER() OVER (PARTITION BY a.start_day ORDER BY a.key) - 1) / ${n}) AS INTEGER) AS subgroup,
    ${segment} AS segment, 1 AS accounts, CASE WHEN a.end_day <= p.tenure_point THEN 1 ELSE 0 END AS lost, a.start_day
  FROM ${table} AS a JOIN days AS d ON a.start_day = d.start_day JOIN points AS p ON a.start_day = p.start_day
  WHERE FLOOR(d.earlier / ${n}) < FLOOR((d.earlier + d.accounts - 1) / ${n}) AND ${matured}
)
SELECT subgroup, segment, CAST(SUM(accounts) AS INTEGER) AS accounts, CAST(SUM(lost) AS INTEGER) AS lost,
  MIN(start_day) AS first_start, MAX(start_day) AS last_start
FROM members GROUP BY subgroup, segment ORDER BY subgroup, segment`;
}

/** Accounts by start day from a day on: one row per day, start_day and accounts. */
export function startsSql(table: string, from: Day, segment: string | undefined): string {
  const only = segment === undefined ? '' : ` AND segment = ${text(segment)}`;
  return `SELECT start_day, CAST(COUNT(*) AS INTEGER) AS accounts FROM ${table} WHERE start_day >= ${from}${only} GROUP BY 1 ORDER BY 1`;
}
