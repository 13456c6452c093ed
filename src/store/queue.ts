import PgBoss from 'pg-boss';
import type { Logger } from 'pino';
import type { Database, Sql } from './sql.ts';

/** Where the job library keeps its tables, beside ours in the same database. */
export const JOBS_SCHEMA = 'ebbline_jobs';
const QUEUE = 'inbox';

export interface QueueSettings {
  /** how often to look for jobs of other processes and for retries that are due; a job received here does not wait for it */
  readonly pollMs: number;
  /** how often a running job is said to be still running */
  readonly beatMs: number;
  /** on a shared server, how long after its last beat a job counts as abandoned by a dead process */
  readonly expireSeconds: number;
  /** retries after the first attempt */
  readonly retries: number;
  /** pause before the first retry; doubles with each, with some jitter. 0: no pause (tests) */
  readonly retrySeconds: number;
  /** how long `close` waits for running jobs before it puts them back */
  readonly closeWaitMs: number;
}

export const QUEUE_SETTINGS: QueueSettings = {
  pollMs: 500,
  beatMs: 5_000,
  expireSeconds: 30,
  retries: 3,
  retrySeconds: 2,
  closeWaitMs: 10_000,
};

/** One job taken up: which entry it is about and how often it was tried before. */
export interface TakenJob {
  readonly id: string;
  readonly teamId: string;
  readonly eventKey: string;
  readonly retryCount: number;
  readonly retryLimit: number;
}

interface JobData {
  readonly teamId: string;
  readonly eventKey: string;
}

/** The job library over our own connection, with what it lacks: beats of running jobs, and putting back those of a dead process. */
export interface Queue {
  /** adds a job in the caller's transaction */
  add(tx: Sql, id: string, data: JobData): Promise<void>;
  take(atMost: number): Promise<readonly TakenJob[]>;
  complete(id: string): Promise<void>;
  /** retried after a growing pause, or kept as failed after the last attempt */
  fail(id: string, error: unknown): Promise<void>;
  beat(jobs: readonly TakenJob[]): Promise<void>;
  putBack(jobs: readonly TakenJob[]): Promise<void>;
  /** takes back from dead processes what they were working on, once it has expired */
  expire(): Promise<void>;
  /** jobs waiting, running or to be retried */
  unfinished(): Promise<number>;
  maintain(): Promise<void>;
  stop(): Promise<void>;
}

/**
 * Sets up the job library's tables and our queue. Call inside `database.alone`.
 * @param settings see QueueSettings
 */
export async function openQueue(database: Database, settings: QueueSettings, log?: Logger): Promise<Queue> {
  const executor = (sql: Sql): PgBoss.Db => ({
    async executeSql(text, values) {
      try {
        if (values === undefined) return { rows: [...(await database.script(text))] };
        return { rows: [...(await sql.query(text, values))] };
      } catch (error) {
        // The library drops errors of some statements; an operator must still see them.
        log?.warn({ err: error }, 'a statement of the job queue failed');
        throw error;
      }
    },
  });
  const boss = new PgBoss({
    db: executor(database),
    schema: JOBS_SCHEMA,
    // Its timers are not used: expiry must come after the beats of this process (a laptop that slept would lose its own jobs).
    supervise: false,
    schedule: false,
    retryLimit: settings.retries,
    retryDelay: settings.retrySeconds,
    retryBackoff: settings.retrySeconds > 0,
    expireInSeconds: settings.expireSeconds,
  });
  boss.on('error', (error) => log?.error({ err: error }, 'the job queue reported an error'));
  await boss.start();
  await boss.createQueue(QUEUE);
  if (!database.shared) await takeBackAll(database, log);

  return {
    async add(tx, id, data) {
      const made = await boss.send(QUEUE, data, {
        id,
        db: executor(tx),
        // The library takes up what is due before now; where the clock ticks in milliseconds (embedded) a job of this very tick is not.
        startAfter: '-1 second',
      });
      if (made === null) throw new Error(`the job of entry ${data.eventKey} could not be queued`);
    },
    async take(atMost) {
      const jobs = await boss.fetch<JobData>(QUEUE, {
        batchSize: atMost,
        includeMetadata: true,
      });
      return jobs.map((job) => ({
        id: job.id,
        teamId: job.data.teamId,
        eventKey: job.data.eventKey,
        retryCount: job.retryCount,
        retryLimit: job.retryLimit,
      }));
    },
    complete: (id) => boss.complete(QUEUE, id),
    fail: (id, error) => boss.fail(QUEUE, id, describe(error)),
    async beat(jobs) {
      // Only while it is still the same attempt: after an expiry it belongs to whoever took it up next.
      await database.query(`UPDATE ${JOBS_SCHEMA}.job SET started_on = now() ${WHERE_STILL_MINE}`, [
        QUEUE,
        ...mine(jobs),
      ]);
    },
    async putBack(jobs) {
      await database.query(
        `UPDATE ${JOBS_SCHEMA}.job SET state = 'created', started_on = NULL, start_after = now() - interval '1 second' ${WHERE_STILL_MINE}`,
        [QUEUE, ...mine(jobs)],
      );
    },
    expire: () => boss.expire(),
    async unfinished() {
      const rows = await database.query<{ jobs: number }>(
        `SELECT count(*)::int AS jobs FROM ${JOBS_SCHEMA}.job WHERE name = $1 AND state < 'completed'`,
        [QUEUE],
      );
      return rows[0]!.jobs;
    },
    maintain: () => boss.maintain(),
    stop: () => boss.stop({ graceful: false }),
  };
}

const WHERE_STILL_MINE = `FROM unnest($2::text[], $3::int[]) AS mine (id, retry_count)
  WHERE job.name = $1 AND job.id = mine.id::uuid AND job.retry_count = mine.retry_count AND job.state = 'active'`;

function mine(jobs: readonly TakenJob[]): [string[], number[]] {
  return [jobs.map((job) => job.id), jobs.map((job) => job.retryCount)];
}

/**
 * What a dead process was working on, at once: holding the folder's lock, we know that nobody works on it any more.
 * The attempt counts, so that an entry which ends the process each time is not tried for ever.
 */
async function takeBackAll(database: Database, log?: Logger): Promise<void> {
  const rows = await database.query<{ id: string; state: string }>(
    `UPDATE ${JOBS_SCHEMA}.job SET
       state = CASE WHEN retry_count < retry_limit THEN 'retry' ELSE 'failed' END::${JOBS_SCHEMA}.job_state,
       completed_on = CASE WHEN retry_count < retry_limit THEN NULL ELSE now() END,
       start_after = now() - interval '1 second'
     WHERE name = $1 AND state = 'active'
     RETURNING id, state`,
    [QUEUE],
  );
  for (const row of rows) {
    if (row.state === 'failed')
      log?.error({ job: row.id }, 'a job was running at each of its attempts when the process ended; given up');
    else log?.info({ job: row.id }, 'a job that was running when the process ended is taken up again');
  }
}

function describe(error: unknown): object {
  const text = (error instanceof Error ? (error.stack ?? error.message) : String(error)).replaceAll('\0', '');
  return { message: Buffer.from(text, 'utf8').toString('utf8') };
}
