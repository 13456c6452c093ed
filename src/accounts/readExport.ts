import { randomUUID } from 'node:crypto';
import { rm } from 'node:fs/promises';
import { join } from 'node:path';
import type { DuckDBConnection } from '@duckdb/node-api';
import { EbbError } from '../errors.ts';
import { type Columns, recogniseColumns } from './columns.ts';
import type { Engine } from './engine.ts';
import { type Encoding, type FileStart, lineTooLong, readFileStart } from './fileStart.ts';
import { type Layout, layoutOf } from './layout.ts';
import { countRecords } from './lines.ts';
import { makeAccounts } from './makeAccounts.ts';
import { type RawTable, readRaw } from './rawTable.ts';
import type { AccountTable, ReadOptions } from './types.ts';
import { utf8Copy } from './utf8Copy.ts';

/** Largest file read unless said otherwise: 1 GB. */
const MAX_BYTES = 1e9;

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
      readRows(connection, path, layout, columns, options, isCopy),
    );
    const report = await makeAccounts(connection, { path, layout, columns, raw, encoding }, options);
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
  isCopy: boolean,
): Promise<RawTable> {
  const read = async (parallel: boolean): Promise<RawTable> => {
    try {
      return await readRaw(connection, path, layout, columns, {
        idKey: options.idKey,
        parallel,
        texts: hasOtherTexts(layout, columns),
      });
    } catch (error) {
      if (isCopy) throw unreadable(error);
      throw new NeedsCopy('utf-8', error);
    }
  };
  let raw = await read(true);
  if (raw.badEncoding && !isCopy) throw new NeedsCopy('windows-1252');
  if (raw.ragged.length === 0) return raw;
  // Broken rows: hold the engine's count against our own. Read in pieces, a quoted line break at the edge of a piece can pass for a
  // broken row; then one thread decides.
  const { records, unclosedLine } = countRecords(path, layout.delimiter);
  if (unclosedLine !== undefined) throw quoteUnclosed(unclosedLine);
  const all = (): boolean => raw.rows + raw.ragged.length === records;
  if (!all()) raw = await read(false);
  if (!all()) throw unreadable(undefined);
  return raw;
}

function quoteUnclosed(line: number): EbbError {
  return new EbbError(
    'FILE_NOT_CSV',
    `the row that begins in line ${line} opens a quote (") that is never closed, so the rows after it cannot be told apart`,
    `Close the quote in line ${line} or take it out, and send the file again.`,
    { detail: { line } },
  );
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

/** The beginning of the file holds dates that are not plain ISO dates, or amounts that are not plain numbers. */
function hasOtherTexts(layout: Layout, columns: Columns): boolean {
  const plain = (text: string, pattern: RegExp): boolean => text === '' || pattern.test(text);
  return layout.sample.some(
    ({ fields }) =>
      !plain(fields[columns.start] ?? '', /^\d{4}-\d{2}-\d{2}$/) ||
      !plain(fields[columns.end] ?? '', /^\d{4}-\d{2}-\d{2}$/) ||
      !plain(columns.amount === undefined ? '' : (fields[columns.amount] ?? ''), /^-?\d+(\.\d+)?$/),
  );
}
