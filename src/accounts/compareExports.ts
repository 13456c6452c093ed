import { randomUUID } from 'node:crypto';
import { rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { Engine } from './engine.ts';
import { firstRow, quoteText } from './sql.ts';
import type { AccountTable, ExportChange, ReadReport } from './types.ts';

/**
 * Compares an export with the one before it, account by account, as both saw the earlier one's data-through date.
 * @param parquet  the earlier accounts, written by writeAccounts with keys from the same id key
 * @returns null when either export has no id column: without ids nobody can tell who is who
 */
export async function compareExports(
  engine: Engine,
  table: AccountTable,
  parquet: Uint8Array,
  earlier: ReadReport,
): Promise<ExportChange | null> {
  if (table.report.columns.id === undefined || earlier.columns.id === undefined) return null;
  const file = join(engine.folder, `${randomUUID()}.parquet`);
  await writeFile(file, parquet, { mode: 0o600 });
  const { asOf } = earlier;
  try {
    const row = await firstRow(
      table.connection,
      `SELECT count(*) FILTER (was.key IS NOT NULL)::INTEGER AS before,
         count(*) FILTER (was.key IS NOT NULL AND now.key IS NOT NULL)::INTEGER AS in_both,
         count(*) FILTER (now.key IS NULL)::INTEGER AS gone,
         count(*) FILTER (was.key IS NULL AND now.start_day <= ${asOf})::INTEGER AS back_dated,
         count(*) FILTER (was.start_day <> now.start_day)::INTEGER AS start_moved,
         count(*) FILTER (was.key IS NOT NULL AND now.end_day <= ${asOf} AND coalesce(was.end_day > ${asOf}, true))::INTEGER AS late_losses,
         count(*) FILTER (now.key IS NOT NULL AND was.end_day <= ${asOf} AND coalesce(now.end_day > ${asOf}, true))::INTEGER AS taken_back
       FROM (SELECT key, start_day, end_day FROM read_parquet(${quoteText(file)})) AS was
       FULL JOIN ${table.table} AS now ON was.key = now.key`,
    );
    const count = (name: string): number => Number(row[name]);
    return {
      before: count('before'),
      inBoth: count('in_both'),
      gone: count('gone'),
      backDated: count('back_dated'),
      startMoved: count('start_moved'),
      lateLosses: count('late_losses'),
      takenBack: count('taken_back'),
      asOfBefore: asOf,
    };
  } finally {
    await rm(file, { force: true });
  }
}
