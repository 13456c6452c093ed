import type { DuckDBConnection } from '@duckdb/node-api';
import { firstRow } from './sql.ts';

/**
 * SQL that makes one row per account out of the rows of `source` (n, key, start_day, end_day, segment, amount).
 * Rows of one account that overlap, touch, or lie no more than bridgeDays apart are one spell; the account starts with its first spell
 * and ends with it. Segment and amount are those of its first row. Method: method of gaps and islands, with the latest end so far.
 */
export function spellsSql(source: string, bridgeDays: number): string {
  // An open row never ends: nothing after it can be a second spell. 2^30 lies beyond every calendar day.
  const open = 1 << 30;
  return `
    SELECT key, min(start_day) AS start_day, CASE WHEN max(until) FILTER (WHERE spell = 0) < ${open} THEN max(until) FILTER (WHERE spell = 0) END AS end_day,
      arg_min(segment, place) AS segment, arg_min(amount, place) AS amount, max(spell) > 0 AS returned
    FROM (
      SELECT *, sum(CASE WHEN start_day > reached + ${bridgeDays} THEN 1 ELSE 0 END) OVER (PARTITION BY key ORDER BY place) AS spell
      FROM (
        SELECT *, max(until) OVER (PARTITION BY key ORDER BY place ROWS BETWEEN UNBOUNDED PRECEDING AND 1 PRECEDING) AS reached
        FROM (SELECT key, start_day, segment, amount, coalesce(end_day, ${open}) AS until,
                row_number() OVER (PARTITION BY key ORDER BY start_day, end_day NULLS LAST, segment, amount, n) AS place FROM ${source})
      )
    ) GROUP BY key`;
}

/**
 * Puts the accounts of table `kept` into `accounts`. Only the accounts with several rows are merged; the others pass.
 * @param hasIds  false: every row is an account of its own
 * @returns the number of rows that repeat another one exactly and were left out
 */
export async function mergeSpells(
  connection: DuckDBConnection,
  bridgeDays: number,
  hasIds: boolean,
): Promise<{ duplicates: number; merged: boolean }> {
  // Counting distinct keys takes little more than half of what looking for the repeated ones takes.
  const { several } = hasIds
    ? await firstRow(
        connection,
        'SELECT (SELECT count(*) FROM kept) > (SELECT count(*) FROM (SELECT DISTINCT key FROM kept)) AS several',
      )
    : { several: false };
  if (several !== true) {
    await connection.run(
      'CREATE VIEW accounts AS SELECT key, start_day, end_day, segment, amount, false AS returned FROM kept',
    );
    return { duplicates: 0, merged: false };
  }
  await connection.run(`CREATE TABLE several AS SELECT * FROM (
    SELECT *, row_number() OVER (PARTITION BY key, start_day, end_day, segment, amount ORDER BY n) > 1 AS again
    FROM kept WHERE key IN (SELECT key FROM kept GROUP BY key HAVING count(*) > 1))`);
  const { duplicates } = await firstRow(connection, 'SELECT count(*)::INTEGER AS duplicates FROM several WHERE again');
  await connection.run(`CREATE TABLE accounts AS
    SELECT key, start_day, end_day, segment, amount, false AS returned FROM kept WHERE key NOT IN (SELECT key FROM several)
    UNION ALL ${spellsSql('(SELECT * FROM several WHERE NOT again)', bridgeDays)}`);
  return { duplicates: Number(duplicates), merged: true };
}
