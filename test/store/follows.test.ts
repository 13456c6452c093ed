import { expect, test } from 'vitest';
import type { Store, WorkspaceStore } from '../../src/store/types.ts';
import { NOON, onBothEngines, opened } from './support/engines.ts';

const time = { weekday: 1, hour: 9, minute: 0, zone: 'Europe/London' };
const WEEK = 7 * 86_400_000;

onBothEngines('what a channel follows', (engine) => {
  let teams = 0;
  const fresh = async (): Promise<{ store: Store; mine: WorkspaceStore; theirs: WorkspaceStore }> => {
    const store = await opened(await engine.migrated());
    teams += 2;
    return { store, mine: await store.workspace(`TF${teams}`), theirs: await store.workspace(`TF${teams + 1}`) };
  };
  const follow = (question = 'has churn moved?', nextDue = NOON) => ({
    channelId: 'C1',
    question,
    time,
    setBy: 'U1',
    nextDue,
  });

  test('is kept, set anew for the same question, and removed', async () => {
    const { mine } = await fresh();
    const kept = await mine.saveFollow(follow());
    expect(await mine.follow(kept.id)).toEqual({ ...follow(), id: kept.id, missed: [], seen: null });
    const again = await mine.saveFollow({ ...follow(), time: { ...time, hour: 10 }, nextDue: NOON + 1 });
    expect(again).toMatchObject({ id: kept.id, time: { hour: 10 }, nextDue: NOON + 1 });
    await mine.saveFollow(follow('has churn moved for “Orchard”?'));
    expect((await mine.follows('C1')).map(({ question }) => question)).toEqual([
      'has churn moved?',
      'has churn moved for “Orchard”?',
    ]);
    expect(await mine.follows('C2')).toEqual([]);
    expect(await mine.removeFollow(kept.id)).toBe(true);
    expect(await mine.removeFollow(kept.id)).toBe(false);
    expect(await mine.follow(kept.id)).toBeUndefined();
  });

  test('is due at its moment, and moves on once, whoever comes first', async () => {
    const { store, mine } = await fresh();
    const { id } = await mine.saveFollow(follow());
    expect(await store.dueFollows(NOON - 1)).toEqual([]);
    const [due] = await store.dueFollows(NOON);
    expect(due).toEqual({ teamId: mine.teamId, id, time, due: NOON });
    await Promise.all([
      store.advanceFollow(due!, NOON + WEEK, [NOON - WEEK]),
      store.advanceFollow(due!, NOON + WEEK, [NOON - WEEK]),
    ]);
    expect(await mine.follow(id)).toMatchObject({ nextDue: NOON + WEEK, missed: [NOON - WEEK] });
    await store.advanceFollow(due!, NOON + 5 * WEEK, []);
    expect(await mine.follow(id)).toMatchObject({ nextDue: NOON + WEEK });
  });

  test('remembers what was shown, and forgets only the missed moments that were told', async () => {
    const { store, mine } = await fresh();
    const { id } = await mine.saveFollow(follow());
    const [due] = await store.dueFollows(NOON);
    await store.advanceFollow(due!, NOON + WEEK, [1, 2, 3]);
    const seen = {
      at: NOON,
      asOf: 20_000,
      outcome: 'steady',
      tenure: '3 months',
      subgroupSize: 85,
      points: [{ start: 19_000, accounts: 85, lost: 6 }],
      flags: [{ key: '1 above 19000', words: 'one point', state: 'watching' }],
    };
    await mine.recordSeen(id, seen, [1, 3]);
    expect(await mine.follow(id)).toMatchObject({ seen, missed: [2] });
    await mine.recordSeen(id, null, [2]);
    expect(await mine.follow(id)).toMatchObject({ seen, missed: [] });
  });

  test('of another workspace cannot be seen, changed or removed', async () => {
    const { mine, theirs } = await fresh();
    const { id } = await theirs.saveFollow(follow());
    expect(await mine.follow(id)).toBeUndefined();
    expect(await mine.follows('C1')).toEqual([]);
    expect(await mine.removeFollow(id)).toBe(false);
    await mine.recordSeen(id, null, [NOON]);
    await mine.saveFollow(follow());
    expect(await theirs.follows('C1')).toHaveLength(1);
    expect(await theirs.follow(id)).toMatchObject({ nextDue: NOON });
  });
});
