import { randomUUID } from 'node:crypto';
import { existsSync, readFileSync } from 'node:fs';
import { cp, mkdir, mkdtemp, rename, rm } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { PGlite } from '@electric-sql/pglite';
import { afterAll, describe } from 'vitest';
import { openEmbedded } from '../../../src/store/embeddedSql.ts';
import { openStore, type StoreOptions } from '../../../src/store/openStore.ts';
import { openServer } from '../../../src/store/serverSql.ts';
import type { Database } from '../../../src/store/sql.ts';
import type { Store } from '../../../src/store/types.ts';
import { startServer, type TestServer } from './server.ts';

/** Noon on 5 May 2025: the tests' own clock, which stands still unless a test moves it. */
export const NOON = Date.UTC(2025, 4, 5, 12);

/** A place for a store of its own: an embedded folder or a database on the server. */
export interface Place {
  readonly dataFolder: string;
  readonly databaseUrl?: string;
}

export interface Engine {
  readonly name: 'embedded' | 'server';
  /** as on a fresh machine: no folder, or an empty database */
  untouched(): Promise<Place>;
  /** the same, but for the engine's own files, which take long to make */
  bare(): Promise<Place>;
  /** with our schema made */
  migrated(): Promise<Place>;
}

const folders: string[] = [];
const toClose: { close(): Promise<void> }[] = [];

export async function temporaryFolder(): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'ebb-store-'));
  folders.push(folder);
  return folder;
}

const require = createRequire(import.meta.url);
const PGLITE_VERSION: string = JSON.parse(
  readFileSync(join(require.resolve('@electric-sql/pglite'), '../../package.json'), 'utf8'),
).version;
/** An engine's files as they are before anything of ours: kept between runs, for they only depend on the engine's version. */
const ENGINE_FILES = new URL(`../../../node_modules/.ebb-test/pglite-${PGLITE_VERSION}`, import.meta.url).pathname;

async function engineFiles(): Promise<string> {
  if (!existsSync(ENGINE_FILES)) {
    const draft = `${ENGINE_FILES}-${randomUUID()}`;
    await mkdir(draft, { recursive: true });
    await (await PGlite.create(draft)).close();
    // Whole or not at all; when another test file was quicker, its copy is as good.
    await rename(draft, ENGINE_FILES).catch(() => rm(draft, { recursive: true, force: true }));
  }
  return ENGINE_FILES;
}

let template: Promise<string> | undefined;

const embedded: Engine = {
  name: 'embedded',
  untouched: async () => ({ dataFolder: await temporaryFolder() }),
  async bare() {
    const dataFolder = await temporaryFolder();
    await cp(await engineFiles(), join(dataFolder, 'postgres'), { recursive: true });
    return { dataFolder };
  },
  async migrated() {
    template ??= (async () => {
      const place = await embedded.bare();
      await (await openStore({ ...place, now: () => NOON })).close();
      return place.dataFolder;
    })();
    const dataFolder = await temporaryFolder();
    await cp(await template, dataFolder, { recursive: true });
    return { dataFolder };
  },
};

async function startedServer(): Promise<TestServer | string> {
  try {
    return await startServer();
  } catch (error) {
    // Where the checks run for everyone, a missing server must not look like a pass.
    if (process.env.CI) throw error;
    return String(error);
  }
}

/** The real server of this test file, or why there is none. */
export const server: TestServer | string = await startedServer();

const onServer: Engine = {
  name: 'server',
  untouched: () => onServer.bare(),
  async bare() {
    if (typeof server === 'string') throw new Error(server);
    return { dataFolder: await temporaryFolder(), databaseUrl: await server.database() };
  },
  async migrated() {
    const place = await onServer.bare();
    await (await openStore({ ...place, now: () => NOON })).close();
    return place;
  },
};

/** The same tests on both engines; without a server its half is skipped and says why. */
export function onBothEngines(what: string, tests: (engine: Engine) => void): void {
  describe(`${what} (embedded)`, () => tests(embedded));
  onRealServer(what, tests);
}

export function onEmbedded(what: string, tests: (engine: Engine) => void): void {
  describe(`${what} (embedded)`, () => tests(embedded));
}

export function onRealServer(what: string, tests: (engine: Engine) => void): void {
  const missing = typeof server === 'string';
  describe.skipIf(missing)(`${what} (server${missing ? `; skipped: ${server}` : ''})`, () => tests(onServer));
}

/** A store that is closed when the file is done, unless the test closed it. */
export async function opened(place: Place, options: Partial<StoreOptions> = {}): Promise<Store> {
  const store = await openStore({ now: () => NOON, ...place, ...options });
  toClose.push(store);
  return store;
}

/** The database behind a place, without a store: the embedded one must not be open. */
export async function behind(place: Place): Promise<Database> {
  const database = place.databaseUrl ? await openServer(place.databaseUrl) : await openEmbedded(place.dataFolder);
  let closed: Promise<void> | undefined;
  const once = { ...database, close: () => (closed ??= database.close()) };
  toClose.push(once);
  return once;
}

afterAll(async () => {
  await Promise.all(toClose.map((open) => open.close()));
  if (typeof server !== 'string') await server.stop();
  await Promise.all(folders.map((folder) => rm(folder, { recursive: true, force: true, maxRetries: 5 })));
});
