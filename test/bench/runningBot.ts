import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { heard, imageOf, startBot } from '../e2e/support.ts';
// @ts-expect-error a plain script, shared with the command line's benchmark
import { writeExportRows } from './exportRows.mjs';

const QUESTIONS = [
  'has churn moved?',
  'has churn moved at 3 months?',
  'has churn moved for Orchard?',
  'has churn moved at 6 months for the Allotment plan?',
  'has churn moved since January 2024?',
  'has churn moved at 1 month?',
  'has churn moved with subgroups of 500?',
  'has churn moved for Windowsill at 60 days?',
];

export interface AskTimes {
  readonly accounts: number;
  readonly asks: number;
  readonly p50: number;
  readonly p95: number;
  readonly worst: number;
}

/** Question: in the running bot, how long from a question in the channel to the posted verdict with its picture, on a stored set? */
export async function runningBotBench(accounts = 100_000, rounds = 5): Promise<AskTimes> {
  const folder = await mkdtemp(join(tmpdir(), 'ebbline-bench-'));
  const bot = await startBot();
  try {
    const path = join(folder, 'accounts.csv');
    writeExportRows(path, accounts);
    const post = bot.service.as('wren').drop('#retention', [{ path }], { text: 'all accounts' });
    await heard(bot, post.ts, /^(Churn|Cannot say|Too early)/);
    const times: number[] = [];
    for (let round = 0; round < rounds; round++) {
      for (const question of QUESTIONS) {
        const begun = performance.now();
        const asked = bot.service.as('tamsin').say('#retention', `@ebbline ${question}`);
        const verdict = await heard(bot, asked.ts, /(^|\n)(Churn|Cannot say|Too early)/);
        times.push(performance.now() - begun);
        if (!imageOf(verdict)) throw new Error(`no picture in the answer to "${question}"`);
      }
    }
    times.sort((a, b) => a - b);
    const at = (share: number): number => times[Math.min(times.length - 1, Math.ceil(share * times.length) - 1)]!;
    return { accounts, asks: times.length, p50: at(0.5), p95: at(0.95), worst: times.at(-1)! };
  } finally {
    await bot.stop();
    await rm(folder, { recursive: true, force: true });
  }
}
