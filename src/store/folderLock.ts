import { randomUUID } from 'node:crypto';
import { link, mkdir, readdir, readFile, rename, rm, stat, utimes, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { z } from 'zod';
import { EbbError } from '../errors.ts';
import { aliveness, ownIdentity, type ProcessIdentity } from './processIdentity.ts';

/*
 * The embedded engine corrupts its files when two processes write them, so a folder is held by one process.
 *
 * The lock is a row of numbered files; whoever wrote the highest number holds the folder, unless that file says "released" or its process
 * is dead. To take over, one creates the next number, which the file system gives to one process only, then checks that it is still the
 * highest. The highest file is never removed, only the lower ones by the holder, so the number never goes back: a process that looked
 * long ago and acts late finds a higher number and steps back. Deleting a stale lock file and making a new one would not have this property:
 * the slow process would delete the new one.
 */

export interface FolderLock {
  release(): Promise<void>;
}

export interface FolderLockTiming {
  /** how often the holder touches its file */
  readonly beatMs: number;
  /** how long a file from another container or machine must stay untouched before its holder counts as dead */
  readonly silenceMs: number;
  /** called between looking and taking: a test is slow there on purpose */
  readonly looked?: () => Promise<void>;
}

const TIMING: FolderLockTiming = { beatMs: 1_000, silenceMs: 10_000 };

const recordSchema = z.object({
  token: z.string(),
  released: z.boolean(),
  pid: z.number(),
  startTicks: z.string().nullable(),
  realm: z.string(),
});
type LockRecord = z.infer<typeof recordSchema>;

/**
 * Takes the folder for this process. A process that died, also by kill -9, does not block; its number being reused does not confuse.
 * @throws EbbError STORE_LOCKED, naming the process that holds it; SETTINGS_INVALID when the folder cannot be written
 */
export async function holdFolder(dataFolder: string, timing: FolderLockTiming = TIMING): Promise<FolderLock> {
  const folder = join(dataFolder, 'lock');
  try {
    await mkdir(folder, { recursive: true });
  } catch (error) {
    throw unwritable(dataFolder, error);
  }
  const own = await ownIdentity();
  const record: LockRecord = { token: randomUUID(), released: false, ...own };
  for (;;) {
    const highest = await highestNumber(folder);
    if (highest > 0) await refuseIfHeld(dataFolder, join(folder, String(highest)), own, timing);
    await timing.looked?.();
    const mine = join(folder, String(highest + 1));
    if (!(await create(dataFolder, folder, mine, record))) continue;
    if ((await highestNumber(folder)) === highest + 1) return held(folder, highest + 1, record, timing);
    await rm(mine, { force: true });
  }
}

function held(folder: string, number: number, record: LockRecord, timing: FolderLockTiming): FolderLock {
  const mine = join(folder, String(number));
  // For those who cannot see our process number: they look whether the file's time changes, not what it says. Missing a beat does no harm.
  let beats = 0;
  const beat = setInterval(() => {
    beats += 1;
    utimes(mine, beats, beats).catch(() => undefined);
  }, timing.beatMs);
  beat.unref();
  const tidied = removeLower(folder, number);
  let releasing: Promise<void> | undefined;
  return {
    release() {
      releasing ??= (async () => {
        clearInterval(beat);
        await tidied;
        const draft = join(folder, `${record.token}.draft`);
        await writeFile(draft, JSON.stringify({ ...record, released: true } satisfies LockRecord));
        await rename(draft, mine);
      })();
      return releasing;
    },
  };
}

async function highestNumber(folder: string): Promise<number> {
  const names = await readdir(folder);
  return names.reduce((highest, name) => (/^\d+$/.test(name) ? Math.max(highest, Number(name)) : highest), 0);
}

/** Creates the file whole or not at all: a link to a finished draft fails when the name is taken, and never shows half a record. */
async function create(dataFolder: string, folder: string, path: string, record: LockRecord): Promise<boolean> {
  const draft = join(folder, `${record.token}.draft`);
  try {
    await writeFile(draft, JSON.stringify(record));
    await link(draft, path);
    return true;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'EEXIST') return false;
    throw unwritable(dataFolder, error);
  } finally {
    await rm(draft, { force: true });
  }
}

async function refuseIfHeld(dataFolder: string, path: string, own: ProcessIdentity, timing: FolderLockTiming) {
  const text = await readFile(path, 'utf8').catch((error: NodeJS.ErrnoException) => {
    // The holder released, another took over and tidied up meanwhile: look again.
    if (error.code === 'ENOENT') return undefined;
    throw unwritable(dataFolder, error);
  });
  if (text === undefined) return;
  const record = readRecord(text);
  if (record?.released) return;
  const state = record === undefined ? 'unknown' : await aliveness(record, own);
  if (state === 'dead') return;
  if (state === 'unknown' && (await silent(path, timing.silenceMs))) return;
  const holder = record === undefined ? 'another process' : `process ${record.pid} on ${record.realm.split(' ')[0]}`;
  throw new EbbError(
    'STORE_LOCKED',
    `the data folder ${dataFolder} is open in ${holder}; two processes on one folder would destroy it`,
    'Stop the other process first, or give this one a data folder of its own. Several processes can share one Postgres server instead (DATABASE_URL).',
    { kind: 'settings', detail: { dataFolder, pid: record?.pid ?? null } },
  );
}

function readRecord(text: string): LockRecord | undefined {
  try {
    return recordSchema.safeParse(JSON.parse(text)).data;
  } catch {
    return undefined;
  }
}

/** Whether nobody touches the file for that long; compares the file with itself, so clocks that differ between machines do not matter. */
async function silent(path: string, silenceMs: number): Promise<boolean> {
  const touched = () =>
    stat(path)
      .then((found) => found.mtimeMs)
      .catch(() => undefined);
  const before = await touched();
  const steps = 20;
  for (let step = 0; step < steps; step++) {
    await pause(silenceMs / steps);
    if ((await touched()) !== before) return false;
  }
  return true;
}

async function removeLower(folder: string, number: number): Promise<void> {
  for (const name of await readdir(folder)) {
    if (/^\d+$/.test(name) && Number(name) < number) await rm(join(folder, name), { force: true });
  }
}

function unwritable(dataFolder: string, cause: unknown): EbbError {
  return new EbbError(
    'SETTINGS_INVALID',
    `the data folder ${dataFolder} cannot be written: ${cause instanceof Error ? cause.message : String(cause)}`,
    'Choose a folder that this user may write to.',
    { kind: 'settings', cause },
  );
}
