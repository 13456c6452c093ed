import type { DuckDBConnection } from '@duckdb/node-api';
import type { Day } from '../days.ts';
import { describeAmounts } from './amountReport.ts';
import { readAmounts, readCurrencies } from './amounts.ts';
import { checkAsOf } from './checkAsOf.ts';
import type { Columns } from './columns.ts';
import { type DayCount, dataThrough, ENDS_LOOKED_AT_DAYS, latestSteadyStart } from './dataThrough.ts';
import type { SettledOrder } from './dateOrder.ts';
import type { Encoding } from './fileStart.ts';
import type { Layout } from './layout.ts';
import { findLines } from './lines.ts';
import { allInFuture, nothingLeft } from './nothingLeft.ts';
import type { RawTable } from './rawTable.ts';
import { splitRecords } from './records.ts';
import { countLeftOut, type LeftOut, listRejected } from './rejects.ts';
import { ID_KIND, reasonSql, TRUE_END_SQL, tellingValues } from './rowRules.ts';
import { settleDates } from './settleDates.ts';
import { mergeSpells } from './spells.ts';
import { firstRow, rowsOf } from './sql.ts';
import type { ColumnMap, ReadOptions, ReadReport } from './types.ts';

const BRIDGE_DAYS = 30;
/** When the id rule would leave out more than this share, the ids evidently use such words for customers, and the rule is dropped. */
const TEST_ID_SHARE = 0.2;
const SEGMENTS_REPORTED = 50;

export interface ReadFile {
  /** the file that the engine read; its line numbers are those of the export */
  readonly path: string;
  readonly layout: Layout;
  readonly columns: Columns;
  readonly raw: RawTable;
  readonly encoding: Encoding;
}

/**
 * Makes table `accounts` out of table `raw`, with a report of everything that happened on the way.
 * Queries over all rows are what reading costs; one that only serves a special case (other dates, amounts, rejected rows, several rows
 * per account) runs only when that case is there.
 * @throws EbbError DATES_MIXED, DATES_AMBIGUOUS, DATES_UNREADABLE, ROWS_MISSING, ACCOUNTS_NONE
 */
export async function makeAccounts(
  connection: DuckDBConnection,
  file: ReadFile,
  options: ReadOptions,
): Promise<ReadReport> {
  const { layout, columns, raw } = file;
  const data = `raw WHERE rowid >= ${raw.rowsAbove}`;
  const ragged = raw.ragged.slice(layout.raggedAbove).map(({ offset }) => offset);
  const state = await firstRow(
    connection,
    `SELECT count(*)::INTEGER AS rows, ${raw.texts ? 'count(start_text) + count(end_text) AS date_texts, count(amount_text)' : '0 AS date_texts, 0'} AS amount_texts,
       count(*) FILTER (WHERE id_kind = ${ID_KIND.test})::INTEGER AS test_ids FROM ${data}`,
  );
  const rows = Number(state.rows);
  const order = await orderOf(connection, file, options, Number(state.date_texts) > 0);
  const amountTexts = Number(state.amount_texts) > 0;
  const amountReading = amountTexts ? await readAmounts(connection, 'raw') : { decimalComma: false };
  const currencies = columns.currency !== undefined || amountTexts;
  if (currencies)
    await readCurrencies(connection, 'raw', { column: columns.currency !== undefined, texts: amountTexts });

  const distinct = await distinctValues(connection, columns, data);
  const telling = tellingValues({
    segments: distinct.segment.map(({ value }) => value),
    statuses: distinct.status.map(({ value }) => value),
    flags: distinct.flag.map(({ value }) => value),
  });
  const reason = reasonSql(columns, telling, {
    testIds: Number(state.test_ids) <= rows * TEST_ID_SHARE,
    texts: raw.texts,
  });
  const key = columns.id === undefined ? 'hash(rowid)' : 'key';
  await connection.run(
    `CREATE VIEW judged AS SELECT rowid AS n, ${key} AS key, start_day, ${TRUE_END_SQL} AS end_day, segment, amount, currency, ${reason} AS reason FROM ${data}`,
  );

  const starts = await startsOf(connection);
  const bad = rows - total(starts);
  const leftOut: LeftOut[] = bad === 0 ? [] : await countLeftOut(connection, 'judged', 'reason');
  const list = (): ReadReport['rejected'] =>
    listRejected(leftOut, { path: file.path, delimiter: layout.delimiter, columns, ragged });
  const latest = latestSteadyStart(starts);
  if (latest === undefined) throw nothingLeft(list(), rows, layout, columns);
  const clean =
    bad === 0
      ? `(SELECT *, ${TRUE_END_SQL} AS true_end FROM ${data})`
      : '(SELECT *, end_day AS true_end FROM judged WHERE reason IS NULL)';
  const inferredAsOf = await inferAsOf(connection, clean, latest, starts);
  const asOf = options.asOf ?? inferredAsOf;
  checkAsOf(asOf, inferredAsOf);
  const future = total(starts.filter(({ day }) => day > asOf));
  if (future === rows - bad) throw allInFuture(asOf, starts[0]?.day);
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
    bad + future === 0
      ? `CREATE VIEW kept AS SELECT rowid AS n, ${key} AS key, start_day, ${TRUE_END_SQL} AS end_day, segment, amount, currency FROM ${data}`
      : `CREATE TABLE kept AS SELECT * EXCLUDE (reason) FROM judged WHERE reason IS NULL AND start_day <= ${asOf}`,
  );
  const { duplicates, merged, severalAtOnce } = await mergeSpells(connection, options.bridgeDays ?? BRIDGE_DAYS, {
    ids: columns.id !== undefined,
    currencies,
  });
  if (duplicates > 0)
    leftOut.push(...(await countLeftOut(connection, 'several', "CASE WHEN again THEN 'duplicate' END")));

  const summary = await firstRow(
    connection,
    `SELECT count(*)::INTEGER AS accounts, count(*) FILTER (WHERE returned)::INTEGER AS returned, min(start_day) AS first, max(start_day) AS last,
       count(*) FILTER (WHERE end_day > ${asOf})::INTEGER AS future_ends FROM accounts`,
  );
  return {
    rows: rows + ragged.length,
    accounts: Number(summary.accounts),
    returned: Number(summary.returned),
    mergedRows: rows - bad - future - duplicates - Number(summary.accounts),
    asOf,
    inferredAsOf,
    asOfSource: options.asOf === undefined ? 'latest-date' : 'given',
    futureEnds: Number(summary.future_ends),
    firstStart: Number(summary.first),
    lastStart: Number(summary.last),
    columns: columnMap(layout, columns),
    headers: layout.headers,
    dates: order.order,
    datesSource: order.source,
    encoding: file.encoding,
    delimiter: layout.delimiter,
    rejected: list(),
    segments: (bad + future === 0 && !merged
      ? distinct.segment
      : await valuesOf(connection, 'segment', 'accounts')
    ).slice(0, SEGMENTS_REPORTED),
    ...(columns.amount === undefined
      ? {}
      : {
          amounts: await describeAmounts(connection, {
            texts: amountTexts,
            decimalComma: amountReading.decimalComma,
            currencies,
            severalAtOnce,
            place: (row) => amountPlace(file, row),
          }),
        }),
  };
}

/** Where a row's amount stands in the file, and what it says. */
function amountPlace({ path, layout, columns, raw }: ReadFile, row: number): { line: number; value: string } {
  const skipped = new Set(raw.ragged.map(({ offset }) => offset));
  const place = findLines(path, layout.delimiter, skipped, new Set([row])).rows.get(row);
  const fields = splitRecords(place?.text ?? '', layout.delimiter, 1)[0]?.fields ?? [];
  return { line: place?.line ?? 0, value: fields[columns.amount ?? -1] ?? '' };
}

async function orderOf(
  connection: DuckDBConnection,
  file: ReadFile,
  options: ReadOptions,
  others: boolean,
): Promise<SettledOrder> {
  if (!others) return options.dates ? { order: options.dates, source: 'given' } : { order: 'iso', source: 'iso' };
  const { path, layout, columns, raw } = file;
  const skipped = new Set(raw.ragged.map(({ offset }) => offset));
  return settleDates(connection, raw.rowsAbove, options.dates, {
    header: (column) => layout.headers[columns[column]] ?? column,
    line: (row) => findLines(path, layout.delimiter, skipped, new Set([row])).rows.get(row)?.line ?? 0,
  });
}

interface Value {
  readonly value: string;
  readonly accounts: number;
}

async function distinctValues(
  connection: DuckDBConnection,
  columns: Columns,
  data: string,
): Promise<Record<'segment' | 'status' | 'flag', Value[]>> {
  const of = (column: 'segment' | 'status' | 'flag'): Promise<Value[]> =>
    columns[column] === undefined ? Promise.resolve([]) : valuesOf(connection, column, data);
  return { segment: await of('segment'), status: await of('status'), flag: await of('flag') };
}

/** Distinct values with their number of rows, most first; a column of free text does not come over whole. */
async function valuesOf(connection: DuckDBConnection, column: string, source: string): Promise<Value[]> {
  const found = await rowsOf(
    connection,
    `SELECT value, accounts FROM (SELECT ${column} AS value, count(*)::INTEGER AS accounts FROM ${source} GROUP BY 1)
     WHERE value IS NOT NULL ORDER BY 2 DESC, 1 LIMIT 100000`,
  );
  return found.map((row) => ({ value: String(row.value), accounts: Number(row.accounts) }));
}

async function startsOf(connection: DuckDBConnection): Promise<DayCount[]> {
  return dayCounts(connection, 'SELECT start_day AS day FROM judged WHERE reason IS NULL');
}

async function inferAsOf(
  connection: DuckDBConnection,
  clean: string,
  latestStart: Day,
  starts: readonly DayCount[],
): Promise<Day> {
  const ends = await dayCounts(
    connection,
    `SELECT true_end AS day FROM ${clean} WHERE true_end > ${latestStart - ENDS_LOOKED_AT_DAYS}`,
  );
  return dataThrough(latestStart, ends, starts);
}

async function dayCounts(connection: DuckDBConnection, days: string): Promise<DayCount[]> {
  const found = await rowsOf(connection, `SELECT day, count(*)::INTEGER AS count FROM (${days}) GROUP BY 1 ORDER BY 1`);
  return found.map((row) => ({ day: Number(row.day), count: Number(row.count) }));
}

function total(counts: readonly DayCount[]): number {
  return counts.reduce((sum, { count }) => sum + count, 0);
}

function columnMap(layout: Layout, columns: Columns): ColumnMap {
  const named: [string, string][] = [];
  for (const role of ['id', 'start', 'end', 'segment', 'amount', 'currency'] as const) {
    const column = columns[role];
    if (column !== undefined) named.push([role, layout.headers[column] ?? '']);
  }
  return Object.fromEntries(named);
}
