import type { DuckDBConnection } from '@duckdb/node-api';
import { type DateText, type OrderPlaces, type SettledOrder, settleOrder } from './dateOrder.ts';
import { dateReadings, dayInOrder } from './dateText.ts';
import { rowsOf } from './sql.ts';
import type { DateOrder } from './types.ts';

/**
 * Reads all date texts that are not plain ISO dates: every distinct text once, both columns together, then fills the days of `raw`
 * under the one order that all of them settle. Texts that mean "no date" become empty; what can't be read keeps its text.
 * @throws EbbError DATES_MIXED, DATES_AMBIGUOUS
 */
export async function settleDates(
  connection: DuckDBConnection,
  rowsAbove: number,
  given: DateOrder | undefined,
  places: OrderPlaces,
): Promise<SettledOrder> {
  const texts: DateText[] = [];
  for (const column of ['start', 'end'] as const) {
    const found = await rowsOf(
      connection,
      `SELECT ${column}_text AS text, min(rowid)::INTEGER AS first FROM raw WHERE ${column}_text IS NOT NULL AND rowid >= ${rowsAbove} GROUP BY 1 ORDER BY 2`,
    );
    for (const row of found) texts.push({ text: String(row.text), column, firstRow: Number(row.first) });
  }
  if (texts.length === 0) return settleOrder([], given, places);
  const settled = settleOrder(texts, given, places);
  await connection.run('CREATE OR REPLACE TABLE readings (text VARCHAR, day INTEGER, empty BOOLEAN)');
  const appender = await connection.createAppender('readings');
  for (const text of new Set(texts.map((one) => one.text))) {
    const readings = dateReadings(text);
    const day = dayInOrder(readings, settled.order);
    if (day === undefined && readings.kind !== 'empty') continue;
    appender.appendVarchar(text);
    if (day === undefined) appender.appendNull();
    else appender.appendInteger(day);
    appender.appendBoolean(readings.kind === 'empty');
    appender.endRow();
  }
  appender.closeSync();
  for (const column of ['start', 'end'] as const) {
    await connection.run(
      `UPDATE raw SET ${column}_day = readings.day, ${column}_text = CASE WHEN readings.empty THEN NULL ELSE raw.${column}_text END
       FROM readings WHERE raw.${column}_text = readings.text`,
    );
  }
  await connection.run('DROP TABLE readings');
  return settled;
}
