import { randomUUID } from 'node:crypto';
import { rm } from 'node:fs/promises';
import { join } from 'node:path';
import type { DuckDBConnection } from '@duckdb/node-api';
import { type Day, isoDay } from '../days.ts';
import { EbbError } from '../errors.ts';
import { readAmounts } from './amounts.ts';
import { type Columns, datesUnreadable, recogniseColumns } from './columns.ts';
import { dataThrough } from './dataThrough.ts';
import type { Engine } from './engine.ts';
import { type Encoding, type FileStart, lineTooLong, readFileStart } from './fileStart.ts';
import { type Layout, layoutOf } from './layout.ts';
import { findLines } from './lines.ts';
import { type RawTable, readRaw } from './rawTable.ts';
import { countLeftOut, type LeftOut, listRejected } from './rejects.ts';
import { ID_KIND, reasonSql, type TellingValues, TRUE_END_SQL, tellingValues } from './rowRules.ts';
import { settleDates } from './settleDates.ts';
import { mergeSpells } from './spells.ts';
import { firstRow, rowsOf } from './sql.ts';
import type { AccountTable, ColumnMap, ReadOptions, ReadReport } from './types.ts';
import { utf8Copy } from './utf8Copy.ts';

/** Largest file read unless said otherwise: 1 GB. */
const MAX_BYTES = 1e9;
const BRIDGE_DAYS = 30;
/** When the id rule would leave out more than this share, the ids evidently use such words for customers, and the rule is dropped. */
const TEST_ID_SHARE = 0.2;

/**
 * Reads an export of accounts: recognises the columns, settles the date order from all values, merges rows into spells, and infers the
 * data-through date. Every row is used, merged into another, or listed with its reason: accounts + mergedRows + rejected rows = rows.
 * @param path  a text table; comma, semicolon, tab or bar; UTF-8, UTF-16 or Windows-1252
 * @returns a table in a database of its own; give it back with `engine.release(table.connection)`
 * @throws EbbError with the place and the mend, for everything that can't be used
 */
export async function readExport(engine: Engine, path: string, options: ReadOptions = {}): Promise<AccountTable> {
  const start = await readFileStart(path, options.maxBytes ?? MAX_BYTES);
  if (start.encoding !== 'utf-8') return readCopy(engine, path, start, start.encoding, options);
  try {
    return await readFile(engine, path, start, 'utf-8', options);
  } catch (error) {
    // A letter outside ASCII further down, or line ends of two kinds: then a clean copy is read instead.
    if (error instanceof NeedsCopy) return readCopy(engine, path, start, error.encoding, options);
    throw error;
  }
}

class NeedsCopy extends Error {
  readonly encoding: Encoding;
  constructor(encoding: Encoding, cause?: unknown) {
    super('the file is read from a clean copy', { cause });
    this.encoding = encoding;
  }
}

async function readCopy(
  engine: Engine,
  path: string,
  start: FileStart,
  encoding: Encoding,
  options: ReadOptions,
): Promise<AccountTable> {
  const copy = join(engine.folder, `${randomUUID()}.csv`);
  try {
    await utf8Copy(path, copy, encoding, start.markBytes);
    const from = encoding === start.encoding ? start : await readFileStart(copy, Number.POSITIVE_INFINITY);
    return await readFile(engine, copy, from, encoding, options, true);
  } finally {
    await rm(copy, { force: true });
  }
}

async function readFile(
  engine: Engine,
  path: string,
  start: FileStart,
  encoding: Encoding,
  options: ReadOptions,
  isCopy = false,
): Promise<AccountTable> {
  const layout = layoutOf(start.text);
  const columns = recogniseColumns(layout, options.columns);
  const connection = await engine.open(path);
  try {
    const raw = await withProgress(connection, options.onProgress, () =>
      readRows(connection, path, layout, columns, options, start, isCopy),
    );
    const report = await makeAccounts(connection, path, { layout, columns, raw, encoding }, options);
    options.onProgress?.(1);
    return { connection, table: 'accounts', report };
  } catch (error) {
    engine.release(connection);
    throw error;
  }
}

async function readRows(
  connection: DuckDBConnection,
  path: string,
  layout: Layout,
  columns: Columns,
  options: ReadOptions,
  start: FileStart,
  isCopy: boolean,
): Promise<RawTable> {
  const read = async (parallel: boolean): Promise<RawTable> => {
    try {
      return await readRaw(connection, path, layout, columns, { idKey: options.idKey, parallel });
    } catch (error) {
      if (isCopy) throw unreadable(error);
      throw new NeedsCopy('utf-8', error);
    }
  };
  let raw = await read(true);
  if (raw.badEncoding && !isCopy) throw new NeedsCopy('windows-1252');
  // Read in pieces, a quoted line break at the edge of a piece can pass for a broken row: where there are any, one thread decides.
  if (raw.ragged.length > 0 && start.sizeBytes > 4_000_000) raw = await read(false);
  return raw;
}

function unreadable(error: unknown): EbbError {
  const text = error instanceof Error ? error.message : String(error);
  if (/maximum line size/i.test(text)) return lineTooLong(Number(/line:?\s*(\d+)/i.exec(text)?.[1] ?? 2));
  return new EbbError(
    'FILE_NOT_CSV',
    'the file cannot be read as a table: quotes or line breaks do not match up',
    'Open it in a spreadsheet, check that every row has the same columns, and save it again as CSV (UTF-8).',
    { cause: error },
  );
}

async function withProgress<T>(
  connection: DuckDBConnection,
  report: ReadOptions['onProgress'],
  work: () => Promise<T>,
): Promise<T> {
  if (!report) return work();
  const timer = setInterval(() => {
    const percent = connection.progress.percentage;
    if (percent > 0) report(Math.min(0.95, percent / 100));
  }, 100);
  try {
    return await work();
  } finally {
    clearInterval(timer);
  }
}

interface Read {
  readonly layout: Layout;
  readonly columns: Columns;
  readonly raw: RawTable;
  readonly encoding: Encoding;
}

async function makeAccounts(
  connection: DuckDBConnection,
  path: string,
  read: Read,
  options: ReadOptions,
): Promise<ReadReport> {
  const { layout, columns, raw } = read;
  const above = raw.rowsAbove;
  const ragged = raw.ragged.map(({ offset }) => offset);
  const header = (column: number | undefined): string | undefined =>
    column === undefined ? undefined : layout.headers[column];
  const lineOf = (row: number): number =>
    findLines(path, layout.delimiter, new Set(ragged), new Set([row])).rows.get(row)?.line ?? 0;

  const state = await firstRow(
    connection,
    `SELECT count(*)::INTEGER AS rows, count(start_text)::INTEGER AS start_texts, count(end_text)::INTEGER AS end_texts,
       count(amount_text)::INTEGER AS amount_texts, count(*) FILTER (WHERE id_kind = ${ID_KIND.test})::INTEGER AS test_ids
     FROM raw WHERE rowid >= ${above}`,
  );
  const dataRows = Number(state.rows);
  const raggedBelow = ragged.slice(layout.raggedAbove);
  const order =
    Number(state.start_texts) + Number(state.end_texts) > 0
      ? await settleDates(connection, above, options.dates, {
          header: (column) => header(columns[column]) ?? column,
          line: lineOf,
        })
      : { order: options.dates ?? ('iso' as const), source: options.dates ? ('given' as const) : ('iso' as const) };
  if (Number(state.amount_texts) > 0) await readAmounts(connection, 'raw');

  const key = columns.id === undefined ? 'hash(rowid)' : 'key';
  const telling = await findTellingValues(connection, columns, above);
  const reason = reasonSql(columns, telling, { testIds: Number(state.test_ids) <= dataRows * TEST_ID_SHARE });
  await connection.run(
    `CREATE VIEW judged AS SELECT n, key, start_day, ${TRUE_END_SQL} AS end_day, segment, amount, reason FROM (
       SELECT rowid AS n, ${key} AS key, * EXCLUDE (key), ${reason} AS reason
       FROM raw WHERE rowid >= ${above})`,
  );
  const leftOut: LeftOut[] = await countLeftOut(connection, 'judged', 'reason');
  const bad = leftOut.reduce((sum, one) => sum + one.rows, 0);
  if (bad >= dataRows) throw nothingLeft(leftOut, path, read, ragged, dataRows);

  const dayCounts = async (column: string): Promise<{ day: number; count: number }[]> =>
    (
      await rowsOf(
        connection,
        `SELECT ${column} AS day, count(*)::INTEGER AS count FROM judged WHERE reason IS NULL AND ${column} IS NOT NULL GROUP BY 1 ORDER BY 1`,
      )
    ).map((row) => ({ day: Number(row.day), count: Number(row.count) }));
  const starts = await dayCounts('start_day');
  const ends = await dayCounts('end_day');
  const asOf = options.asOf ?? dataThrough(starts, ends);
  const future = starts.reduce((sum, { day, count }) => (asOf !== undefined && day > asOf ? sum + count : sum), 0);
  if (asOf === undefined || future >= dataRows - bad) throw allInFuture(asOf, starts[0]?.day);
  if (future > 0)
    leftOut.push(
      ...(await countLeftOut(
        connection,
        'judged',
        `CASE WHEN reason IS NULL AND start_day > ${asOf} THEN 'future-start' END`,
      )),
    );

  // With nothing to leave out, a view on the raw table spares copying it.
  await connection.run(
    bad === 0 && future === 0
      ? `CREATE VIEW kept AS SELECT rowid AS n, ${key} AS key, start_day, ${TRUE_END_SQL} AS end_day, segment, amount FROM raw WHERE rowid >= ${above}`
      : `CREATE TABLE kept AS SELECT n, key, start_day, end_day, segment, amount FROM judged WHERE reason IS NULL AND start_day <= ${asOf}`,
  );
  const { duplicates, merged } =
    columns.id === undefined
      ? await withoutIds(connection)
      : await mergeSpells(connection, options.bridgeDays ?? BRIDGE_DAYS);
  if (duplicates > 0)
    leftOut.push(...(await countLeftOut(connection, 'several', "CASE WHEN again THEN 'duplicate' END")));

  const kept = dataRows - bad - future;
  const summary = merged
    ? await firstRow(
        connection,
        'SELECT count(*)::INTEGER AS accounts, count(*) FILTER (WHERE returned)::INTEGER AS returned FROM accounts',
      )
    : { accounts: kept, returned: 0 };
  const dates = await firstRow(
    connection,
    `SELECT min(start_day) AS first, max(start_day) AS last, count(*) FILTER (WHERE end_day > ${asOf})::INTEGER AS future_ends FROM accounts`,
  );
  const segments =
    columns.segment === undefined
      ? []
      : await rowsOf(
          connection,
          'SELECT segment AS value, count(*)::INTEGER AS accounts FROM accounts WHERE segment IS NOT NULL GROUP BY 1 ORDER BY 2 DESC, 1 LIMIT 50',
        );
  const map: ColumnMap = {};
  for (const role of ['id', 'start', 'end', 'segment', 'amount'] as const) {
    const name = header(columns[role]);
    if (name !== undefined) (map as Record<string, string>)[role] = name;
  }
  return {
    rows: dataRows + raggedBelow.length,
    accounts: Number(summary.accounts),
    returned: Number(summary.returned),
    mergedRows: kept - duplicates - Number(summary.accounts),
    asOf,
    asOfSource: options.asOf === undefined ? 'latest-date' : 'given',
    futureEnds: Number(dates.future_ends),
    firstStart: Number(dates.first),
    lastStart: Number(dates.last),
    columns: map,
    headers: layout.headers,
    dates: order.order,
    datesSource: order.source,
    encoding: read.encoding,
    delimiter: layout.delimiter,
    rejected: listRejected(leftOut, { path, delimiter: layout.delimiter, columns, ragged: raggedBelow }),
    segments: segments.map((row) => ({ value: String(row.value), accounts: Number(row.accounts) })),
  };
}

async function findTellingValues(
  connection: DuckDBConnection,
  columns: Columns,
  above: number,
): Promise<TellingValues> {
  const distinct = async (column: 'segment' | 'status' | 'flag'): Promise<string[]> => {
    if (columns[column] === undefined) return [];
    // Longer values are no such words, and a column of free text need not come over whole.
    const sql = `SELECT DISTINCT ${column} AS value FROM raw WHERE ${column} IS NOT NULL AND strlen(${column}) <= 40 AND rowid >= ${above} LIMIT 100000`;
    return (await rowsOf(connection, sql)).map((row) => String(row.value));
  };
  return tellingValues({
    segments: await distinct('segment'),
    statuses: await distinct('status'),
    flags: await distinct('flag'),
  });
}

async function withoutIds(connection: DuckDBConnection): Promise<{ duplicates: number; merged: boolean }> {
  await connection.run(
    'CREATE VIEW accounts AS SELECT key, start_day, end_day, segment, amount, false AS returned FROM kept',
  );
  return { duplicates: 0, merged: false };
}

function nothingLeft(
  leftOut: readonly LeftOut[],
  path: string,
  read: Read,
  ragged: readonly number[],
  rows: number,
): EbbError {
  const { layout, columns } = read;
  const rejected = listRejected(leftOut, {
    path,
    delimiter: layout.delimiter,
    columns,
    ragged: ragged.slice(layout.raggedAbove),
  });
  if (rows === 0 && rejected.length === 0) {
    return new EbbError(
      'ROWS_MISSING',
      'there are column names and no rows under them',
      'Export again with one line per subscription.',
    );
  }
  const main = rejected[0];
  const unread = rejected.find(({ code }) => code === 'start-unreadable' || code === 'end-unreadable');
  if (main && unread === main) {
    const column = layout.headers[main.code === 'start-unreadable' ? columns.start : columns.end] ?? '';
    return datesUnreadable(column, main.firstLine, main.examples[0]?.value ?? '');
  }
  if (main?.code === 'start-missing') return datesUnreadable(layout.headers[columns.start] ?? '', main.firstLine, '');
  const hint =
    main?.code === 'end-before-start'
      ? `Are the columns the wrong way round? Start was read from "${layout.headers[columns.start]}", end from "${layout.headers[columns.end]}" (on the command line: --columns start=NAME,end=NAME).`
      : 'Check that the right columns were taken (on the command line: --columns id=NAME,start=NAME,end=NAME).';
  return new EbbError(
    'ACCOUNTS_NONE',
    `no row is left to count: ${rejected.map((one) => `${one.rows} rows: ${one.reason} (first in line ${one.firstLine})`).join('; ')}`,
    hint,
    { detail: { rejected } },
  );
}

function allInFuture(asOf: Day | undefined, first: Day | undefined): EbbError {
  return new EbbError(
    'ACCOUNTS_NONE',
    `every account starts after the data-through date ${asOf === undefined ? '' : isoDay(asOf)}; the first starts on ${first === undefined ? '?' : isoDay(first)}`,
    'Give the last day the export is complete for (on the command line: --as-of YYYY-MM-DD).',
  );
}
