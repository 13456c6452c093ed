import { beforeAll, expect, test } from 'vitest';
import type { Database } from '../../src/store/sql.ts';
import { behind, onBothEngines, onRealServer, opened } from './support/engines.ts';
import { entry } from './support/samples.ts';

onBothEngines('the database', (engine) => {
  let database: Database;
  beforeAll(async () => {
    database = await behind(await engine.bare());
  });

  test('a script that fails after its BEGIN leaves no half-open transaction behind', async () => {
    await database.script('CREATE TABLE kept (n int)');
    for (let n = 0; n < 3; n++) {
      await expect(database.script('BEGIN; INSERT INTO kept VALUES (1); SELECT 1 / 0; COMMIT')).rejects.toThrow('zero');
      await database.query('INSERT INTO kept VALUES (2)');
    }
    expect(await database.query('SELECT n, count(*)::int AS times FROM kept GROUP BY n')).toEqual([{ n: 2, times: 3 }]);
  });

  test('a script returns the rows of its last statement', async () => {
    expect(await database.script('SELECT 1 AS a; SELECT 2 AS b')).toEqual([{ b: 2 }]);
  });

  test('a value that is undefined is NULL', async () => {
    expect(await database.query('SELECT $1::text AS nothing', [undefined])).toEqual([{ nothing: null }]);
  });
});

onRealServer('a server that drops its connections', (engine) => {
  test('is connected to again, and nothing is lost', async () => {
    const place = await engine.migrated();
    const store = await opened(place, { queue: { pollMs: 20 } });
    const before = entry();
    await store.receive(before);
    const outside = await behind(place);
    await outside.query(
      'SELECT pg_terminate_backend(pid) FROM pg_stat_activity WHERE datname = current_database() AND pid <> pg_backend_pid()',
    );
    const seen: string[] = [];
    await store.work(async ({ eventKey }) => void seen.push(eventKey), 1);
    const after = entry();
    // The very first statement may still meet the dead connection: the caller is told, and its repeat is taken.
    await store.receive(after).catch(() => store.receive(after));
    await store.drained(20_000);
    expect(seen.toSorted()).toEqual([before.eventKey, after.eventKey].toSorted());
  });

  test('in the middle of a transaction fails that transaction alone', async () => {
    const place = await engine.migrated();
    const [inside, outside] = [await behind(place), await behind(place)];
    await expect(
      inside.transaction(async (sql) => {
        const [own] = await sql.query<{ pid: number }>('SELECT pg_backend_pid() AS pid');
        await outside.query('SELECT pg_terminate_backend($1)', [own!.pid]);
        // Between two statements nobody waits for the connection; its end must not end the process.
        await outside.query('SELECT pg_sleep(0.05)');
        await sql.query('SELECT 1');
      }),
    ).rejects.toThrow();
    expect(await inside.query('SELECT 1 AS one')).toEqual([{ one: 1 }]);
  });
});
