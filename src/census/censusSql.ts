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
 * @param firstStart    the first day on which an account started
 * @param maturedUntil  the last start day that has matured
 * @param segments      values counted by themselves; all others are pooled; none: no split
 */
export function censusSql(
  table: string,
  request: CensusRequest,
  firstStart: Day,
  maturedUntil: Day,
  segments: readonly string[],
): string {
  const segment =
    segments.length === 0
      ? 'NULL'
      : `CASE WHEN a.segment IN (${segments.map(text).join(', ')}) THEN a.segment ELSE ${text(OTHER_SEGMENT)} END`;
  const only = request.segment === undefined ? '' : ` AND a.segment = ${text(request.segment)}`;
  const matured = `a.start_day <= ${maturedUntil}${only}`;
  // As a decimal: dividing whole numbers cuts off in one engine and not in the other.
  const size = `${request.subgroupSize}.0`;
  return `
WITH points AS (
  SELECT start_day, ${tenurePointSql('start_day', request.tenure)} AS tenure_point
  FROM (SELECT CAST(day AS INTEGER) AS start_day FROM generate_series(${firstStart}, ${maturedUntil}) AS every(day)) AS series
), counted AS (
  SELECT a.start_day, ${segment} AS segment, COUNT(*) AS accounts, COUNT(CASE WHEN a.end_day <= p.tenure_point THEN 1 END) AS lost
  FROM ${table} AS a JOIN points AS p ON a.start_day = p.start_day WHERE ${matured} GROUP BY 1, 2
), days AS (
  SELECT start_day, CAST(SUM(SUM(accounts)) OVER (ORDER BY start_day) - SUM(accounts) AS INTEGER) AS earlier, CAST(SUM(accounts) AS INTEGER) AS accounts
  FROM counted GROUP BY start_day
), placed AS (
  SELECT d.start_day, p.tenure_point, d.earlier, FLOOR(d.earlier / ${size}) AS first_subgroup, FLOOR((d.earlier + d.accounts - 1) / ${size}) AS last_subgroup
  FROM days AS d JOIN points AS p ON d.start_day = p.start_day
), ordered AS (
  SELECT d.earlier + ROW_NUMBER() OVER (PARTITION BY a.start_day ORDER BY a.key) - 1 AS place, a.start_day, ${segment} AS segment,
    CASE WHEN a.end_day <= d.tenure_point THEN 1 END AS lost
  FROM ${table} AS a JOIN placed AS d ON a.start_day = d.start_day WHERE d.first_subgroup < d.last_subgroup AND ${matured}
), members AS (
  SELECT CAST(d.first_subgroup AS INTEGER) AS subgroup, c.segment, SUM(c.accounts) AS accounts, SUM(c.lost) AS lost,
    MIN(c.start_day) AS first_start, MAX(c.start_day) AS last_start
  FROM counted AS c JOIN placed AS d ON c.start_day = d.start_day WHERE d.first_subgroup = d.last_subgroup GROUP BY 1, 2
  UNION ALL
  SELECT CAST(FLOOR(place / ${size}) AS INTEGER), segment, COUNT(*), COUNT(lost), MIN(start_day), MAX(start_day) FROM ordered GROUP BY 1, 2
)
SELECT subgroup, segment, CAST(SUM(accounts) AS INTEGER) AS accounts, CAST(SUM(lost) AS INTEGER) AS lost,
  MIN(first_start) AS first_start, MAX(last_start) AS last_start
FROM members GROUP BY subgroup, segment ORDER BY subgroup, segment`;
}

/** Accounts by start day from a day on: one row per day, start_day and accounts. */
export function startsSql(table: string, from: Day, segment: string | undefined): string {
  const only = segment === undefined ? '' : ` AND segment = ${text(segment)}`;
  return `SELECT start_day, CAST(COUNT(*) AS INTEGER) AS accounts FROM ${table} WHERE start_day >= ${from}${only} GROUP BY 1 ORDER BY 1`;
}
