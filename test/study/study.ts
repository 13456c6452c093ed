import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { toCsv } from '../../fixtures/generate/csv.ts';
import { type Account, simulateHistory } from '../../fixtures/generate/history.ts';
import type { ScenarioName } from '../../fixtures/generate/scenarios.ts';
import { openEngine } from '../../src/accounts/engine.ts';
import { readExport } from '../../src/accounts/readExport.ts';
import { answerQuestion } from '../../src/answers/answerQuestion.ts';
import type { Answer } from '../../src/answers/types.ts';
import type { Scope } from '../../src/requests/types.ts';
import type { Outcome } from '../../src/verdict/types.ts';

/** What one simulated export was read as, against its truth. */
export interface StudyCase {
  readonly scenario: ScenarioName;
  readonly seed: number;
  readonly outcome: Outcome;
  readonly points: number;
  readonly subgroupSize: number | null;
  /** whether the day of the true change lies between the two days printed; null unless read as moved where something moved */
  readonly startInCandidates: boolean | null;
}

export const STUDY_SCENARIOS: readonly ScenarioName[] = ['rise', 'halving', 'no-shift', 'mix', 'immature'];

/** Reading that is right; for the unchanged scenarios anything but "moved" is. */
export function isMoved(outcome: Outcome): boolean {
  return outcome === 'risen' || outcome === 'fallen';
}

/**
 * Runs fresh exports through the whole program, as a newcomer would: file in, question without any choice made, verdict out.
 * @param each  exports per scenario
 */
export async function runStudy(each: number, firstSeed: number, scenarios = STUDY_SCENARIOS): Promise<StudyCase[]> {
  const folder = await mkdtemp(join(tmpdir(), 'ebbline-study-'));
  const cases: StudyCase[] = [];
  try {
    for (const [s, scenario] of scenarios.entries()) {
      for (let i = 0; i < each; i++) cases.push(await runOne(scenario, firstSeed + s * 100_000 + i, folder));
    }
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
  return cases;
}

async function runOne(scenario: ScenarioName, seed: number, folder: string): Promise<StudyCase> {
  const accounts = simulateHistory(scenario, seed);
  const { verdict, dates, chart } = await answerOf(accounts, seed, folder);
  const changed = accounts.find((account) => account.shifted);
  let startInCandidates: boolean | null = null;
  if (changed && verdict.since) {
    // As a reader would check it: the day of the change against the two days that the reply prints.
    const [first, last] = verdict.since.candidates;
    const from = dates[first - 1]?.firstStart ?? Number.POSITIVE_INFINITY;
    const to = dates[last - 1]?.lastStart ?? Number.NEGATIVE_INFINITY;
    startInCandidates = from <= changed.start && changed.start <= to;
  }
  return {
    scenario,
    seed,
    outcome: verdict.outcome,
    points: dates.length,
    subgroupSize: chart?.subgroupSize ?? null,
    startInCandidates,
  };
}

/** Hands an export in as a file and asks about it. */
export async function answerOf(
  accounts: readonly Account[],
  seed: number,
  folder: string,
  scope: Scope = {},
): Promise<Answer> {
  const path = join(folder, `${seed}.csv`);
  await writeFile(path, toCsv(accounts, undefined, seed).bytes);
  const engine = await openEngine();
  try {
    const table = await readExport(engine, path, {});
    return await answerQuestion(
      table,
      { kind: 'ask', ...scope },
      { subject: 'study', picture: false, clock: () => 0, readMs: 0 },
    );
  } finally {
    await engine.close();
    await rm(path, { force: true });
  }
}

/** Counts per outcome, and how often the true start lay among the candidates. */
export function summarise(cases: readonly StudyCase[]) {
  return STUDY_SCENARIOS.flatMap((scenario) => {
    const own = cases.filter((entry) => entry.scenario === scenario);
    if (own.length === 0) return [];
    const outcomes: Partial<Record<Outcome, number>> = {};
    for (const { outcome } of own) outcomes[outcome] = (outcomes[outcome] ?? 0) + 1;
    const dated = own.filter((entry) => entry.startInCandidates !== null);
    return [
      {
        scenario,
        exports: own.length,
        outcomes,
        moved: own.filter((entry) => isMoved(entry.outcome)).length,
        dated: dated.length,
        startInCandidates: dated.filter((entry) => entry.startInCandidates).length,
      },
    ];
  });
}
