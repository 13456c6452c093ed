import { beforeAll, expect, test } from 'vitest';
import { bundled, started } from './support/bundled.ts';
import { onBothEngines, opened } from './support/engines.ts';
import { dataset, entry, upload } from './support/samples.ts';

let busy: string;
beforeAll(async () => {
  busy = await bundled('busyStore.ts');
});

onBothEngines('a restart', (engine) => {
  test('what was stored is there after closing and opening again, 5 MB of Parquet included', async () => {
    const place = await engine.untouched();
    const before = await opened(place);
    const workspace = await before.workspace('T-marrowby', 'Marrowby Seed Club');
    const large = new Uint8Array(5_000_000).map((_, index) => (index * 40_503) >>> 8);
    const kept = await workspace.saveDataset(dataset(), large);
    const up = await workspace.saveUpload(upload({ datasetId: kept.id, state: 'read' }));
    const key = await workspace.idKey();
    await workspace.saveSettings('C-seeds', { tenure: '3 months' });
    const received = entry();
    await before.receive(received);
    await before.close();

    const after = await opened(place);
    const again = await after.workspace('T-marrowby');
    expect(await again.currentDataset('C-seeds')).toEqual(kept);
    expect(Buffer.compare(Buffer.from(await again.parquet(kept.id)), Buffer.from(large))).toBe(0);
    expect(await again.upload(up.id)).toEqual(up);
    expect(await again.idKey()).toBe(key);
    expect(await again.settings('C-seeds')).toEqual({ tenure: '3 months' });
    expect(await after.receive(received)).toBe('seen');
    const seen: string[] = [];
    await after.work(async ({ eventKey }) => void seen.push(eventKey), 1);
    await after.drained(20_000);
    expect(seen).toEqual([received.eventKey]);
    await after.close();
  });

  test('after kill -9 in the middle of an entry, the data is there and the entry is worked again', async () => {
    const place = await engine.bare();
    const { eventKey } = entry();
    const child = started(busy, place.dataFolder, place.databaseUrl ?? '', eventKey);
    const [said, key, datasetId = ''] = (await child.line()).split(' ');
    expect([said, key]).toEqual(['working', eventKey]);
    await child.kill();

    // Embedded: taken back at the start, no poll or expiry needed. Server: once its beats have been missing for long enough.
    const queue =
      engine.name === 'embedded'
        ? { pollMs: 3_600_000, beatMs: 3_600_000 }
        : { pollMs: 50, beatMs: 100, retrySeconds: 0 };
    const store = await opened(place, { queue });
    const workspace = await store.workspace('T-marrowby');
    expect((await workspace.parquet(datasetId)).length).toBe(5_000_000);
    const seen: unknown[] = [];
    await store.work(async ({ eventKey: worked, attempt }) => void seen.push([worked, attempt]), 1);
    await store.drained(30_000);
    expect(seen).toEqual([[eventKey, 2]]);
    await store.close();
  });
});
