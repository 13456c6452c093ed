import { beforeAll, describe, expect, test } from 'vitest';
import { migrate } from '../../src/store/migrate.ts';
import { MIGRATIONS } from '../../src/store/migrations/all.ts';
import { scopeOf } from '../../src/store/scope.ts';
import type { Database } from '../../src/store/sql.ts';
import type { WorkspaceStore } from '../../src/store/types.ts';
import { workspaceStore } from '../../src/store/workspaceStore.ts';
import { behind, NOON, onBothEngines } from './support/engines.ts';
import { dataset, REPORT, upload } from './support/samples.ts';

onBothEngines('what one workspace stores', (engine) => {
  let database: Database;
  let now = NOON;
  let teams = 0;
  const workspace = (teamId = `T${++teams}`, name?: string): Promise<WorkspaceStore> =>
    workspaceStore(database, teamId, name, () => now);

  beforeAll(async () => {
    database = await behind(await engine.migrated());
    await migrate(database, MIGRATIONS, () => NOON);
  });

  test('the id key is made once, is 256 bits, and differs between workspaces', async () => {
    const mine = await workspace();
    const keys = await Promise.all([mine.idKey(), mine.idKey(), mine.idKey()]);
    expect(new Set(keys).size).toBe(1);
    expect(keys[0]).toMatch(/^[0-9a-f]{64}$/);
    expect(await (await workspace(mine.teamId)).idKey()).toBe(keys[0]);
    expect(await (await workspace()).idKey()).not.toBe(keys[0]);
  });

  test('the settings of a channel are empty at first, then what was saved last', async () => {
    const mine = await workspace();
    expect(await mine.settings('C1')).toEqual({});
    await mine.saveSettings('C1', { tenure: '3 months', subgroupSize: 85 });
    await mine.saveSettings('C1', { tenure: '6 months', settleDays: 7, segment: 'plan' });
    expect(await mine.settings('C1')).toEqual({ tenure: '6 months', settleDays: 7, segment: 'plan' });
    expect(await mine.settings('C2')).toEqual({});
  });

  test('the last question answered is that of the thread, else the newest of the channel', async () => {
    const mine = await workspace();
    expect(await mine.lastQuestion('C1', null)).toBeUndefined();
    await mine.rememberQuestion('C1', '1.0', 'has churn moved?');
    await mine.rememberQuestion('C1', null, 'has churn at 6 months moved?');
    await mine.rememberQuestion('C1', '1.0', 'has churn at 3 months moved?');
    expect(await mine.lastQuestion('C1', '1.0')).toBe('has churn at 3 months moved?');
    expect(await mine.lastQuestion('C1', null)).toBe('has churn at 6 months moved?');
    expect(await mine.lastQuestion('C1', '2.0')).toMatch(/has churn at [36] months moved/);
    expect(await mine.lastQuestion('C2', '1.0')).toBeUndefined();
  });

  test('an upload is kept, changed only where told, and found in its thread', async () => {
    const mine = await workspace();
    const saved = await mine.saveUpload(upload());
    expect(saved).toEqual({ ...upload(), id: saved.id });
    const kept = await mine.saveDataset(dataset(), new Uint8Array([1]));
    const changed = await mine.updateUpload(saved.id, { state: 'read', datasetId: kept.id, choices: { dates: 'mdy' } });
    expect(changed).toEqual({ ...saved, state: 'read', datasetId: kept.id, choices: { dates: 'mdy' } });
    expect(await mine.updateUpload(saved.id, { headers: ['a'] })).toEqual({ ...changed, headers: ['a'] });
    expect(await mine.updateUpload(saved.id, { datasetId: null })).toMatchObject({ datasetId: null, headers: ['a'] });
    expect(await mine.upload(saved.id)).toMatchObject({ id: saved.id, state: 'read' });
    expect(await mine.uploadInThread(saved.channelId, saved.threadTs)).toMatchObject({ id: saved.id });
    expect(await mine.uploadInThread('C-other', saved.threadTs)).toBeUndefined();
    await expect(mine.updateUpload('nowhere', { state: 'read' })).rejects.toThrow('no upload nowhere');
  });

  test('the current dataset of a channel is the one saved last, even within the same moment', async () => {
    const mine = await workspace();
    expect(await mine.currentDataset('C-seeds')).toBeUndefined();
    const saved = [];
    for (const name of ['first.csv', 'second.csv', 'third.csv']) {
      saved.push(await mine.saveDataset(dataset({ name }), new Uint8Array([0, 255, 128])));
    }
    await mine.saveDataset(dataset({ channelId: 'C-other' }), new Uint8Array());
    expect(await mine.currentDataset('C-seeds')).toEqual(saved[2]);
    expect((await mine.datasets('C-seeds')).map((each) => each.name)).toEqual(['third.csv', 'second.csv', 'first.csv']);
    expect(await mine.dataset(saved[0]!.id)).toEqual({
      ...dataset({ name: 'first.csv' }),
      id: saved[0]!.id,
      uploadedAt: new Date(NOON),
    });
    expect([...(await mine.parquet(saved[0]!.id))]).toEqual([0, 255, 128]);
    await expect(mine.parquet('nowhere')).rejects.toMatchObject({ code: 'DATASET_MISSING' });
  });

  test('Parquet of 5 MB comes back byte for byte, also from a view into a larger buffer', async () => {
    const mine = await workspace();
    const large = new Uint8Array(5_000_010).map((_, index) => (index * 2_654_435_761) >>> 24).subarray(7, 5_000_007);
    const saved = await mine.saveDataset(dataset(), large);
    const back = await mine.parquet(saved.id);
    expect(back.length).toBe(5_000_000);
    expect(Buffer.compare(Buffer.from(back), Buffer.from(large))).toBe(0);
  });

  test('what a step posted is remembered, and the first message counts', async () => {
    const mine = await workspace();
    expect(await mine.postedTs('job 1', 'verdict')).toBeUndefined();
    await mine.recordPosted('job 1', 'verdict', '17.1');
    await mine.recordPosted('job 1', 'verdict', '17.2');
    expect(await mine.postedTs('job 1', 'verdict')).toBe('17.1');
    expect(await mine.postedTs('job 1', 'picture')).toBeUndefined();
  });

  test('the name of a workspace is kept when a later call does not give one', async () => {
    const { teamId } = await workspace(undefined, 'Marrowby Seed Club');
    await workspace(teamId);
    const rows = await database.query('SELECT name FROM ebbline.workspaces WHERE team_id = $1', [teamId]);
    expect(rows).toEqual([{ name: 'Marrowby Seed Club' }]);
  });

  describe('another workspace', () => {
    test('cannot reach rows by their ids', async () => {
      const [mine, theirs] = [await workspace(), await workspace()];
      const set = await theirs.saveDataset(dataset(), new Uint8Array([7]));
      const up = await theirs.saveUpload(upload({ datasetId: set.id }));
      await theirs.saveSettings('C-seeds', { subgroupSize: 50 });
      await theirs.recordPosted('job', 'step', '1.0');
      await theirs.rememberQuestion('C-seeds', null, 'has churn moved?');

      expect(await mine.dataset(set.id)).toBeUndefined();
      await expect(mine.parquet(set.id)).rejects.toMatchObject({ code: 'DATASET_MISSING' });
      expect(await mine.currentDataset('C-seeds')).toBeUndefined();
      expect(await mine.datasets('C-seeds')).toEqual([]);
      expect(await mine.upload(up.id)).toBeUndefined();
      expect(await mine.uploadInThread(up.channelId, up.threadTs)).toBeUndefined();
      await expect(mine.updateUpload(up.id, { state: 'refused' })).rejects.toThrow('no upload');
      expect(await mine.settings('C-seeds')).toEqual({});
      expect(await mine.postedTs('job', 'step')).toBeUndefined();
      expect(await mine.lastQuestion('C-seeds', null)).toBeUndefined();

      expect(await theirs.upload(up.id)).toEqual(up);
      expect([...(await theirs.parquet(set.id))]).toEqual([7]);
    });

    test('cannot be pointed at: an upload may not name a dataset of another workspace', async () => {
      const [mine, theirs] = [await workspace(), await workspace()];
      const set = await theirs.saveDataset(dataset(), new Uint8Array([7]));
      await expect(mine.saveUpload(upload({ datasetId: set.id }))).rejects.toThrow(/foreign key/);
    });

    test('a statement that is not bound to a team never reaches the database', async () => {
      const scope = scopeOf(database, 'T1');
      for (const text of [
        'SELECT * FROM ebbline.uploads',
        'SELECT * FROM ebbline.uploads WHERE id = $2',
        'SELECT team_id, $1 FROM ebbline.uploads',
        'SELECT * FROM ebbline.uploads WHERE team_id = $12',
        'INSERT INTO ebbline.posted (team_id, job_key) VALUES ($2, $1)',
      ]) {
        await expect(scope.query(text)).rejects.toThrow('bound to its team');
      }
    });
  });

  test('hostile names are stored as they are, and the tables survive', async () => {
    const names = [
      "Robert'); DROP TABLE ebbline.datasets; --",
      '"; DELETE FROM ebbline.uploads; --',
      "\\'; SELECT pg_sleep(9); --",
      '$1 $2 {{name}} %s %(name)s',
      'Grüße 🌱 مرحبا \u202Eevil\u0007\r\n\t',
      '{"a": 1}',
      'null',
      '',
    ];
    const mine = await workspace(`T'; DROP SCHEMA ebbline CASCADE; --${++teams}`, names[0]);
    for (const name of names) {
      const set = await mine.saveDataset(
        dataset({
          name,
          channelId: name,
          choices: { columns: { start: name } },
          report: { ...REPORT, headers: [name] },
        }),
        new Uint8Array([1]),
      );
      expect(await mine.dataset(set.id)).toMatchObject({
        name,
        channelId: name,
        choices: { columns: { start: name } },
        report: { headers: [name] },
      });
      const up = await mine.saveUpload(upload({ fileName: name, threadTs: name, headers: names }));
      expect(await mine.uploadInThread(up.channelId, name)).toEqual(up);
      await mine.saveSettings(name, { segment: name });
      expect(await mine.settings(name)).toEqual({ segment: name });
      await mine.recordPosted(name, name, '1.0');
      expect(await mine.postedTs(name, name)).toBe('1.0');
      expect(await mine.upload(name)).toBeUndefined();
    }
    expect((await mine.datasets(names[0]!)).length).toBe(1);
  });

  test('a NUL character is refused by name and value, in columns as in JSON', async () => {
    const mine = await workspace();
    const refusal = { code: 'OPTION_INVALID', message: expect.stringContaining('NUL') };
    await expect(mine.saveUpload(upload({ fileName: 'a\0.csv' }))).rejects.toMatchObject(refusal);
    await expect(mine.saveUpload(upload({ headers: ['a\0'] }))).rejects.toMatchObject(refusal);
    await expect(mine.saveSettings('C1', { tenure: '3\0' })).rejects.toMatchObject(refusal);
    await expect(workspace('T\0')).rejects.toMatchObject(refusal);
    await mine.saveUpload(upload({ headers: ['\\u0000 in so many letters'] }));
  });

  test('a name cut in the middle of an emoji is stored with a replacement character', async () => {
    const mine = await workspace();
    const saved = await mine.saveUpload(upload({ fileName: 'seeds \ud83c', headers: ['\udf31 plan'] }));
    expect(saved).toMatchObject({ fileName: 'seeds \ufffd', headers: ['\ufffd plan'] });
  });

  test('a JSON column that does not hold what it should is named, not passed on', async () => {
    const mine = await workspace();
    const set = await mine.saveDataset(dataset(), new Uint8Array([1]));
    await database.query(`UPDATE ebbline.datasets SET report = report || '{"rows": "many"}' WHERE id = $1`, [set.id]);
    await expect(mine.dataset(set.id)).rejects.toThrow(new RegExp(`report of dataset ${set.id}[^]*rows`));
  });

  test('a failed transaction leaves nothing behind', async () => {
    const { teamId } = await workspace();
    const failing = database.transaction(async (tx) => {
      await (await workspaceStore(tx, teamId, undefined, () => now)).saveSettings('C1', { tenure: '1 month' });
      throw new Error('thrown on purpose');
    });
    await expect(failing).rejects.toThrow('thrown on purpose');
    now += 1;
    expect(await (await workspace(teamId)).settings('C1')).toEqual({});
  });
});
