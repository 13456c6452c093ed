import { readFile, readlink } from 'node:fs/promises';
import { hostname } from 'node:os';

/** What tells one process from every other, also from a later one that got the same number. */
export interface ProcessIdentity {
  readonly pid: number;
  /** clock ticks from boot to the start of the process; null where the system does not say (no /proc) */
  readonly startTicks: string | null;
  /** where the number means something: machine, boot and process-number namespace (each container has its own) */
  readonly realm: string;
}

/** The identity of the running process. */
export async function ownIdentity(): Promise<ProcessIdentity> {
  const [boot, namespace, stat] = await Promise.all([
    readFile('/proc/sys/kernel/random/boot_id', 'utf8').catch(() => ''),
    readlink('/proc/self/ns/pid').catch(() => ''),
    processStat(process.pid),
  ]);
  return {
    pid: process.pid,
    startTicks: stat?.startTicks ?? null,
    realm: [hostname(), boot.trim(), namespace].join(' '),
  };
}

/**
 * Whether that process still runs.
 * @returns 'unknown' when it lives in another realm (another container or machine, or before a reboot), where its number says nothing here
 */
export async function aliveness(other: ProcessIdentity, own: ProcessIdentity): Promise<'alive' | 'dead' | 'unknown'> {
  if (other.realm !== own.realm) return 'unknown';
  try {
    process.kill(other.pid, 0);
  } catch (error) {
    // EPERM: it runs, under another user.
    if ((error as NodeJS.ErrnoException).code === 'ESRCH') return 'dead';
  }
  const stat = await processStat(other.pid);
  if (stat === undefined || other.startTicks === null) return 'alive';
  // Killed but not yet collected by its parent (zombie), or the number went to a later process.
  return stat.state === 'Z' || stat.state === 'X' || stat.startTicks !== other.startTicks ? 'dead' : 'alive';
}

/** State and start time from /proc/PID/stat (proc_pid_stat(5): fields 3 and 22); undefined when there is none. */
async function processStat(pid: number): Promise<{ state: string; startTicks: string } | undefined> {
  const text = await readFile(`/proc/${pid}/stat`, 'utf8').catch(() => undefined);
  if (text === undefined) return undefined;
  // Field 2 is the program name in brackets and may hold anything, brackets and spaces included: count from the last one.
  const fields = text.slice(text.lastIndexOf(')') + 2).split(' ');
  const [state, startTicks] = [fields[0], fields[19]];
  return state === undefined || startTicks === undefined ? undefined : { state, startTicks };
}
