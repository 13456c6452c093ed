import { mkdtemp, realpath, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type DuckDBConnection, DuckDBInstance } from '@duckdb/node-api';

export interface EngineOptions {
  /** DuckDB's memory limit for one opened export, '1GB' unless said otherwise */
  readonly memoryLimit?: string;
  readonly threads?: number;
  /** where the private folder for spilling and copies is made; the system's temporary folder unless said otherwise */
  readonly spillFolder?: string;
}

/** Opens private in-memory databases, each locked to the one file it was opened for. */
export interface Engine {
  /** private folder (mode 0700), removed by close() */
  readonly folder: string;
  /**
   * A connection to a fresh in-memory database that may read the given file, and use the private folder, and nothing else:
   * no other path, no extension, no network, and its configuration can no longer be changed.
   */
  open(path?: string): Promise<DuckDBConnection>;
  /** closes the database behind a connection; its tables are gone */
  release(connection: DuckDBConnection): void;
  /**
   * Closes every database and removes the engine's folder.
   * @param leaving  the process is about to end: the memory goes with it, and taking it down table by table would only take time
   */
  close(leaving?: boolean): Promise<void>;
}

const quoted = (text: string): string => `'${text.replaceAll("'", "''")}'`;

/**
 * Makes an engine. One database per export, because DuckDB's list of readable paths can't grow once it is locked:
 * so an export can never be made to read another one.
 */
export async function openEngine(options: EngineOptions = {}): Promise<Engine> {
  const folder = await realpath(await mkdtemp(join(options.spillFolder ?? tmpdir(), 'ebbline-')));
  const instances = new Map<DuckDBConnection, DuckDBInstance>();
  const release = (connection: DuckDBConnection): void => {
    const instance = instances.get(connection);
    if (!instance) return;
    instances.delete(connection);
    connection.closeSync();
    instance.closeSync();
  };
  return {
    folder,
    async open(path) {
      const instance = await DuckDBInstance.create(':memory:', {
        memory_limit: options.memoryLimit ?? '1GB',
        ...(options.threads === undefined ? {} : { threads: String(options.threads) }),
        temp_directory: join(folder, 'spill'),
        autoinstall_known_extensions: 'false',
        autoload_known_extensions: 'false',
        allow_community_extensions: 'false',
      });
      const connection = await instance.connect();
      instances.set(connection, instance);
      await connection.run(
        [
          `SET allowed_directories = [${quoted(`${folder}/`)}]`,
          `SET allowed_paths = [${path === undefined ? '' : quoted(await realpath(path))}]`,
          'SET enable_external_access = false',
          'SET lock_configuration = true',
        ].join('; '),
      );
      return connection;
    },
    release,
    async close(leaving = false) {
      if (!leaving) for (const connection of [...instances.keys()]) release(connection);
      await rm(folder, { recursive: true, force: true });
    },
  };
}
