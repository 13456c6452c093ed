import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { openEngine } from '../../src/accounts/engine.ts';
import { readExport } from '../../src/accounts/readExport.ts';
import type { AccountTable } from '../../src/accounts/types.ts';
import { answerQuestion } from '../../src/answers/answerQuestion.ts';
import { answerSide } from '../../src/answers/questions/answerSide.ts';
import type { Question, SideQuestion } from '../../src/requests/types.ts';
// @ts-expect-error a plain script, shared with the command line's benchmark
import { writeExportRows } from './exportRows.mjs';

const THREE_MONTHS = { count: 3, unit: 'month' } as const;

/** Charts of gaps are for rare losses: they get an export with about 300 of them, whatever its size. */
const RARE = ['chart g', 'chart t'] as const;
const RARE_LOSSES = 300;

/** Every kind of chart, every view and every question, each at a fixed age so that the sizes are compared on the same work. */
const ASKED: readonly (readonly [string, Question | SideQuestion])[] = [
  ['chart p', { kind: 'ask', chart: 'p', tenure: THREE_MONTHS }],
  ['chart p-prime', { kind: 'ask', chart: 'p-prime', tenure: THREE_MONTHS }],
  [RARE[0], { kind: 'ask', chart: 'g', tenure: THREE_MONTHS }],
  [RARE[1], { kind: 'ask', chart: 't', tenure: THREE_MONTHS }],
  ['chart individuals', { kind: 'ask', chart: 'individuals', tenure: THREE_MONTHS }],
  ['chart ewma', { kind: 'ask', chart: 'ewma', tenure: THREE_MONTHS }],
  ['chart cusum', { kind: 'ask', chart: 'cusum', tenure: THREE_MONTHS }],
  ['view renewal', { kind: 'ask', view: 'renewal', tenure: THREE_MONTHS }],
  ['view calendar', { kind: 'ask', view: 'calendar', tenure: THREE_MONTHS }],
  ['where', { kind: 'where', tenure: THREE_MONTHS }],
  ['plan', { kind: 'plan' }],
  ['early', { kind: 'early', tenure: THREE_MONTHS }],
  ['revenue', { kind: 'revenue', tenure: THREE_MONTHS }],
  ['reconcile', { kind: 'reconcile', rate: 0.062, decimals: 1, tenure: THREE_MONTHS }],
  ['worth', { kind: 'worth', tenure: THREE_MONTHS }],
  ['target', { kind: 'target', rate: 0.05, tenure: THREE_MONTHS }],
  ['spread', { kind: 'spread', tenure: THREE_MONTHS }],
  ['explain', { kind: 'explain', tenure: THREE_MONTHS }],
];

export interface QuestionTimes {
  readonly name: string;
  /** milliseconds of the answer with its picture, reading not counted, one entry for each size */
  readonly ms: readonly number[];
}

/** Question: how long does each kind of chart and each question take on accounts already read, and how does that grow with their number? */
export async function everyQuestionBench(sizes: readonly number[], rounds = 3): Promise<QuestionTimes[]> {
  const folder = await mkdtemp(join(tmpdir(), 'ebbline-bench-'));
  const times = ASKED.map(([name]) => ({ name, ms: [] as number[] }));
  try {
    for (const rows of sizes) {
      const usual = join(folder, `accounts-${rows}.csv`);
      writeExportRows(usual, rows);
      const rare = join(folder, `rare-${rows}.csv`);
      writeExportRows(rare, rows, 7, (91 * rows) / RARE_LOSSES);
      const engine = await openEngine();
      try {
        const tables = { usual: await readExport(engine, usual, {}), rare: await readExport(engine, rare, {}) };
        for (const [i, [name, request]] of ASKED.entries()) {
          const table = RARE.some((one) => one === name) ? tables.rare : tables.usual;
          const each: number[] = [];
          // Once beforehand: what is loaded on first use is not what grows.
          for (let round = -1; round < rounds; round++) {
            const begun = performance.now();
            await answered(table, request);
            if (round >= 0) each.push(performance.now() - begun);
          }
          times[i]!.ms.push(each.sort((a, b) => a - b)[Math.floor(each.length / 2)]!);
        }
      } finally {
        await engine.close();
      }
    }
    return times;
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

async function answered(table: AccountTable, request: Question | SideQuestion): Promise<void> {
  const options = { subject: 'accounts.csv', picture: true, clock: () => performance.now(), readMs: 0 };
  const picture =
    request.kind === 'ask'
      ? (await answerQuestion(table, request, options)).picture
      : (await answerSide(table, request, options)).reply.picture;
  if (!picture) throw new Error(`no picture in the answer to "${request.kind}"`);
}
