import { createHmac } from 'node:crypto';
import type { DuckDBConnection } from '@duckdb/node-api';
import type { Columns } from './columns.ts';
import { TIME_PATTERN } from './dateText.ts';
import { LONGEST_LINE_BYTES } from './fileStart.ts';
import type { Layout } from './layout.ts';
import { idKindSql } from './rowRules.ts';
import { firstRow, quoteName, quoteText, rowsOf } from './sql.ts';

/** A record that the engine could not split into the columns. */
export interface RaggedRecord {
  /** byte offset (from 0) at which it begins in the file that was read */
  readonly offset: number;
}

export interface RawTable {
  readonly rows: number;
  readonly ragged: readonly RaggedRecord[];
  /** some row is not valid UTF-8 */
  readonly badEncoding: boolean;
  /** table raw has start_text, end_text and amount_text; without them there was nothing to put there */
  readonly texts: boolean;
  /** the number of rows above the data (preamble and header), which come first */
  readonly rowsAbove: number;
}

/** Small buffers let both cores work on files of a few megabytes already. */
const BUFFER_BYTES = 8_000_000;

/** 0xFFF0000000000000, in a form every engine reads. */
const UPPER_12_BITS = '18442240474082181120::UBIGINT';

/**
 * The 64-bit key of an account, as SQL.
 * Without a key: DuckDB's own hash: fast, stable for the pinned version (a test holds its values), not secret.
 * With a key: 52 bits of SHA-256(b ‖ SHA-256(a ‖ id)), a and b derived from the key by HMAC-SHA-256: HMAC's nested form with
 * derived prefixes. Whoever lacks the key can neither reverse a key nor test a guessed id against it; whoever has both the key and
 * a list of ids can. Two ids share a key with a chance of about 3 in 100 million at a million accounts.
 *
 * Either way the upper 12 bits are those of the plain hash. The census breaks ties of one day by the key, and two workspaces, or a workspace
 * and the command line, should cut the same file in the same places. 4,096 values are shared by thousands of ids: they give nobody away.
 */
export function keySql(id: string, idKey: string | undefined): string {
  if (idKey === undefined) return `hash(${id})`;
  const derive = (label: string): string => createHmac('sha256', idKey).update(label).digest('hex');
  const keyed = `('0x' || left(sha256('${derive('ebbline outer')}' || sha256('${derive('ebbline inner')}' || ${id})), 13))::UBIGINT`;
  return `((hash(${id}) & ${UPPER_12_BITS}) | ${keyed})`;
}

function dateSql(column: string): string {
  // Ten characters only: DuckDB's cast also takes "2024-03-01x" for a date. All else is left as text, to be judged with the whole column.
  return `CASE WHEN strlen(${column}) = 10 THEN try_cast(${column} AS DATE) END`;
}

function dateTextSql(column: string, parsed: string): string {
  return `CASE WHEN ${parsed} IS NULL AND ${column} IS NOT NULL THEN trim(regexp_replace(trim(${column}), '([0-9])${TIME_PATTERN}', '\\1')) END`;
}

/** A trimmed value, NULL when nothing is left. Looking for a space first is much cheaper than trimming every value. */
function valueSql(column: string): string {
  return `CASE WHEN contains(${column}, ' ') THEN nullif(trim(${column}), '') WHEN ${column} <> '' THEN ${column} END`;
}

/**
 * Reads the file into table `raw`: key, start_day, end_day, segment, amount, currency, id_kind, and status and flag where there are such columns; the
 * table's rowid is the row's ordinal. Days are filled where the text is an ISO date. Every other text is kept beside (start_text, end_text,
 * amount_text), untouched but for a time of day behind the date.
 * @param options.texts  false when the beginning of the file holds nothing but ISO dates and plain numbers: three text columns are then
 *   spared, which is a third of the time. Should other texts turn up after all, the file is read again with them.
 */
export async function readRaw(
  connection: DuckDBConnection,
  path: string,
  layout: Layout,
  columns: Columns,
  options: { readonly idKey: string | undefined; readonly parallel: boolean; readonly texts: boolean },
): Promise<RawTable> {
  const column = (at: number): string => quoteName(`c${at}`);
  const source =
    `read_csv(${quoteText(path)}, delim = ${quoteText(layout.delimiter)}, header = false, auto_detect = false, all_varchar = true, ` +
    `quote = '"', escape = '"', columns = {${Array.from({ length: layout.width }, (_, at) => `'c${at}': 'VARCHAR'`).join(', ')}}, ` +
    `store_rejects = true, rejects_table = 'csv_errors', rejects_scan = 'csv_scans', rejects_limit = 0, ` +
    `buffer_size = ${BUFFER_BYTES}, max_line_size = ${LONGEST_LINE_BYTES * 2}, null_padding = ${layout.padded}, parallel = ${options.parallel})`;
  const text = (at: number | undefined): string => (at === undefined ? 'NULL::VARCHAR' : valueSql(column(at)));
  const day = (name: string): string =>
    `CASE WHEN ${name} >= DATE '1900-01-01' AND ${name} <= DATE '9999-12-31' THEN (${name} - DATE '1970-01-01')::INTEGER END`;
  const amount = columns.amount === undefined ? undefined : column(columns.amount);
  // "nan" and "inf" are numbers to the engine, and no amounts to anybody.
  const noAmount = 'NOT coalesce(isfinite(amount), false)';
  const amountText = amount === undefined ? 'NULL::VARCHAR' : `CASE WHEN ${noAmount} THEN ${amount} END`;
  const odd = [
    '(start_day IS NULL AND start_source IS NOT NULL)',
    '(end_day IS NULL AND end_source IS NOT NULL)',
    ...(amount === undefined ? [] : [`(${noAmount} AND ${amount} IS NOT NULL)`]),
  ];
  const texts = options.texts
    ? `${dateTextSql('start_source', 'start_day')} AS start_text, ${dateTextSql('end_source', 'end_day')} AS end_text, ${amountText} AS amount_text`
    : `(${odd.join(' OR ')}) AS odd`;
  const ruled = (['status', 'flag'] as const).filter((role) => columns[role] !== undefined);
  await connection.run('DROP TABLE IF EXISTS csv_errors; DROP TABLE IF EXISTS csv_scans');
  await connection.run(
    `CREATE OR REPLACE TABLE raw AS SELECT ${columns.id === undefined ? 'NULL::UBIGINT' : `CASE WHEN id IS NOT NULL THEN ${keySql('id', options.idKey)} END`} AS key, ` +
      `${['start_day', 'end_day', 'segment', 'amount', 'currency', 'id_kind', ...ruled].join(', ')}, ${texts} ` +
      `FROM (SELECT *, ${day('start_date')} AS start_day, ${day('end_date')} AS end_day FROM (SELECT *, ${text(columns.id)} AS id, ` +
      `${column(columns.start)} AS start_source, ${dateSql(column(columns.start))} AS start_date, ` +
      `${column(columns.end)} AS end_source, ${dateSql(column(columns.end))} AS end_date, ` +
      `${text(columns.segment)} AS segment, ${amount === undefined ? 'NULL::DOUBLE' : `try_cast(${amount} AS DOUBLE)`} AS amount, ${text(columns.currency)} AS currency, ` +
      `${ruled.map((role) => `${text(columns[role])} AS ${role}, `).join('')}` +
      `${columns.id === undefined ? '0::UTINYINT' : idKindSql(column(columns.id))} AS id_kind FROM ${source}))`,
  );
  if (!options.texts) {
    const { found } = await firstRow(
      connection,
      `SELECT count(*) FILTER (WHERE odd) AS found FROM raw WHERE rowid >= ${layout.widthRecordsAbove}`,
    );
    if (Number(found) > 0) return readRaw(connection, path, layout, columns, { ...options, texts: true });
  }
  const errors = await rowsOf(
    connection,
    `SELECT line_byte_position - 1 AS at, bool_or(error_type::VARCHAR = 'INVALID ENCODING') AS encoding
     FROM csv_errors WHERE csv_line IS NULL OR trim(csv_line, E' \\t\\r\\n') <> '' GROUP BY 1 ORDER BY 1`,
  );
  const { rows } = await firstRow(connection, 'SELECT count(*)::INTEGER AS rows FROM raw');
  return {
    rows: Number(rows),
    ragged: errors.map((row) => ({ offset: Number(row.at) })),
    badEncoding: errors.some((row) => row.encoding === true),
    texts: options.texts,
    rowsAbove: layout.widthRecordsAbove,
  };
}
