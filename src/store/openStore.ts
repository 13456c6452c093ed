import type { Logger } from 'pino';
import { openEmbedded } from './embeddedSql.ts';
import { advanceFollow, dueFollows } from './follows.ts';
import { entryOf, receiveEntry, removeOld } from './inbox.ts';
import { migrate } from './migrate.ts';
import { MIGRATIONS } from './migrations/all.ts';
import { openQueue, QUEUE_SETTINGS, type Queue, type QueueSettings } from './queue.ts';
import { openServer } from './serverSql.ts';
import { settling } from './settling.ts';
import type { Database } from './sql.ts';
import type { Store } from './types.ts';
import { startWorker, type Worker } from './worker.ts';
import { workspaceStore } from './workspaceStore.ts';

export interface StoreOptions {
  /** a Postgres server that several processes may share; left out: the embedded engine in `dataFolder` */
  readonly databaseUrl?: string;
  readonly dataFolder: string;
  /** milliseconds since 1970; stamps what is stored and decides what is old. Retries and expiry go by the database's clock */
  readonly now: () => number;
  readonly log?: Logger;
  /** other than the usual pauses of the queue: for tests */
  readonly queue?: Partial<QueueSettings>;
}

/**
 * Opens the store and brings its schema up to date.
 * Lasting: both survive a process killed at any moment. The embedded engine does not force its files to the disk, so a power cut can
 * lose its last seconds or more; where that matters, use a server.
 * @throws EbbError STORE_LOCKED (embedded: another process has the folder), STORE_NEWER (written by a newer version),
 *   SETTINGS_INVALID (folder not writable, server not reachable)
 */
export async function openStore(options: StoreOptions): Promise<Store> {
  const { dataFolder, databaseUrl, log } = options;
  const database = databaseUrl === undefined ? await openEmbedded(dataFolder) : await openServer(databaseUrl, log);
  try {
    return await storeOn(database, options);
  } catch (error) {
    await database.close();
    throw error;
  }
}

/** The store on a database that is already open; `close` closes it too. */
export async function storeOn(
  database: Database,
  options: Pick<StoreOptions, 'now' | 'log' | 'queue'>,
): Promise<Store> {
  const { now, log } = options;
  const settings = { ...QUEUE_SETTINGS, ...options.queue };
  const queue = await database.alone(async () => {
    await migrate(database, MIGRATIONS, now);
    return openQueue(database, settings, log);
  });
  return storeOver(database, queue, settings, now, log);
}

function storeOver(
  database: Database,
  queue: Queue,
  settings: QueueSettings,
  now: () => number,
  log: Logger | undefined,
): Store {
  let worker: Worker | undefined;
  let closing: Promise<void> | undefined;
  const settled = settling(() => queue.unfinished(), settings.pollMs);

  return {
    workspace: (teamId, name) => workspaceStore(database, teamId, name, now),

    async receive(entry) {
      const result = await receiveEntry(database, queue, entry, now);
      // Taken up at once by this process; by any other at its next look.
      if (result === 'new') worker?.wake();
      return result;
    },

    async work(handler, concurrency) {
      if (worker) throw new Error('this store is already being worked');
      worker = startWorker({
        queue,
        settings,
        shared: database.shared,
        concurrency,
        log,
        settled: settled.changed,
        async run(job) {
          const entry = await entryOf(database, job);
          if (!entry) {
            log?.warn({ job: job.id, event: job.eventKey }, 'a job is about an entry that is no longer there; dropped');
            return;
          }
          await handler({
            ...entry,
            attempt: job.retryCount + 1,
            lastAttempt: job.retryCount >= job.retryLimit,
          });
        },
      });
    },

    dueFollows: (moment) => dueFollows(database, moment),
    advanceFollow: (due, next, missed) => advanceFollow(database, due, next, missed),

    drained: settled.drained,

    async maintain() {
      // First, since the library also takes back what has not been confirmed for long: after a machine slept, that would be our own jobs.
      await worker?.confirm();
      await queue.maintain();
      return removeOld(database, now);
    },

    close() {
      closing ??= (async () => {
        try {
          await worker?.stop();
          await queue.stop();
        } finally {
          await database.close();
        }
      })();
      return closing;
    },
  };
}
