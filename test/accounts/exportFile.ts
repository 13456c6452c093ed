import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll } from 'vitest';
import { type Engine, openEngine } from '../../src/accounts/engine.ts';
import { readExport } from '../../src/accounts/readExport.ts';
import type { AccountTable, ReadOptions, ReadReport } from '../../src/accounts/types.ts';
import { type Day, dayFromIso } from '../../src/days.ts';
import { EbbError } from '../../src/errors.ts';

/** One engine and one folder for a test file; every read table is given back at once. */
export function exportReader() {
  let engine: Engine;
  let folder: string;
  let files = 0;
  beforeAll(async () => {
    engine = await openEngine({ memoryLimit: '512MB' });
    folder = mkdtempSync(join(tmpdir(), 'ebbline-test-'));
  });
  afterAll(async () => {
    await engine.close();
    rmSync(folder, { recursive: true, force: true });
  });
  const put = (content: string | Uint8Array): string => {
    const path = join(folder, `export-${files++}.csv`);
    writeFileSync(path, content);
    return path;
  };
  return {
    put,
    engine: (): Engine => engine,
    async with<T>(
      content: string | Uint8Array,
      options: ReadOptions,
      use: (table: AccountTable) => Promise<T> | T,
    ): Promise<T> {
      const table = await readExport(engine, put(content), options);
      try {
        return await use(table);
      } finally {
        engine.release(table.connection);
      }
    },
    report(content: string | Uint8Array, options: ReadOptions = {}): Promise<ReadReport> {
      return this.with(content, options, (table) => table.report);
    },
    accounts(content: string | Uint8Array, options: ReadOptions = {}): Promise<Account[]> {
      return this.with(content, options, accountsOf);
    },
    async refused(content: string | Uint8Array, options: ReadOptions = {}): Promise<EbbError> {
      try {
        await this.report(content, options);
      } catch (error) {
        if (error instanceof EbbError) return error;
        throw error;
      }
      throw new Error('the file was read, and should have been refused');
    },
  };
}

export interface Account {
  readonly key: bigint;
  readonly start: Day;
  readonly end: Day | null;
  readonly segment: string | null;
  readonly amount: number | null;
  readonly returned: boolean;
}

export async function accountsOf(table: AccountTable): Promise<Account[]> {
  const reader = await table.connection.runAndReadAll(
    `SELECT key, start_day AS start, end_day AS end, segment, amount, returned FROM ${table.table} ORDER BY start_day, key`,
  );
  return reader.getRowObjectsJS() as unknown as Account[];
}

export function day(iso: string): Day {
  const found = dayFromIso(iso);
  if (found === undefined) throw new Error(`${iso} is no day`);
  return found;
}

export const used = (report: ReadReport): number =>
  report.accounts + report.mergedRows + report.rejected.reduce((sum, { rows }) => sum + rows, 0);
