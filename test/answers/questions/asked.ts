import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect } from 'vitest';
import { runCli } from '../../../src/cli/runCli.ts';
import { type Day, isoDay } from '../../../src/days.ts';
import { warmPicture } from '../../../src/picture/picture.ts';

/** One account of an export made up for a test. */
export interface Row {
  readonly start: Day;
  readonly end: Day | null;
  readonly plan?: string;
  readonly amount?: string;
}

export interface Told {
  readonly code: number;
  // biome-ignore lint/suspicious/noExplicitAny: the JSON is read by its published names
  readonly json: any;
  readonly png: Buffer | null;
}

/** Asks through the command line itself, in this process: words, JSON and picture of the same question. */
export function asker() {
  let folder: string;
  let files = 0;
  beforeAll(async () => {
    // The first picture loads fonts and libraries: that time belongs to no test.
    await warmPicture();
    folder = mkdtempSync(join(tmpdir(), 'ebbline-asked-'));
  });
  afterAll(() => rmSync(folder, { recursive: true, force: true }));

  const run = async (args: readonly string[]): Promise<{ code: number; out: string }> => {
    let out = '';
    const code = await runCli(args, {
      stdout: (text) => {
        out += text;
      },
      stderr: () => undefined,
      clock: () => performance.now(),
      leaving: false,
      progressWanted: false,
    });
    return { code, out };
  };

  return {
    file(rows: readonly Row[], amountColumn = 'monthly_fee'): string {
      const path = join(folder, `export-${files++}.csv`);
      const plans = rows.some(({ plan }) => plan !== undefined);
      const amounts = rows.some(({ amount }) => amount !== undefined);
      const header = ['id', 'start_date', 'end_date', ...(plans ? ['plan'] : []), ...(amounts ? [amountColumn] : [])];
      const lines = rows.map(({ start, end, plan, amount }, i) =>
        [
          `k${i}`,
          isoDay(start),
          end === null ? '' : isoDay(end),
          ...(plans ? [plan ?? ''] : []),
          ...(amounts ? [amount ?? ''] : []),
        ].join(','),
      );
      writeFileSync(path, `${[header.join(','), ...lines].join('\n')}\n`);
      return path;
    },

    /** @param args  command first, then words and options; the file goes in after the command */
    async ask(path: string, ...args: readonly string[]): Promise<Told> {
      const [command = '', ...rest] = args;
      const picture = join(folder, `picture-${files++}.png`);
      const { code, out } = await run([command, path, ...rest, '--json', '--picture', picture]);
      return { code, json: JSON.parse(out), png: code === 0 ? readFileSync(picture) : null };
    },

    /** The same in words alone. */
    async text(path: string, ...args: readonly string[]): Promise<string> {
      const [command = '', ...rest] = args;
      return (await run([command, path, ...rest])).out;
    },
  };
}

/** Nothing that only a program would say, anywhere. */
export function expectSound(told: Told): void {
  expect(told.code).toBe(0);
  const { question, answer } = told.json;
  const words: string[] = [answer.headline, ...answer.evidence, ...answer.cautions, ...answer.next];
  for (const sentence of words) {
    expect(sentence).toMatch(/^[A-Z“0-9]/);
    expect(sentence).toMatch(/[.?!”]$/);
    expect(sentence).not.toMatch(/NaN|Infinity|undefined|null|\[object| ,| \.|\.\.| {2}/);
  }
  expect(JSON.stringify(told.json[question])).not.toMatch(/NaN|Infinity/);
  expect(told.png!.subarray(1, 4).toString()).toBe('PNG');
}
