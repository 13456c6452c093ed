import { quoteText } from '../accounts/sql.ts';
import type { Day } from '../days.ts';
import { tenurePointSql } from './tenure.ts';
import type { Tenure } from './types.ts';

/** The group an account belongs to, by number: the values in their order from 0, everything else after them. */
function groupOf(values: readonly string[]): string {
  const cases = values.map((value, i) => `WHEN ${quoteText(value)} THEN ${i}`).join(' ');
  return values.length === 0 ? '0' : `CASE a.segment ${cases} ELSE ${values.length} END`;
}

/** The tenure point of every day on which a matured account can have started: calendar months are slow to add account by account. */
function pointsSql(tenure: Tenure, firstStart: Day, maturedUntil: Day): string {
  return `points AS (
  SELECT start_day, ${tenurePointSql('start_day', tenure)} AS tenure_point
  FROM (SELECT CAST(day AS INTEGER) AS start_day FROM generate_series(${firstStart}, ${maturedUntil}) AS every(day)) AS series
)`;
}

/**
 * How many accounts each group holds: one row per group that has any, with place, values_held (distinct values of the last, pooled group),
 * without (accounts without a value), accounts, matured, lost. It keeps to what DuckDB and Postgres have in common.
 */
export function groupTotalsSql(
  table: string,
  values: readonly string[],
  tenure: Tenure,
  firstStart: Day,
  maturedUntil: Day,
): string {
  return `
WITH ${pointsSql(tenure, firstStart, maturedUntil)}
SELECT ${groupOf(values)} AS place,
  CAST(COUNT(DISTINCT CASE WHEN ${groupOf(values)} = ${values.length} THEN a.segment END) AS INTEGER) AS values_held,
  CAST(COUNT(*) - COUNT(a.segment) AS INTEGER) AS without, CAST(COUNT(*) AS INTEGER) AS accounts,
  CAST(COUNT(p.tenure_point) AS INTEGER) AS matured, CAST(COUNT(CASE WHEN a.end_day <= p.tenure_point THEN 1 END) AS INTEGER) AS lost
FROM ${table} AS a LEFT JOIN points AS p ON a.start_day = p.start_day
GROUP BY 1 ORDER BY 1`;
}

/**
 * The census of every group by itself in one query: each group's matured accounts in order of start (ties by key), cut into consecutive
 * subgroups of the group's own size. One row per group and subgroup: place, subgroup, accounts, lost, first_start, last_start.
 * As in the census of all accounts, only the days on which one subgroup ends and the next begins are sorted by key.
 * It keeps to what DuckDB and Postgres have in common.
 * @param sizes  accounts in a subgroup, by place; groups without a size are left out
 */
export function groupsCensusSql(
  table: string,
  values: readonly string[],
  sizes: ReadonlyMap<number, number>,
  tenure: Tenure,
  firstStart: Day,
  maturedUntil: Day,
): string {
  // As decimals: dividing whole numbers cuts off in one engine and not in the other.
  const rows = [...sizes].map(([place, size]) => `(${place}, ${size}.0)`).join(', ');
  return `
WITH ${pointsSql(tenure, firstStart, maturedUntil)}, sizes AS (
  SELECT * FROM (VALUES ${rows}) AS every(place, size)
), counted AS (
  SELECT ${groupOf(values)} AS place, a.start_day, COUNT(*) AS accounts, COUNT(CASE WHEN a.end_day <= p.tenure_point THEN 1 END) AS lost
  FROM ${table} AS a JOIN points AS p ON a.start_day = p.start_day GROUP BY 1, 2
), days AS (
  SELECT c.place, c.start_day, CAST(SUM(c.accounts) OVER (PARTITION BY c.place ORDER BY c.start_day) - c.accounts AS INTEGER) AS earlier,
    CAST(c.accounts AS INTEGER) AS accounts, CAST(c.lost AS INTEGER) AS lost, s.size
  FROM counted AS c JOIN sizes AS s ON c.place = s.place
), placed AS (
  SELECT place, start_day, earlier, accounts, lost, size,
    FLOOR(earlier / size) AS first_subgroup, FLOOR((earlier + accounts - 1) / size) AS last_subgroup
  FROM days
), ordered AS (
  SELECT d.place, d.size, d.earlier + ROW_NUMBER() OVER (PARTITION BY d.place, a.start_day ORDER BY a.key) - 1 AS seat, a.start_day,
    CASE WHEN a.end_day <= p.tenure_point THEN 1 END AS lost
  FROM ${table} AS a JOIN points AS p ON a.start_day = p.start_day
    JOIN placed AS d ON a.start_day = d.start_day AND ${groupOf(values)} = d.place
  WHERE d.first_subgroup < d.last_subgroup
), members AS (
  SELECT place, CAST(first_subgroup AS INTEGER) AS subgroup, SUM(accounts) AS accounts, SUM(lost) AS lost,
    MIN(start_day) AS first_start, MAX(start_day) AS last_start
  FROM placed WHERE first_subgroup = last_subgroup GROUP BY 1, 2
  UNION ALL
  SELECT place, CAST(FLOOR(seat / size) AS INTEGER), COUNT(*), COUNT(lost), MIN(start_day), MAX(start_day) FROM ordered GROUP BY 1, 2
)
SELECT place, subgroup, CAST(SUM(accounts) AS INTEGER) AS accounts, CAST(SUM(lost) AS INTEGER) AS lost,
  MIN(first_start) AS first_start, MAX(last_start) AS last_start
FROM members GROUP BY place, subgroup ORDER BY place, subgroup`;
}
