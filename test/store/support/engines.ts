import { cp, mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
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
  /** an empty place, its schema not made */
  bare(): Promise<Place>;
  /** an empty place with the schema made */
  migrated(): Promise<Place>;
}

const folders: string[] = [];
const toClose: { close(): Promise<void> }[] = [];

export async function temporaryFolder(): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'ebb-store-'));
  folders.push(folder);
  return folder;
}

let template: Promise<string> | undefined;

const embedded: Engine = {
  name: 'embedded',
  bare: async () => ({ dataFolder: await temporaryFolder() }),
  async migrated() {
    // Making the engine's files takes seconds; copying them does not.
    template ??= (async () => {
      const folder = await temporaryFolder();
      const store = await openStore({ dataFolder: folder, now: () => NOON });
      await store.close();
      return folder;
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
  if (typeof server === 'string') describe.skip(`${what} (server; skipped: ${server})`, () => tests(onServer));
  else describe(`${what} (server)`, () => tests(onServer));
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
  await Promise.all(folders.map((folder) => rm(folder, { recursive: true, force: true })));
});
