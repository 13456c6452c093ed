import { execFile } from 'node:child_process';
import { fileURLToPath } from 'node:url';

export const root = fileURLToPath(new URL('../..', import.meta.url));
const program = fileURLToPath(new URL('../../dist/cli/ebb.js', import.meta.url));

export interface EbbRun {
  readonly code: number;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs the built command line as a user's shell would, from the top of the checkout. */
export function runEbb(...args: readonly string[]): Promise<EbbRun> {
  return new Promise((resolve, reject) => {
    execFile(process.execPath, [program, ...args], { cwd: root, maxBuffer: 64_000_000 }, (error, stdout, stderr) => {
      if (error && typeof error.code !== 'number') reject(error);
      else resolve({ code: error ? Number(error.code) : 0, stdout, stderr });
    });
  });
}
