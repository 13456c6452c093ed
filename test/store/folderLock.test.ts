import { mkdir, mkdtemp, readdir, readFile, rm, utimes, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { type FolderLock, holdFolder } from '../../src/store/folderLock.ts';
import { ownIdentity } from '../../src/store/processIdentity.ts';
import { bundled, started } from './support/bundled.ts';

const folders: string[] = [];
const QUICK = { beatMs: 10, silenceMs: 400 };

async function folder(): Promise<string> {
  const made = await mkdtemp(join(tmpdir(), 'ebb-lock-'));
  folders.push(made);
  return made;
}

/** Writes the lock of some other process, as that process would have. */
async function lockedBy(dataFolder: string, change: Record<string, unknown>): Promise<string> {
  await mkdir(join(dataFolder, 'lock'));
  const path = join(dataFolder, 'lock', '7');
  await writeFile(path, JSON.stringify({ token: 'other', released: false, ...(await ownIdentity()), ...change }));
  return path;
}

afterAll(() => Promise.all(folders.map((each) => rm(each, { recursive: true, force: true }))));

describe('the lock of the data folder', () => {
  let holder: string;
  beforeAll(async () => {
    holder = await bundled('holdLock.ts');
  });

  test('a folder that is held is refused, in the same process too, and free after the release', async () => {
    const where = await folder();
    const first = await holdFolder(where);
    await expect(holdFolder(where)).rejects.toMatchObject({
      code: 'STORE_LOCKED',
      message: expect.stringContaining(`${where} is open in process ${process.pid}`),
      hint: expect.stringContaining('Stop the other process'),
    });
    await first.release();
    await first.release();
    const second = await holdFolder(where);
    await second.release();
    expect((await readdir(join(where, 'lock'))).length).toBe(1);
  });

  test('another process is refused while this one holds, and a killed one does not block', async () => {
    const where = await folder();
    const child = started(holder, where);
    expect(await child.line()).toBe('held');
    await expect(holdFolder(where)).rejects.toMatchObject({ code: 'STORE_LOCKED', detail: { pid: child.pid } });
    await child.kill();
    const mine = await holdFolder(where);
    const late = started(holder, where);
    expect(await late.line()).toBe('refused STORE_LOCKED');
    await mine.release();
  });

  test('of many processes that find the lock of a dead one, exactly one gets the folder', async () => {
    const where = await folder();
    const dead = started(holder, where);
    expect(await dead.line()).toBe('held');
    await dead.kill();
    const outcomes = await Promise.all(Array.from({ length: 6 }, () => started(holder, where).line()));
    expect(outcomes.toSorted()).toEqual(['held', ...Array<string>(5).fill('refused STORE_LOCKED')]);
  });

  test('of many attempts at once in an unused folder, exactly one gets it, over and over', async () => {
    const where = await folder();
    for (let round = 0; round < 10; round++) {
      const outcomes = await Promise.allSettled(Array.from({ length: 12 }, () => holdFolder(where)));
      const held = outcomes.filter((outcome) => outcome.status === 'fulfilled');
      expect(held.length).toBe(1);
      await held[0]!.value.release();
    }
  });

  test('one that looked long ago and acts late steps back, although the number it wants has become free again', async () => {
    const where = await folder();
    await lockedBy(where, { startTicks: '1' });
    let looks = 0;
    let holder: FolderLock | undefined;
    const slow = holdFolder(where, {
      ...QUICK,
      looked: async () => {
        looks += 1;
        if (looks > 1) return;
        await (await holdFolder(where)).release();
        holder = await holdFolder(where);
        await expect.poll(() => readdir(join(where, 'lock'))).toEqual(['9']);
      },
    });
    await expect(slow).rejects.toMatchObject({ code: 'STORE_LOCKED' });
    expect(await readdir(join(where, 'lock'))).toEqual(['9']);
    await holder?.release();
  });

  test('a process number that went to a later process does not block', async () => {
    const where = await folder();
    await lockedBy(where, { startTicks: '1' });
    await (await holdFolder(where)).release();
  });

  test('the control: the same record with the true start time does block', async () => {
    const where = await folder();
    await lockedBy(where, {});
    await expect(holdFolder(where)).rejects.toMatchObject({ code: 'STORE_LOCKED' });
  });

  test('a lock from another container or machine blocks while it is touched', async () => {
    const where = await folder();
    const path = await lockedBy(where, { realm: 'elsewhere boot pid:[1]', pid: 1 });
    let beats = 0;
    const beating = setInterval(() => void utimes(path, ++beats, beats).catch(() => undefined), QUICK.beatMs);
    await expect(holdFolder(where, QUICK)).rejects.toMatchObject({
      code: 'STORE_LOCKED',
      message: expect.stringContaining('process 1 on elsewhere'),
    });
    clearInterval(beating);
  });

  test('a lock from another container or machine that nobody touches any more does not block', async () => {
    const where = await folder();
    await lockedBy(where, { realm: 'elsewhere boot pid:[1]', pid: 1 });
    await (await holdFolder(where, QUICK)).release();
  });

  test('a holder touches its file', async () => {
    const where = await folder();
    const held = await holdFolder(where, QUICK);
    const path = join(where, 'lock', '1');
    // As if from elsewhere, so that only the touching speaks for it.
    const record = JSON.parse(await readFile(path, 'utf8'));
    await writeFile(path, JSON.stringify({ ...record, realm: 'elsewhere' }));
    await expect(holdFolder(where, QUICK)).rejects.toMatchObject({ code: 'STORE_LOCKED' });
    await held.release();
  });

  test('a lock file that cannot be read counts as held until it has been silent', async () => {
    const where = await folder();
    await mkdir(join(where, 'lock'));
    await writeFile(join(where, 'lock', '3'), 'not a record');
    await (await holdFolder(where, QUICK)).release();
  });

  test('a folder that cannot be made is told apart from one that is held', async () => {
    const where = await folder();
    await writeFile(join(where, 'file'), '');
    await expect(holdFolder(join(where, 'file'))).rejects.toMatchObject({ code: 'SETTINGS_INVALID' });
  });
});
