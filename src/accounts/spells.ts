import type { DuckDBConnection } from '@duckdb/node-api';
import { firstRow } from './sql.ts';

/** One entry for each change of the amount after the first one, in order of day. */
const LATER_AMOUNTS = 'STRUCT("day" INTEGER, amount DOUBLE)[]';

/** The columns of table `accounts`; see AccountTable. */
export const ACCOUNT_COLUMNS = 'key, start_day, end_day, segment, amount, returned, currency, later_amounts';
export const ACCOUNT_TYPES = `key UBIGINT, start_day INTEGER, end_day INTEGER, segment VARCHAR, amount DOUBLE, returned BOOLEAN, currency VARCHAR, later_amounts ${LATER_AMOUNTS}`;

/**
 * SQL that makes one row per account out of the rows of `source` (n, key, start_day, end_day, segment, amount, currency).
 * Rows of one account that overlap, touch, or lie no more than bridgeDays apart are one spell; the account starts with its first spell
 * and ends with it. Segment and amount are those of its first row; later rows of the first spell give the amounts from their start on.
 * Two rows that run at once are not added up: an export seldom says whether the second replaced the first or came on top of it. Such
 * accounts are marked (several_at_once), to be counted and told. Amounts are put in order after they are listed, which takes a fifth of the
 * time of listing them in order; of two that begin on one day the larger counts as the later. Method: method of gaps and islands, with the latest end so far.
 */
export function spellsSql(source: string, bridgeDays: number, currencies: boolean): string {
  // An open row never ends: nothing after it can be a second spell. 2^30 lies beyond every calendar day.
  const open = 1 << 30;
  return `
    SELECT key, min(start_day) AS start_day, CASE WHEN max(until) FILTER (WHERE spell = 0) < ${open} THEN max(until) FILTER (WHERE spell = 0) END AS end_day,
      arg_min(segment, place) AS segment, arg_min(amount, place) AS amount, max(spell) > 0 AS returned,
      ${currencies ? "string_agg(DISTINCT currency, ' and ' ORDER BY currency)" : 'NULL::VARCHAR'} AS currency,
      list_sort(list({'day': start_day, 'amount': amount}) FILTER (WHERE spell = 0 AND amount <> amount_before)) AS later_amounts,
      coalesce(bool_or(spell = 0 AND amount <> amount_before AND start_day < reached), false) AS several_at_once
    FROM (
      SELECT *, sum(CASE WHEN start_day > reached + ${bridgeDays} THEN 1 ELSE 0 END) OVER (PARTITION BY key ORDER BY place) AS spell
      FROM (
        SELECT *, max(until) OVER (PARTITION BY key ORDER BY place ROWS BETWEEN UNBOUNDED PRECEDING AND 1 PRECEDING) AS reached,
          lag(amount IGNORE NULLS) OVER (PARTITION BY key ORDER BY place) AS amount_before
        FROM (SELECT key, start_day, segment, amount, currency, coalesce(end_day, ${open}) AS until,
                row_number() OVER (PARTITION BY key ORDER BY start_day, end_day NULLS LAST, segment, amount, n) AS place FROM ${source})
      )
    ) GROUP BY key`;
}

const OF_ONE_ROW = `key, start_day, end_day, segment, amount, false AS returned, currency, NULL::${LATER_AMOUNTS} AS later_amounts`;

/**
 * Puts the accounts of table `kept` into `accounts`. Only the accounts with several rows are merged; the others pass.
 * @param has.ids         false: every row is an account of its own
 * @param has.currencies  some row may state one
 * @returns the number of rows that repeat another one exactly and were left out, and of accounts with two amounts at once
 */
export async function mergeSpells(
  connection: DuckDBConnection,
  bridgeDays: number,
  has: { readonly ids: boolean; readonly currencies: boolean },
): Promise<{ duplicates: number; merged: boolean; severalAtOnce: number }> {
  // Counting distinct keys takes little more than half of what looking for the repeated ones takes.
  const { several } = has.ids
    ? await firstRow(
        connection,
        'SELECT (SELECT count(*) FROM kept) > (SELECT count(*) FROM (SELECT DISTINCT key FROM kept)) AS several',
      )
    : { several: false };
  if (several !== true) {
    await connection.run(`CREATE VIEW accounts AS SELECT ${OF_ONE_ROW} FROM kept`);
    return { duplicates: 0, merged: false, severalAtOnce: 0 };
  }
  await connection.run(`CREATE TABLE several AS SELECT * FROM (
    SELECT *, row_number() OVER (PARTITION BY key, start_day, end_day, segment, amount, currency ORDER BY n) > 1 AS again
    FROM kept WHERE key IN (SELECT key FROM kept GROUP BY key HAVING count(*) > 1))`);
  const { duplicates } = await firstRow(connection, 'SELECT count(*)::INTEGER AS duplicates FROM several WHERE again');
  await connection.run(
    `CREATE TABLE joined AS ${spellsSql('(SELECT * FROM several WHERE NOT again)', bridgeDays, has.currencies)};
     CREATE TABLE accounts AS SELECT ${OF_ONE_ROW} FROM kept WHERE key NOT IN (SELECT key FROM several) UNION ALL SELECT ${ACCOUNT_COLUMNS} FROM joined`,
  );
  const { at_once } = await firstRow(
    connection,
    'SELECT count(*) FILTER (WHERE several_at_once)::INTEGER AS at_once FROM joined',
  );
  await connection.run('DROP TABLE joined');
  return { duplicates: Number(duplicates), merged: true, severalAtOnce: Number(at_once) };
}
