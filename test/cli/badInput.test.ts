import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { expectedFile } from '../../fixtures/generate/hostile.ts';
import { writeLongLine } from '../../fixtures/generate/longLine.ts';
import expectedJson from '../../fixtures/hostile/expected.json' with { type: 'json' };
import { runCli } from '../../src/cli/runCli.ts';

const expected = expectedFile.parse(expectedJson);

/** The command line inside this process: a cold start for each of two dozen files would test nothing more. */
async function ask(file: string): Promise<{ code: number; stdout: string; stderr: string }> {
  let stdout = '';
  let stderr = '';
  const code = await runCli(['ask', file, '--json'], {
    stdout: (text) => {
      stdout += text;
    },
    stderr: (text) => {
      stderr += text;
    },
    leaving: false,
    clock: () => performance.now(),
    progressWanted: false,
  });
  return { code, stdout, stderr };
}

describe('ebb ask on files nobody should hand over', () => {
  for (const { file, why, expect: wanted } of expected.files) {
    it(`${file}: ${why}`, async () => {
      const { code, stdout, stderr } = await ask(`fixtures/hostile/${file}`);
      const answer = JSON.parse(stdout) as {
        error?: { code: string; message: string; hint: string };
        data?: { accounts: number; rejected: { rows: number }[] };
      };
      if (answer.error) {
        expect(code).toBe(2);
        if (!('errors' in wanted)) throw new Error(`refused with ${answer.error.code}: ${answer.error.message}`);
        expect(wanted.errors).toContain(answer.error.code);
        // One message and one way to mend it, in words; nothing of our insides.
        expect(stderr.trim().split('\n')).toHaveLength(2);
        expect(answer.error.hint.length).toBeGreaterThan(15);
        expect(stderr).not.toMatch(/duckdb|undefined|\.ts:|\.js:|SELECT/i);
      } else {
        expect(code).toBe(0);
        if ('accounts' in wanted) {
          expect(answer.data!.accounts).toBe(wanted.accounts);
          expect(answer.data!.rejected.reduce((sum, entry) => sum + entry.rows, 0)).toBe(wanted.setAside);
        } else expect(wanted.orRead).toBe(true);
      }
    });
  }
});

describe('200 MB of one line', () => {
  let folder: string;
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'ebbline-line-'));
  });
  afterAll(() => rm(folder, { recursive: true, force: true }));

  it('is refused without being held in memory', async () => {
    const path = join(folder, 'one-line.csv');
    await writeLongLine(path);
    const before = process.memoryUsage().rss;
    const { code, stdout } = await ask(path);
    expect(code).toBe(2);
    expect(['FILE_LINE_TOO_LONG', 'FILE_NOT_CSV']).toContain(JSON.parse(stdout).error.code);
    expect(process.memoryUsage().rss - before).toBeLessThan(150_000_000);
  });
});
