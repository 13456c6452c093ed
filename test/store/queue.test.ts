import { randomUUID } from 'node:crypto';
import { beforeAll, expect, test } from 'vitest';
import { JOBS_SCHEMA, openQueue, QUEUE_SETTINGS, type Queue } from '../../src/store/queue.ts';
import type { Database } from '../../src/store/sql.ts';
import { behind, onBothEngines, onEmbedded } from './support/engines.ts';

onBothEngines('the queue', (engine) => {
  let database: Database;
  let queue: Queue;
  beforeAll(async () => {
    database = await behind(await engine.migrated());
    queue = await database.alone(() => openQueue(database, QUEUE_SETTINGS));
    return () => queue.stop();
  });

  const add = async (eventKey: string): Promise<string> => {
    const id = randomUUID();
    await database.transaction((tx) => queue.add(tx, id, { teamId: 'T1', eventKey }));
    return id;
  };

  test('a job is due before the moment it was added, for the library only takes what was due before now', async () => {
    // The embedded clock ticks in milliseconds: a job due exactly when added would wait for the next poll whenever it is looked for at once.
    const id = await add('Ev-now');
    expect(
      await database.query(`SELECT start_after < created_on AS due FROM ${JOBS_SCHEMA}.job WHERE id = $1`, [id]),
    ).toEqual([{ due: true }]);
    expect((await queue.take(5)).map((job) => job.id)).toEqual([id]);
    await queue.complete(id);
  });

  test('the pause before a retry doubles each time, from 2 to 4 seconds for the first', async () => {
    const id = await add('Ev-fails');
    for (const shortest of [2, 4, 8]) {
      expect((await queue.take(1)).map((job) => job.id)).toEqual([id]);
      await queue.fail(id, new Error('away'));
      expect(await queue.take(1)).toEqual([]);
      const [row] = await database.query<{ pause: number }>(
        `SELECT extract(epoch FROM start_after - now())::float8 AS pause FROM ${JOBS_SCHEMA}.job WHERE id = $1`,
        [id],
      );
      // The library adds up to as much again by chance, so that many do not come back at the same moment; the question took a little time.
      expect(row!.pause).toBeGreaterThan(shortest - 1);
      expect(row!.pause).toBeLessThanOrEqual(2 * shortest);
      await database.query(`UPDATE ${JOBS_SCHEMA}.job SET start_after = now() - interval '1 second' WHERE id = $1`, [
        id,
      ]);
    }
    const [last] = await queue.take(1);
    expect(last).toMatchObject({ id, retryCount: 3, retryLimit: 3 });
    await queue.fail(id, new Error('away'));
    expect(await database.query(`SELECT state::text FROM ${JOBS_SCHEMA}.job WHERE id = $1`, [id])).toEqual([
      { state: 'failed' },
    ]);
    expect(await queue.unfinished()).toBe(0);
  });

  test('a job added in a transaction that fails was never added', async () => {
    const failing = database.transaction(async (tx) => {
      await queue.add(tx, randomUUID(), { teamId: 'T1', eventKey: 'Ev-undone' });
      throw new Error('thrown on purpose');
    });
    await expect(failing).rejects.toThrow('thrown on purpose');
    expect(await queue.unfinished()).toBe(0);
  });

  test('whoever lost a job to another attempt can neither keep it alive nor put it back', async () => {
    const id = await add('Ev-lost');
    const [before] = await queue.take(1);
    await database.query(`UPDATE ${JOBS_SCHEMA}.job SET retry_count = 1, started_on = 'epoch' WHERE id = $1`, [id]);
    await queue.beat([before!]);
    await queue.putBack([before!]);
    expect(await database.query(`SELECT state::text, started_on FROM ${JOBS_SCHEMA}.job WHERE id = $1`, [id])).toEqual([
      { state: 'active', started_on: new Date(0) },
    ]);
    await queue.beat([{ ...before!, retryCount: 1 }]);
    const [row] = await database.query<{ started_on: Date }>(
      `SELECT started_on FROM ${JOBS_SCHEMA}.job WHERE id = $1`,
      [id],
    );
    expect(row!.started_on.getTime()).toBeGreaterThan(0);
    await queue.complete(id);
  });
});

onEmbedded('an entry that ends the process each time', (engine) => {
  test('is taken back at each start as a further attempt, and given up after the last', async () => {
    const database = await behind(await engine.migrated());
    const id = randomUUID();
    const first = await openQueue(database, QUEUE_SETTINGS);
    await database.transaction((tx) => first.add(tx, id, { teamId: 'T1', eventKey: 'Ev-deadly' }));
    await first.stop();
    const attempts: number[] = [];
    // Each round is a process that takes the job and never says how it went.
    for (let start = 1; start <= 6; start++) {
      const queue = await openQueue(database, QUEUE_SETTINGS);
      for (const job of await queue.take(1)) attempts.push(job.retryCount + 1);
      await queue.stop();
    }
    expect(attempts).toEqual([1, 2, 3, 4]);
    expect(await database.query(`SELECT state::text FROM ${JOBS_SCHEMA}.job WHERE id = $1`, [id])).toEqual([
      { state: 'failed' },
    ]);
  });
});
