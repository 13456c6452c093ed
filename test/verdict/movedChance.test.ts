import { describe, expect, test } from 'vitest';
import { chanceOfScore } from '../../src/charts/standing/threshold.ts';
import { chartAndJudge } from '../../src/verdict/chartAndJudge.ts';
import { drawn, points } from './counts.ts';

/** Binomial counts of one size, at one rate up to a point and at another after it. */
function counts(length: number, accounts: number, rates: readonly [number, number], after: number, seed: number) {
  return points(accounts, [
    ...drawn(seed, after, accounts, rates[0]),
    ...drawn(seed + 1_000, length - after, accounts, rates[1]),
  ]);
}

describe('chance of a score', () => {
  test('counts the real history with the simulated ones, so that it is never 0, and equal scores count as reached', () => {
    const scores = [0, 0, 1, 2, 2, 5, 7, 8, 9];
    expect(chanceOfScore({ scores }, 10)).toBe(0.1);
    expect(chanceOfScore({ scores }, 9)).toBe(0.2);
    expect(chanceOfScore({ scores }, 2)).toBe(0.7);
    expect(chanceOfScore({ scores }, 0)).toBe(1);
  });
});

describe('chance that a chart reads as moved with nothing changed', () => {
  test('is small after a clear move, whether it came after the baseline or inside it', () => {
    const late = chartAndJudge({
      counts: counts(45, 150, [0.06, 0.14], 33, 5),
      runLength: false,
    });
    expect(late.judgement.finding).toBe('risen');
    expect(late.movedChance).toBeLessThan(0.002);
    const early = chartAndJudge({
      counts: counts(40, 150, [0.06, 0.2], 14, 5),
      runLength: false,
    });
    expect(early.judgement.finding).toBe('risen');
    expect(early.chart.baseline.last).toBeLessThan(20);
    expect(early.movedChance).toBeLessThan(0.004);
  });

  test('is below 5 % about as often as that when nothing changed', () => {
    const charts = 60;
    let small = 0;
    for (let seed = 1; seed <= charts; seed++) {
      const { movedChance } = chartAndJudge({
        counts: counts(30 + (seed % 12), 90, [0.07, 0.07], 0, seed),
        runLength: false,
      });
      expect(movedChance).toBeGreaterThan(0);
      expect(movedChance).toBeLessThanOrEqual(1);
      if (movedChance! <= 0.05) small++;
    }
    // 3 are expected at most; 9 or more would come up once in 400 such runs.
    expect(small).toBeLessThan(9);
  });

  test('is not told where nothing can be judged, and left large where the baseline is no level', () => {
    expect(chartAndJudge({ counts: counts(9, 90, [0.07, 0.07], 0, 1) }).movedChance).toBeNull();
    expect(chartAndJudge({ counts: counts(30, 90, [0, 0], 0, 1) }).movedChance).toBeNull();
    const wavy = counts(45, 200, [0.25, 0.05], 6, 2);
    const { judgement, movedChance } = chartAndJudge({ counts: wavy });
    expect(judgement.finding).toBe('unsteady-baseline');
    expect(movedChance).toBe(1);
  });

  test('without run lengths the finding is the same and only they are missing', () => {
    const same = counts(40, 100, [0.08, 0.08], 0, 4);
    const full = chartAndJudge({ counts: same });
    const lean = chartAndJudge({ counts: same, runLength: false });
    const { falseVerdictChance, wouldSee, settings, runLength, delay, estimated } = full.judgement.trust;
    for (const told of [falseVerdictChance, wouldSee, settings, runLength, delay, estimated]) expect(told).toBeTruthy();
    expect(lean.judgement.trust).toEqual({
      falseAlarmEvery: null,
      method: 'simulated',
      standardError: null,
      falseVerdictChance,
      wouldSee,
    });
    expect({ ...lean.judgement, trust: null }).toEqual({ ...full.judgement, trust: null });
  });
});
