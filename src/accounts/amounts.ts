import type { DuckDBConnection } from '@duckdb/node-api';
import { firstRow } from './sql.ts';

/**
 * Fills amounts that are not plain numbers: currency signs and codes, thousands separators, decimal commas, accounting brackets.
 * A comma is the decimal sign when some value of the column can only be read so ("12,5", "1.234,50"); then it is for all of them.
 * What stays unreadable is empty: an amount decides nothing about when an account left.
 */
export async function readAmounts(connection: DuckDBConnection, table: string): Promise<void> {
  const bare = String.raw`regexp_replace(amount_text, '[^0-9.,()\-]', '', 'g')`;
  const { comma } = await firstRow(
    connection,
    String.raw`SELECT coalesce(bool_or(regexp_full_match(b, '[(\-]*[0-9]{1,3}(\.[0-9]{3})+,[0-9]+[)]?|[(\-]*[0-9]+,([0-9]{1,2}|[0-9]{4,})[)]?')), false) AS comma
      FROM (SELECT ${bare} AS b FROM ${table} WHERE amount_text IS NOT NULL)`,
  );
  const plain = comma === true ? "replace(replace(b, '.', ''), ',', '.')" : "replace(b, ',', '')";
  await connection.run(
    `UPDATE ${table} SET amount = (SELECT CASE WHEN starts_with(x, '(') THEN -try_cast(trim(x, '()') AS DOUBLE) ELSE try_cast(x AS DOUBLE) END
       FROM (SELECT ${plain} AS x FROM (SELECT ${bare} AS b))) WHERE amount_text IS NOT NULL`,
  );
  if (comma === true) {
    // Whole thousands such as "1.234" were taken for 1.234 by the first, plain reading; the column has shown what its points mean.
    await connection.run(
      `UPDATE ${table} SET amount = amount * 1000 WHERE amount_text IS NULL AND amount <> floor(amount)`,
    );
  }
}
