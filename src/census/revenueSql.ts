import type { Day } from '../days.ts';
import { tenurePointSql } from './tenure.ts';
import type { CensusRequest } from './types.ts';

const text = (value: string): string => `'${value.replaceAll("'", "''")}'`;

/**
 * What is summed for each account. Sums are exact decimals: a sum of floating numbers depends on the order in which the engine's threads
 * happen to add, and the same question must give the same answer. Four decimals and 14 digits before them are kept; a larger amount counts
 * as none.
 */
const SUMS = {
  accounts: 'COUNT(*)',
  lost: 'COUNT(CASE WHEN is_lost THEN 1 END)',
  revenue: 'SUM(paid)',
  lost_revenue: 'SUM(CASE WHEN is_lost THEN paid END)',
  contraction: 'SUM(CASE WHEN NOT is_lost AND paid_at_point < paid THEN paid - paid_at_point END)',
  expansion: 'SUM(CASE WHEN NOT is_lost AND paid_at_point > paid THEN paid_at_point - paid END)',
  without_amount: 'COUNT(CASE WHEN paid IS NULL AND NOT is_negative THEN 1 END)',
  negative: 'COUNT(CASE WHEN is_negative THEN 1 END)',
  largest: 'MAX(paid)',
  largest_lost: 'MAX(CASE WHEN is_lost THEN paid END)',
} as const;

const MAXIMA = ['largest', 'largest_lost'];

/**
 * The census of revenue, cut exactly as censusSql cuts accounts (a test holds the two against each other): matured accounts in order of
 * start, ties by key, in subgroups of n. One row per subgroup with the columns of SUMS, first_start and last_start; amounts in the unit of
 * the amount column.
 * An account's amount at the tenure point is that of its last row begun by then. Unlike the census of accounts this speaks DuckDB's
 * dialect: the amounts of an account over time are a list.
 * @param table         columns key, start_day, end_day, segment, amount, later_amounts
 * @param firstStart    the first day on which an account started
 * @param maturedUntil  the last start day that has matured
 */
export function revenueSql(table: string, request: CensusRequest, firstStart: Day, maturedUntil: Day): string {
  const only = request.segment === undefined ? '' : ` AND a.segment = ${text(request.segment)}`;
  const size = `${request.subgroupSize}.0`;
  const money = (amount: string): string => `try_cast(CASE WHEN ${amount} >= 0 THEN ${amount} END AS DECIMAL(18, 4))`;
  const member = `a.start_day, coalesce(a.end_day <= p.tenure_point, false) AS is_lost, coalesce(a.amount < 0, false) AS is_negative,
    ${money('a.amount')} AS paid,
    ${money('CASE WHEN a.later_amounts IS NULL THEN a.amount ELSE coalesce(list_filter(a.later_amounts, lambda later: later."day" <= p.tenure_point AND later.amount >= 0)[-1].amount, a.amount) END')} AS paid_at_point`;
  const sums = Object.entries(SUMS)
    .map(([name, sum]) => `${sum} AS ${name}`)
    .join(', ');
  const totals = Object.keys(SUMS)
    .map((name) => `${MAXIMA.includes(name) ? 'MAX' : 'SUM'}(${name}) AS ${name}`)
    .join(', ');
  return `
WITH points AS (
  SELECT start_day, ${tenurePointSql('start_day', request.tenure)} AS tenure_point
  FROM (SELECT CAST(day AS INTEGER) AS start_day FROM generate_series(${firstStart}, ${maturedUntil}) AS every(day)) AS series
), counted AS (
  SELECT start_day, ${sums}
  FROM (SELECT ${member} FROM ${table} AS a JOIN points AS p ON a.start_day = p.start_day WHERE a.start_day <= ${maturedUntil}${only}) GROUP BY start_day
), days AS (
  SELECT start_day, CAST(SUM(accounts) OVER (ORDER BY start_day) - accounts AS INTEGER) AS earlier, CAST(accounts AS INTEGER) AS of_day FROM counted
), placed AS (
  SELECT p.start_day, p.tenure_point, d.earlier, FLOOR(d.earlier / ${size}) AS first_subgroup, FLOOR((d.earlier + d.of_day - 1) / ${size}) AS last_subgroup
  FROM days AS d JOIN points AS p ON d.start_day = p.start_day
), ordered AS (
  SELECT p.earlier + ROW_NUMBER() OVER (PARTITION BY a.start_day ORDER BY a.key) - 1 AS place, ${member}
  FROM ${table} AS a JOIN placed AS p ON a.start_day = p.start_day WHERE p.first_subgroup < p.last_subgroup${only}
), members AS (
  SELECT CAST(p.first_subgroup AS INTEGER) AS subgroup, ${totals}, MIN(c.start_day) AS first_start, MAX(c.start_day) AS last_start
  FROM counted AS c JOIN placed AS p ON c.start_day = p.start_day WHERE p.first_subgroup = p.last_subgroup GROUP BY 1
  UNION ALL
  SELECT CAST(FLOOR(place / ${size}) AS INTEGER), ${sums}, MIN(start_day), MAX(start_day) FROM ordered GROUP BY 1
)
SELECT subgroup, ${totals}, MIN(first_start) AS first_start, MAX(last_start) AS last_start FROM members GROUP BY subgroup ORDER BY subgroup`;
}

/** Most groups of amounts told apart, and most accounts looked at for them: enough for how uneven amounts are. */
const GROUPS = 1_000;
const SAMPLED_ABOVE = 100_000;

/**
 * How uneven the amounts of the matured accounts are: amount and accounts, in groups of about equal amounts, smallest first. A large table
 * is sampled by the accounts' keys.
 * @param accounts  in the table
 */
export function amountGroupsSql(table: string, request: CensusRequest, maturedUntil: Day, accounts: number): string {
  const only = request.segment === undefined ? '' : ` AND segment = ${text(request.segment)}`;
  const every = Math.max(1, Math.round(accounts / SAMPLED_ABOVE));
  const sampled = every === 1 ? '' : ` AND key % ${every} = 0`;
  return `SELECT CAST(SUM(amount) AS DOUBLE) / COUNT(*) AS amount, CAST(COUNT(*) AS INTEGER) AS accounts
    FROM (SELECT amount, NTILE(${GROUPS}) OVER (ORDER BY amount) AS part FROM (
      SELECT try_cast(amount AS DECIMAL(18, 4)) AS amount FROM ${table} WHERE amount >= 0 AND start_day <= ${maturedUntil}${only}${sampled}) WHERE amount IS NOT NULL)
    GROUP BY part ORDER BY part`;
}

/** Currencies of the matured accounts that have an amount: currency and accounts, most first. */
export function currenciesSql(table: string, request: CensusRequest, maturedUntil: Day): string {
  const only = request.segment === undefined ? '' : ` AND segment = ${text(request.segment)}`;
  return `SELECT currency, CAST(COUNT(*) AS INTEGER) AS accounts FROM ${table}
    WHERE amount IS NOT NULL AND start_day <= ${maturedUntil}${only} GROUP BY 1 ORDER BY 2 DESC, 1`;
}
