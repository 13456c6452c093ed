import type { DuckDBConnection } from '@duckdb/node-api';
import { dateReadings } from './dateText.ts';
import { shorten } from './layout.ts';
import { firstRow, rowsOf } from './sql.ts';
import type { AmountReport } from './types.ts';

export interface AmountFacts {
  /** raw has amount_text */
  readonly texts: boolean;
  readonly decimalComma: boolean;
  /** some row may state a currency */
  readonly currencies: boolean;
  /** from mergeSpells */
  readonly severalAtOnce: number;
  /** line and amount as they stand in the file, of a row of table raw */
  readonly place: (row: number) => { readonly line: number; readonly value: string };
}

/**
 * Counts what the amount column of the kept rows holds: nothing that decides a sum of revenue is left unsaid.
 * Over tables raw, kept and accounts.
 */
export async function describeAmounts(connection: DuckDBConnection, facts: AmountFacts): Promise<AmountReport> {
  const counts = await firstRow(
    connection,
    `SELECT count(*) FILTER (WHERE amount IS NULL)::INTEGER AS without, count(*) FILTER (WHERE amount < 0)::INTEGER AS negative,
       count(*) FILTER (WHERE amount = 0)::INTEGER AS zero FROM kept`,
  );
  const without = Number(counts.without);
  const odd = facts.texts && without > 0 ? await unreadable(connection) : { rows: 0, first: undefined };
  const found = facts.currencies
    ? await rowsOf(
        connection,
        'SELECT currency, count(*)::INTEGER AS accounts FROM accounts WHERE amount IS NOT NULL GROUP BY 1 ORDER BY 2 DESC, 1 LIMIT 50',
      )
    : [];
  const first = odd.first === undefined ? null : facts.place(odd.first);
  return {
    missing: without - odd.rows,
    unreadable: odd.rows,
    firstUnreadable: first && { line: first.line, value: shorten(first.value) },
    negative: Number(counts.negative),
    zero: Number(counts.zero),
    decimalComma: facts.decimalComma,
    thousands: facts.texts ? await thousands(connection, facts.decimalComma) : 0,
    severalAtOnce: facts.severalAtOnce,
    currencies: found.some((row) => row.currency !== null)
      ? found.map((row) => ({
          currency: row.currency === null ? null : String(row.currency),
          accounts: Number(row.accounts),
        }))
      : [],
  };
}

/** Rows whose amount has a text that is neither an amount nor a word for none. */
async function unreadable(connection: DuckDBConnection): Promise<{ rows: number; first: number | undefined }> {
  const found = await rowsOf(
    connection,
    `SELECT trim(amount_text) AS text, count(*)::INTEGER AS rows, min(n)::INTEGER AS first
     FROM kept JOIN raw ON raw.rowid = kept.n WHERE kept.amount IS NULL AND amount_text IS NOT NULL GROUP BY 1`,
  );
  const odd = found.filter((row) => dateReadings(String(row.text)).kind !== 'empty');
  return {
    rows: odd.reduce((sum, row) => sum + Number(row.rows), 0),
    first: odd.length === 0 ? undefined : Math.min(...odd.map((row) => Number(row.first))),
  };
}

async function thousands(connection: DuckDBConnection, decimalComma: boolean): Promise<number> {
  const { rows } = await firstRow(
    connection,
    `SELECT count(*)::INTEGER AS rows FROM kept JOIN raw ON raw.rowid = kept.n WHERE kept.amount IS NOT NULL AND regexp_matches(amount_text, '${decimalComma ? '[.]' : ','}[0-9]{3}')`,
  );
  return Number(rows);
}
