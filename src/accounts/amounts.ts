import type { DuckDBConnection } from '@duckdb/node-api';
import { currencyBeside, currencyNamed } from './currency.ts';
import { firstRow, quoteText, rowsOf } from './sql.ts';

/** How the column's separators were taken. */
export interface AmountReading {
  readonly decimalComma: boolean;
}

const BARE = String.raw`regexp_replace(amount_text, '[^0-9.,()\-]', '', 'g')`;

/**
 * Fills amounts that are not plain numbers: currency signs and codes, thousands separators, decimal commas, accounting brackets.
 * A comma is the decimal sign when some value of the column can only be read so ("12,5", "1.234,50"); then it is for all of them.
 * What stays unreadable is empty: an amount decides nothing about when an account left. It is counted by describeAmounts.
 */
export async function readAmounts(connection: DuckDBConnection, table: string): Promise<AmountReading> {
  const { comma } = await firstRow(
    connection,
    String.raw`SELECT coalesce(bool_or(regexp_full_match(b, '[(\-]*[0-9]{1,3}(\.[0-9]{3})+,[0-9]+[)]?|[(\-]*[0-9]+,([0-9]{1,2}|[0-9]{4,})[)]?')), false) AS comma
      FROM (SELECT ${BARE} AS b FROM ${table} WHERE amount_text IS NOT NULL)`,
  );
  const plain = comma === true ? "replace(replace(b, '.', ''), ',', '.')" : "replace(b, ',', '')";
  await connection.run(
    `UPDATE ${table} SET amount = (SELECT CASE WHEN starts_with(x, '(') THEN -try_cast(trim(x, '()') AS DOUBLE) ELSE try_cast(x AS DOUBLE) END
       FROM (SELECT ${plain} AS x FROM (SELECT ${BARE} AS b))) WHERE amount_text IS NOT NULL`,
  );
  if (comma === true) {
    // Whole thousands such as "1.234" were taken for 1.234 by the first, plain reading; the column has shown what its points mean.
    // Their text is put back, so that they can be counted.
    await connection.run(
      `UPDATE ${table} SET amount = round(amount * 1000), amount_text = format('{:.3f}', amount) WHERE amount_text IS NULL AND ${POINT_OF_THOUSANDS}`,
    );
  }
  return { decimalComma: comma === true };
}

/** "1.234", not "12.3456" and not "1234.5": one to three digits, a point and at most three more. */
const POINT_OF_THOUSANDS =
  'amount <> floor(amount) AND abs(amount) < 1000 AND abs(amount * 1000 - round(amount * 1000)) < 1e-6';

/** Different texts around amounts; a column with more of them holds free text, of which the rest names no currency. */
const MOST_MARKS = 2_000;

/**
 * Brings currencies into one form: those of the currency column, and, where it says nothing, the signs and codes beside the amounts.
 * @param texts  the table has amount_text
 */
export async function readCurrencies(
  connection: DuckDBConnection,
  table: string,
  use: { readonly column: boolean; readonly texts: boolean },
): Promise<void> {
  const settle = async (from: string, where: string, reading: (text: string) => string | undefined): Promise<void> => {
    const found = await rowsOf(
      connection,
      `SELECT text FROM (SELECT ${from} AS text, count(*) AS n FROM ${table} WHERE ${where} GROUP BY 1) ORDER BY n DESC, text LIMIT ${MOST_MARKS}`,
    );
    const pairs = found.flatMap((row) => {
      const text = String(row.text);
      const currency = reading(text);
      return currency === undefined ? [] : [`(${quoteText(text)}, ${quoteText(currency)})`];
    });
    if (pairs.length === 0) return;
    await connection.run(
      `UPDATE ${table} SET currency = forms.currency FROM (VALUES ${pairs.join(', ')}) AS forms(text, currency) WHERE ${where} AND ${from} = forms.text`,
    );
  };
  if (use.column) await settle(`${table}.currency`, `${table}.currency IS NOT NULL`, currencyNamed);
  if (use.texts)
    await settle(
      String.raw`regexp_replace(amount_text, '[0-9.,()\-+''\s]', '', 'g')`,
      `amount_text IS NOT NULL AND ${table}.currency IS NULL`,
      currencyBeside,
    );
}
