import type { Day } from '../days.ts';
import type { CensusRequest, Tenure } from './types.ts';

const text = (value: string): string => `'${value.replaceAll("'", "''")}'`;

/** Renewals from this one on are counted together. */
export const LATER_RENEWALS = 4;

/** What decides which renewals are looked at. */
export interface RenewalRange {
  /** the first day on which an account started */
  readonly firstStart: Day;
  /** the last renewal date that has matured: asOf - settleDays */
  readonly until: Day;
  /** no account can have come up for more renewals than this by then, the next one included */
  readonly most: number;
}

/**
 * Every cell of accounts with one start day that come up for their k-th renewal: start_day, k, due, at_risk, lost.
 * An account comes up for it when it was not lost at an earlier one, and is lost at it when it ended after the one before and on or before
 * this one. Matured cells have due <= until; for each start day one more cell follows, the renewal that is still to come.
 * All of it is worked out from accounts counted by start day and by the renewal at which they were lost; no account is joined to its renewals.
 */
function cellsSql(table: string, request: CensusRequest, { until, most }: RenewalRange): string {
  const only = request.segment === undefined ? '' : ` WHERE segment = ${text(request.segment)}`;
  const due = (renewal: string): string => renewalDateSql('s.start_day', renewal, request.tenure);
  return `
members AS (
  SELECT key, start_day, ${lostInSql(request.tenure, until)} AS lost_in FROM ${table}${only}
), counted AS (
  SELECT start_day, lost_in, CAST(COUNT(*) AS INTEGER) AS accounts FROM members GROUP BY 1, 2
), starts AS (
  SELECT start_day, CAST(SUM(accounts) AS INTEGER) AS accounts FROM counted GROUP BY 1
), renewals AS (
  SELECT s.start_day, s.accounts, k, ${due('k')} AS due
  FROM starts AS s CROSS JOIN (SELECT CAST(number AS INTEGER) AS k FROM generate_series(1, ${most}) AS every(number)) AS series
  WHERE k = 1 OR ${due('(k - 1)')} <= ${until}
), cells AS (
  SELECT r.start_day, r.k, r.due, COALESCE(c.accounts, 0) AS lost,
    r.accounts - CAST(SUM(COALESCE(c.accounts, 0)) OVER (PARTITION BY r.start_day ORDER BY r.k) AS INTEGER) + COALESCE(c.accounts, 0) AS at_risk
  FROM renewals AS r LEFT JOIN counted AS c ON c.start_day = r.start_day AND c.lost_in = r.k
)`;
}

/**
 * The renewal view as one SQL text: matured renewals in order of their date (ties by key), cut into consecutive subgroups of n.
 * One row per subgroup and number of the renewal (from the fourth on together): subgroup, renewal, accounts, lost, first_due, last_due.
 * As in the start view, only the days on which one subgroup ends and the next begins are sorted by key.
 * It keeps to what DuckDB and Postgres have in common.
 */
export function renewalSql(table: string, request: CensusRequest, range: RenewalRange): string {
  // As a decimal: dividing whole numbers cuts off in one engine and not in the other.
  const size = `${request.subgroupSize}.0`;
  const number = `CASE WHEN c.k < ${LATER_RENEWALS} THEN c.k ELSE ${LATER_RENEWALS} END`;
  return `
WITH ${cellsSql(table, request, range)}, matured AS (
  SELECT start_day, k, due, lost, at_risk FROM cells WHERE due <= ${range.until} AND at_risk > 0
), days AS (
  SELECT due, CAST(SUM(SUM(at_risk)) OVER (ORDER BY due) - SUM(at_risk) AS INTEGER) AS earlier, CAST(SUM(at_risk) AS INTEGER) AS accounts
  FROM matured GROUP BY due
), placed AS (
  SELECT due, earlier, FLOOR(earlier / ${size}) AS first_subgroup, FLOOR((earlier + accounts - 1) / ${size}) AS last_subgroup FROM days
), ordered AS (
  SELECT d.earlier + ROW_NUMBER() OVER (PARTITION BY c.due ORDER BY m.key) - 1 AS place, c.due, ${number} AS renewal,
    CASE WHEN m.lost_in = c.k THEN 1 END AS lost
  FROM placed AS d JOIN matured AS c ON c.due = d.due JOIN members AS m ON m.start_day = c.start_day
  WHERE d.first_subgroup < d.last_subgroup AND (m.lost_in IS NULL OR m.lost_in >= c.k)
), counts AS (
  SELECT CAST(d.first_subgroup AS INTEGER) AS subgroup, ${number} AS renewal, SUM(c.at_risk) AS accounts, SUM(c.lost) AS lost,
    MIN(c.due) AS first_due, MAX(c.due) AS last_due
  FROM matured AS c JOIN placed AS d ON d.due = c.due WHERE d.first_subgroup = d.last_subgroup GROUP BY 1, 2
  UNION ALL
  SELECT CAST(FLOOR(place / ${size}) AS INTEGER), renewal, COUNT(*), COUNT(lost), MIN(due), MAX(due) FROM ordered GROUP BY 1, 2
)
SELECT subgroup, renewal, CAST(SUM(accounts) AS INTEGER) AS accounts, CAST(SUM(lost) AS INTEGER) AS lost,
  MIN(first_due) AS first_due, MAX(last_due) AS last_due
FROM counts GROUP BY subgroup, renewal ORDER BY subgroup, renewal`;
}

/** Accounts by the day on which they come up for renewal, from a day on, the one still to come included: one row a day, due, accounts and lost. */
export function renewalDaysSql(table: string, request: CensusRequest, range: RenewalRange, from: Day): string {
  return `WITH ${cellsSql(table, request, range)}
SELECT due, CAST(SUM(at_risk) AS INTEGER) AS accounts, CAST(SUM(lost) AS INTEGER) AS lost
FROM cells WHERE due >= ${from} AND at_risk > 0 GROUP BY 1 ORDER BY 1`;
}

/** Date of a start day's k-th renewal: k times the tenure after the start, so that 31 January, a month each, comes to 28 February and 31 March. */
function renewalDateSql(start: string, renewal: string, tenure: Tenure): string {
  if (tenure.unit !== 'month') return `(${start} + ${renewal} * ${daysOf(tenure)})`;
  return `(CAST(DATE '1970-01-01' + ${start} + ${renewal} * INTERVAL '${tenure.count} months' AS DATE) - DATE '1970-01-01')`;
}

/**
 * The number of the renewal at which an account was lost: the first whose date does not lie before its end. Whole months from start to end
 * need no interval arithmetic: a month more counts when the end's day of the month lies after the start's, and a clamped day lies on the
 * month's last, which no end can pass.
 */
function lostInSql(tenure: Tenure, until: Day): string {
  const date = (day: string): string => `(DATE '1970-01-01' + ${day})`;
  const month = (day: string): string => `(EXTRACT(YEAR FROM ${date(day)}) * 12 + EXTRACT(MONTH FROM ${date(day)}))`;
  const dayOfMonth = (day: string): string => `EXTRACT(DAY FROM ${date(day)})`;
  const [steps, each] =
    tenure.unit === 'month'
      ? [
          `(${month('end_day')} - ${month('start_day')} + CASE WHEN ${dayOfMonth('end_day')} > ${dayOfMonth('start_day')} THEN 1 ELSE 0 END)`,
          tenure.count,
        ]
      : ['(end_day - start_day)', daysOf(tenure)];
  return `CASE WHEN end_day <= ${until} THEN CAST(CEIL(${steps} / ${each}.0) AS INTEGER) END`;
}

const daysOf = ({ count, unit }: Tenure): number => count * (unit === 'week' ? 7 : 1);
