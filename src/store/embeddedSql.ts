import { mkdir } from 'node:fs/promises';
import { join } from 'node:path';
import { PGlite, type Transaction, types } from '@electric-sql/pglite';
import { holdFolder } from './folderLock.ts';
import { bound, type Database, type Sql } from './sql.ts';

/** Bytes by way of Buffer's own hex: the engine's byte-by-byte conversion takes seconds for a Parquet of 5 MB. */
const BYTES = {
  serializers: {
    [types.BYTEA]: (bytes: Uint8Array) =>
      `\\x${Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength).toString('hex')}`,
  },
  parsers: {
    [types.BYTEA]: (text: string) => new Uint8Array(Buffer.from(text.slice(2), 'hex')),
  },
};

/**
 * The embedded engine over a folder, held exclusively by this process until closed.
 * @param dataFolder made when missing; the engine's files go to `postgres/` inside it
 * @throws EbbError STORE_LOCKED when another process has the folder open, SETTINGS_INVALID when it cannot be written
 */
export async function openEmbedded(dataFolder: string): Promise<Database> {
  const lock = await holdFolder(dataFolder);
  try {
    const files = join(dataFolder, 'postgres');
    await mkdir(files, { recursive: true });
    const engine = await PGlite.create(files, {
      serializers: BYTES.serializers,
      parsers: BYTES.parsers,
    });
    return overEngine(engine, lock.release);
  } catch (error) {
    await lock.release();
    throw error;
  }
}

function overEngine(engine: PGlite, release: () => Promise<void>): Database {
  return {
    shared: false,
    query: (text, params) => run(engine, text, params),
    transaction: (body) => engine.transaction((tx) => body({ query: (text, params) => run(tx, text, params) } as Sql)),
    async script(text) {
      try {
        const results = await engine.exec(text);
        return results.at(-1)?.rows ?? [];
      } catch (error) {
        await engine.exec('ROLLBACK');
        throw error;
      }
    },
    // The folder lock already keeps every other process out.
    alone: (body) => body(),
    async close() {
      try {
        await engine.close();
      } finally {
        await release();
      }
    },
  };
}

async function run<Row>(
  on: PGlite | Transaction,
  text: string,
  params: readonly unknown[] = [],
): Promise<readonly Row[]> {
  return (await on.query<Row>(text, bound(params))).rows;
}
