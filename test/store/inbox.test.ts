import { beforeAll, describe, expect, test } from 'vitest';
import { storeOn } from '../../src/store/openStore.ts';
import type { QueueSettings } from '../../src/store/queue.ts';
import type { Database } from '../../src/store/sql.ts';
import type { InboxEntry, Store } from '../../src/store/types.ts';
import { behind, type Engine, NOON, onBothEngines, onRealServer, opened } from './support/engines.ts';
import { entry } from './support/samples.ts';

const DAY_MS = 86_400_000;
/** So rare that a test which passes was not helped by polling. */
const NO_POLLING = { pollMs: 3_600_000 };

/** A promise and the function that ends it. */
function gate(): { readonly passed: Promise<void>; open(): void } {
  let open = (): void => undefined;
  const passed = new Promise<void>((resolve) => {
    open = resolve;
  });
  return { passed, open };
}

onBothEngines('the inbox', (engine) => {
  describe('receiving', () => {
    let store: Store;
    beforeAll(async () => {
      store = await opened(await engine.migrated());
    });

    test('an event is new once and seen ever after', async () => {
      const first = entry();
      expect(await store.receive(first)).toBe('new');
      expect(await store.receive(first)).toBe('seen');
      expect(await store.receive({ ...first, naturalKey: 'about something else' })).toBe('seen');
    });

    test('two events about the same thing are one', async () => {
      const first = entry();
      expect(await store.receive(first)).toBe('new');
      expect(await store.receive(entry({ naturalKey: first.naturalKey }))).toBe('seen');
    });

    test('the same keys in two workspaces are two entries', async () => {
      const first = entry();
      expect(await store.receive(first)).toBe('new');
      expect(await store.receive({ ...first, teamId: 'T-other' })).toBe('new');
    });

    test('of twenty deliveries at the same moment one is new', async () => {
      const same = entry();
      const results = await Promise.all(Array.from({ length: 20 }, () => store.receive(same)));
      expect(results.filter((result) => result === 'new').length).toBe(1);
    });

    test('an entry without a key is refused: it could not be told apart from any other', async () => {
      for (const key of ['eventKey', 'naturalKey', 'teamId'] as const) {
        for (const missing of ['', null, undefined]) {
          await expect(store.receive({ ...entry(), [key]: missing } as InboxEntry)).rejects.toThrow(key);
        }
      }
    });
  });

  describe('working', () => {
    // One database for all of these, since opening the embedded engine takes a second; each test leaves its queue empty.
    let database: Database;
    const opened = (queue: Partial<QueueSettings> = {}) =>
      storeOn({ ...database, close: async () => undefined }, { now: () => NOON, queue });
    beforeAll(async () => {
      database = await behind(await engine.migrated());
    });

    test('what was received is worked with its payload to the letter, without waiting for a poll', async () => {
      const store = await opened(NO_POLLING);
      const seen: unknown[] = [];
      await store.work(async (each) => void seen.push(each), 2);
      const odd = entry({ payload: { text: "it's\0 odd \ud83c ; -- 🌱", nothing: null, list: [1, { a: true }] } });
      const plain = entry({ payload: 'just text' });
      for (const each of [odd, plain]) {
        await store.receive(each);
        await store.drained(20_000);
      }
      expect(seen).toEqual([
        { ...odd, attempt: 1, lastAttempt: false },
        { ...plain, attempt: 1, lastAttempt: false },
      ]);
      await store.close();
    });

    test('entries received before the work began are worked when it does', async () => {
      const store = await opened(NO_POLLING);
      const waiting = [entry(), entry(), entry()];
      for (const each of waiting) await store.receive(each);
      const seen: string[] = [];
      await store.work(async (each) => void seen.push(each.eventKey), 2);
      await store.drained(20_000);
      expect(seen.toSorted()).toEqual(waiting.map((each) => each.eventKey).toSorted());
      await store.close();
    });

    test('at most as many at a time as asked, and that many', async () => {
      const store = await opened(NO_POLLING);
      let running = 0;
      let most = 0;
      const full = gate();
      await store.work(async () => {
        running += 1;
        most = Math.max(most, running);
        if (running === 3) full.open();
        await full.passed;
        running -= 1;
      }, 3);
      for (let n = 0; n < 12; n++) await store.receive(entry());
      await store.drained(20_000);
      expect(most).toBe(3);
      await store.close();
    });

    test('a failing entry is tried four times, told which is the last, and does not stop the others', async () => {
      const store = await opened({ pollMs: 50, retrySeconds: 0 });
      const attempts: { attempt: number; lastAttempt: boolean }[] = [];
      const others: string[] = [];
      const bad = entry();
      await store.work(async ({ eventKey, attempt, lastAttempt }) => {
        if (eventKey !== bad.eventKey) return void others.push(eventKey);
        attempts.push({ attempt, lastAttempt });
        throw new Error('the chat service is away \0');
      }, 1);
      await store.receive(bad);
      await store.receive(entry());
      await store.drained(20_000);
      expect(attempts).toEqual([
        { attempt: 1, lastAttempt: false },
        { attempt: 2, lastAttempt: false },
        { attempt: 3, lastAttempt: false },
        { attempt: 4, lastAttempt: true },
      ]);
      expect(others.length).toBe(1);
      expect(await store.receive(bad)).toBe('seen');
      await store.close();
    });

    test('an entry that fails once and then works is done', async () => {
      const store = await opened({ pollMs: 50, retrySeconds: 0 });
      const attempts: number[] = [];
      await store.work(async ({ attempt }) => {
        attempts.push(attempt);
        if (attempt === 1) throw new Error('only once');
      }, 1);
      await store.receive(entry());
      await store.drained(20_000);
      expect(attempts).toEqual([1, 2]);
      await store.close();
    });

    test('waiting for the end gives up after its time and says how much is left', async () => {
      const store = await opened();
      await store.drained(1);
      await store.receive(entry());
      await store.receive(entry());
      await expect(store.drained(1)).rejects.toThrow('2 received entries');
      await store.work(async () => undefined, 1);
      await store.drained(20_000);
      await store.close();
    });

    test('a second handler is refused', async () => {
      const store = await opened();
      await store.work(async () => undefined, 1);
      await expect(store.work(async () => undefined, 1)).rejects.toThrow('already');
      await store.close();
    });
  });

  describe('closing', () => {
    test('closing waits for what is running', async () => {
      const place = await engine.migrated();
      const store = await opened(place);
      const [started, finish] = [gate(), gate()];
      const done: string[] = [];
      await store.work(async ({ eventKey }) => {
        started.open();
        await finish.passed;
        done.push(eventKey);
      }, 1);
      await store.receive(entry());
      await started.passed;
      const closing = store.close();
      finish.open();
      await closing;
      expect(done.length).toBe(1);
      const again = await opened(place);
      await again.drained(1);
      await again.close();
    });

    test('what takes too long to close is put back and worked at the next start, as the same attempt', async () => {
      const place = await engine.migrated();
      const store = await opened(place, { queue: { closeWaitMs: 1 } });
      const started = gate();
      await store.work(() => {
        started.open();
        return new Promise(() => undefined);
      }, 1);
      const slow = entry();
      await store.receive(slow);
      await started.passed;
      await store.close();

      const again = await opened(place, { queue: NO_POLLING });
      const seen: unknown[] = [];
      await again.work(async ({ eventKey, attempt }) => void seen.push([eventKey, attempt]), 1);
      await again.drained(20_000);
      expect(seen).toEqual([[slow.eventKey, 1]]);
      await again.close();
    });
  });

  test('entries older than 7 days are removed, but never one that is still to be worked', async () => {
    let now = NOON;
    const store = await opened(await engine.migrated(), { now: () => now, queue: NO_POLLING });
    const workspace = await store.workspace('T-marrowby');
    await workspace.recordPosted('old', 'verdict', '1.0');
    const [worked, waiting, recent] = [entry(), entry(), entry()];
    await store.receive(worked);
    const workedOnce = gate();
    const hold = gate();
    await store.work(async ({ eventKey }) => {
      if (eventKey === worked.eventKey) workedOnce.open();
      else await hold.passed;
    }, 1);
    await store.drained(20_000);
    await workedOnce.passed;
    await store.receive(waiting);
    expect(await store.maintain()).toEqual({ inbox: 0, posted: 0 });

    now += 7 * DAY_MS + 1;
    await store.receive(recent);
    expect(await store.maintain()).toEqual({ inbox: 1, posted: 0 });
    expect(await store.receive(waiting)).toBe('seen');
    expect(await store.receive(recent)).toBe('seen');
    hold.open();
    await store.drained(20_000);
    now += 30 * DAY_MS;
    expect(await store.maintain()).toEqual({ inbox: 2, posted: 1 });
    expect(await store.receive(worked)).toBe('new');
    await store.close();
  });
});

onRealServer('several processes', (engine: Engine) => {
  test('two workers on one server never work the same entry twice, and leave none out', async () => {
    const place = await engine.migrated();
    const stores = [await opened(place, { queue: { pollMs: 20 } }), await opened(place, { queue: { pollMs: 20 } })];
    const seen: string[] = [];
    const workers = new Set<number>();
    for (const [index, store] of stores.entries()) {
      await store.work(async ({ eventKey }) => {
        seen.push(eventKey);
        workers.add(index);
        await new Promise((resolve) => setImmediate(resolve));
      }, 3);
    }
    const entries = Array.from({ length: 120 }, () => entry());
    // All through the first: the second only gets what it finds by itself.
    await Promise.all(entries.map((each) => stores[0]!.receive(each)));
    await stores[1]!.drained(30_000);
    expect(seen.toSorted()).toEqual(entries.map((each) => each.eventKey).toSorted());
    expect(workers.size).toBe(2);
  });

  test('an entry received by a process that does not work is found by one that does', async () => {
    const place = await engine.migrated();
    const [front, back] = [await opened(place), await opened(place, { queue: { pollMs: 20 } })];
    const seen: string[] = [];
    await back.work(async ({ eventKey }) => void seen.push(eventKey), 1);
    const one = entry();
    await front.receive(one);
    await front.drained(20_000);
    expect(seen).toEqual([one.eventKey]);
  });

  test('a long job that beats is not taken for abandoned', async () => {
    const place = await engine.migrated();
    const queue = { pollMs: 50, beatMs: 200, expireSeconds: 1, retrySeconds: 0 };
    const [busy, idle] = [await opened(place, { queue }), await opened(place, { queue })];
    const started = gate();
    const finish = gate();
    const attempts: number[] = [];
    await busy.work(async ({ attempt }) => {
      attempts.push(attempt);
      started.open();
      await finish.passed;
    }, 1);
    await busy.receive(entry());
    await started.passed;
    await idle.work(async ({ attempt }) => void attempts.push(attempt), 1);
    // Three times as long as an abandoned job has: it is the beats that keep this one.
    await expect(idle.drained(3_000)).rejects.toThrow('1 received');
    finish.open();
    await idle.drained(20_000);
    expect(attempts).toEqual([1]);
  });
});
