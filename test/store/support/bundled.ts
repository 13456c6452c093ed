import { type ChildProcess, spawn } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { rm } from 'node:fs/promises';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { build } from 'vite';
import { afterAll } from 'vitest';

const ROOT = new URL('../../..', import.meta.url).pathname;
// Inside node_modules, so that the bundle finds the packages, and git does not find the bundle.
const OUT = join(ROOT, 'node_modules', '.ebb-test', randomUUID());

const children: ChildProcess[] = [];

afterAll(async () => {
  for (const child of children) child.kill('SIGKILL');
  await rm(OUT, { recursive: true, force: true });
});

/** Makes one file that Node can run from a script in this folder; returns its path. */
export async function bundled(script: string): Promise<string> {
  await build({
    root: ROOT,
    configFile: false,
    logLevel: 'error',
    build: {
      ssr: join(ROOT, 'test/store/support', script),
      outDir: OUT,
      emptyOutDir: false,
      rollupOptions: { output: { entryFileNames: '[name].mjs' } },
    },
  });
  return join(OUT, script.replace(/\.ts$/, '.mjs'));
}

export interface Child {
  readonly pid: number;
  /** the next line it prints; rejects when it ends instead, with what it complained about */
  line(): Promise<string>;
  /** kill -9, and until the system has noticed */
  kill(): Promise<void>;
}

/** A process of its own, told what to do by its arguments. */
export function started(path: string, ...args: string[]): Child {
  const child = spawn(process.execPath, [path, ...args], { stdio: ['pipe', 'pipe', 'pipe'] });
  children.push(child);
  let complaints = '';
  child.stderr.on('data', (chunk) => {
    complaints += chunk;
  });
  const exited = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  const lines = createInterface({ input: child.stdout })[Symbol.asyncIterator]();
  return {
    pid: child.pid!,
    async line() {
      const next = await lines.next();
      if (next.done) throw new Error(`the process ended: ${complaints}`);
      return next.value;
    },
    async kill() {
      child.kill('SIGKILL');
      await exited;
    },
  };
}
