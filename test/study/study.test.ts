import { expect, it } from 'vitest';
import { runStudy, STUDY_SCENARIOS, summarise } from './study.ts';

/*
 * The fast, seeded version of the study; `npm run study` runs 100 fresh exports per scenario. The bounds are what the whole promises
 * (at least 90 of 100 moves read right, at most 8 of 100 unchanged read as moved), at eight exports each.
 */
const EACH = 8;

it('eight fresh exports per scenario are read right: moves as moves, everything else as no move', {
  timeout: 180_000,
}, async () => {
  const rows = summarise(await runStudy(EACH, 31_000));
  const row = Object.fromEntries(rows.map((entry) => [entry.scenario, entry]));
  expect(Object.keys(row)).toEqual([...STUDY_SCENARIOS]);
  expect(row['rise']!.outcomes.risen ?? 0).toBeGreaterThanOrEqual(7);
  expect(row['halving']!.outcomes.fallen ?? 0).toBeGreaterThanOrEqual(7);
  expect(row['rise']!.outcomes.fallen ?? 0).toBe(0);
  expect(row['halving']!.outcomes.risen ?? 0).toBe(0);
  for (const scenario of ['no-shift', 'mix', 'immature']) expect(row[scenario]!.moved).toBeLessThanOrEqual(1);
  // A tail of young accounts never reads as a fall.
  expect(row['immature']!.outcomes.fallen ?? 0).toBe(0);
  const dated = row['rise']!.dated + row['halving']!.dated;
  expect(row['rise']!.startInCandidates + row['halving']!.startInCandidates).toBeGreaterThanOrEqual(dated - 3);
});
