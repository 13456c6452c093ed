import { randomUUID } from 'node:crypto';
import { readFile, rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { Engine } from './engine.ts';
import { ACCOUNT_COLUMNS, ACCOUNT_TYPES } from './spells.ts';
import { quoteText } from './sql.ts';
import type { AccountTable, ReadReport } from './types.ts';

/**
 * The accounts as compact Parquet: key, start and end day, segment, amount, returned, currency, later amounts; sorted by start. Ids are not in it, only
 * their keys.
 * DuckDB writes files only: one goes through the engine's private folder (mode 0700) and is deleted at once.
 */
export async function writeAccounts(engine: Engine, table: AccountTable): Promise<Uint8Array> {
  const file = join(engine.folder, `${randomUUID()}.parquet`);
  try {
    await table.connection.run(
      `COPY (SELECT ${ACCOUNT_COLUMNS} FROM ${table.table} ORDER BY start_day, key)
       TO ${quoteText(file)} (FORMAT parquet, COMPRESSION zstd)`,
    );
    return await readFile(file);
  } finally {
    await rm(file, { force: true });
  }
}

/**
 * Loads accounts written by writeAccounts into a database of their own.
 * @param report  what was kept beside them; its counts are taken as they stand
 */
export async function loadAccounts(engine: Engine, parquet: Uint8Array, report: ReadReport): Promise<AccountTable> {
  const file = join(engine.folder, `${randomUUID()}.parquet`);
  const connection = await engine.open();
  try {
    await writeFile(file, parquet, { mode: 0o600 });
    await connection.run(
      // By name: what was stored before a column was kept lacks it, and gets it empty.
      `CREATE TABLE accounts (${ACCOUNT_TYPES}); INSERT INTO accounts BY NAME SELECT * FROM read_parquet(${quoteText(file)})`,
    );
    return { connection, table: 'accounts', report };
  } catch (error) {
    engine.release(connection);
    throw error;
  } finally {
    await rm(file, { force: true });
  }
}
