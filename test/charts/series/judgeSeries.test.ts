import { describe, expect, test } from 'vitest';
import { seededUniform } from '../../../src/charts/random/uniform.ts';
import { detectableMoves } from '../../../src/charts/series/detectable.ts';
import { wholeDayGaps } from '../../../src/charts/series/exponential.ts';
import type { SeriesFamily, SeriesLevel } from '../../../src/charts/series/family.ts';
import { geometricGaps } from '../../../src/charts/series/geometric.ts';
import { type SeriesHistory, type Stretch, simulateSeries } from '../../../src/charts/series/histories.ts';
import { judgeSeries } from '../../../src/charts/series/judgeSeries.ts';
import { normalIndividuals } from '../../../src/charts/series/normal.ts';
import { seriesRunLength } from '../../../src/charts/series/runLength.ts';
import { type SeriesDesign, seriesJudge } from '../../../src/charts/series/standing.ts';
import { seriesStart } from '../../../src/charts/series/startCandidates.ts';
import { seriesThreshold } from '../../../src/charts/series/threshold.ts';
import { CANDIDATE_COVERAGE } from '../../../src/charts/standing/startCandidates.ts';
import { AIMED_FALSE_VERDICTS } from '../../../src/charts/standing/threshold.ts';

/* Every figure is simulated again here with seeds of its own: a calibration must hold on histories it has not seen. */

const revenue = normalIndividuals('more-churn');
const families: [SeriesFamily, SeriesLevel][] = [
  [geometricGaps, { mean: 99, sigma: 99.5 }],
  [wholeDayGaps, { mean: 9, sigma: 9 }],
  [revenue, { mean: 0.08, sigma: 0.02 }],
];
const shapes = [
  [20, 20],
  [30, 30],
  [45, 25],
  [80, 30],
] as const;
const cases = families.flatMap(([family, level]) =>
  shapes.map(
    ([count, last]) =>
      [`${family.name}, ${count} points, usual level from ${last}`, family, level, count, last] as const,
  ),
);

/** A history as long as the level makes of so many values. */
function likely(level: SeriesLevel, count: number): SeriesHistory {
  return { values: Array.from({ length: count }, () => level.mean), count, open: 0 };
}

function designOf(family: SeriesFamily, count: number, last: number): SeriesDesign {
  return { family, baselineLast: last >= count ? Number.POSITIVE_INFINITY : last, excluded: [] };
}

/** Reads of histories that go on after `last` values for as long as the level makes of the rest. */
function reads(
  design: SeriesDesign,
  ratio: number,
  stretches: readonly Stretch[],
  histories: number,
  seed: number,
  most: number,
) {
  const judge = seriesJudge(design, most);
  const found = { above: 0, below: 0 };
  simulateSeries(design.family, stretches, most, histories, seed, (history) => {
    const { above, below } = judge(history);
    const side = above.score >= below.score ? 'above' : 'below';
    if (Math.max(above.score, below.score) > ratio) found[side]++;
  });
  return { above: found.above / histories, below: found.below / histories };
}

describe('the threshold of a series', () => {
  test.each(cases)(
    'with nothing changed, at most 5 in 100 fresh histories read as moved: %s',
    (_, family, level, count, last) => {
      const design = designOf(family, count, last);
      const { ratio, falseVerdictChance } = seriesThreshold(design, likely(level, count), level);
      expect(falseVerdictChance).toBeLessThanOrEqual(AIMED_FALSE_VERDICTS);
      const one = family.exposure(level.mean);
      const stretches =
        last >= count
          ? [{ level, exposure: count * one }]
          : [
              { level, count: last },
              { level, exposure: (count - last) * one },
            ];
      const { above, below } = reads(design, ratio, stretches, 8_000, 4_711, 3 * count + 50);
      expect(above + below).toBeLessThanOrEqual(0.05);
      // Nor is it so strict that it says nothing, where flags can be raised at all.
      if (last < count) expect(above + below).toBeGreaterThan(0.025);
    },
  );

  test('holds for accounts that leave one by one at one rate, however many gaps that makes', () => {
    // The rate is only estimated, and how many losses there are is chance too: as it is for real exports.
    const uniform = seededUniform(606);
    let moved = 0;
    const histories = 250;
    for (let history = 0; history < histories; history++) {
      const gaps: number[] = [];
      let kept = 0;
      for (let account = 0; account < 5_000; account++) {
        if (uniform() < 0.01) {
          gaps.push(kept);
          kept = 0;
        } else kept++;
      }
      const found = judgeSeries({ family: geometricGaps, values: gaps, open: kept, least: 12 });
      if (found.kind === 'judged' && (found.finding === 'above' || found.finding === 'below')) moved++;
    }
    // 5 in 100, and two standard errors of this many histories.
    expect(moved / histories).toBeLessThanOrEqual(0.05 + 2 * Math.sqrt((0.05 * 0.95) / histories));
  }, 120_000);
});

describe('a move', () => {
  const level = { mean: 99, sigma: 99.5 };
  const one = 100;
  const design = designOf(geometricGaps, 60, 25);
  const ratio = seriesThreshold(design, likely(level, 60), level).ratio;

  test.each([
    ['three times the losses', 1 / 3, 'below'],
    ['a quarter of the losses', 4, 'above'],
  ] as const)('of %s is read right, and hardly ever as the other', (_, factor, side) => {
    const after = { mean: level.mean * factor, sigma: level.sigma * factor };
    const stretches = [
      { level, count: 36 },
      { level: after, exposure: 24 * one },
    ];
    const found = reads(design, ratio, stretches, 2_000, 99, 400);
    // Of rarer losses there are few gaps by now, so they are harder to see.
    expect(found[side]).toBeGreaterThan(0.8);
    expect(found[side === 'above' ? 'below' : 'above']).toBeLessThan(0.01);
  });

  test.each([
    ['more losses', 0.33, 'below'],
    ['fewer losses', 3, 'above'],
  ] as const)('has its true start between the candidates as often as they claim: %s', (_, factor, side) => {
    const after = { mean: level.mean * factor, sigma: level.sigma * factor };
    const judge = seriesJudge(design, 400);
    let moved = 0;
    let inside = 0;
    const stretches = [
      { level, count: 36 },
      { level: after, exposure: 24 * one },
    ];
    simulateSeries(geometricGaps, stretches, 400, 260, 31, ({ values, count, open }) => {
      const history = { values: Array.from(values).slice(0, count), count, open };
      if (judge(history)[side].score <= ratio) return;
      moved++;
      const found = seriesStart(design, history, level, side);
      if (found.candidates[0] <= 37 && 37 <= found.candidates[1]) inside++;
    });
    expect(moved).toBeGreaterThan(100);
    const error = Math.sqrt((CANDIDATE_COVERAGE * (1 - CANDIDATE_COVERAGE)) / moved);
    expect(inside / moved).toBeGreaterThan(CANDIDATE_COVERAGE - 3 * error);
  });

  test.each(families)(
    'of the smallest size that would have been seen is seen in about 80 of 100 fresh histories: %o',
    (family, at) => {
      const here = designOf(family, 60, 25);
      const history = likely(at, 60);
      const threshold = seriesThreshold(here, history, at).ratio;
      const found = detectableMoves(here, history, at, 26, threshold, 0.8);
      for (const side of ['above', 'below'] as const) {
        const after = found[side]!;
        expect(after).not.toBeNull();
        const seen = reads(
          here,
          threshold,
          [
            { level: at, count: 25 },
            { level: after, exposure: 35 * family.exposure(at.mean) },
          ],
          2_000,
          271,
          400,
        )[side];
        expect(Math.abs(seen - 0.8)).toBeLessThan(0.07);
      }
    },
  );
});

describe('judging a series', () => {
  const steady = (mean: number, count: number, seed: number): number[] => {
    const draw = geometricGaps.sampler({ mean, sigma: mean });
    const uniform = seededUniform(seed);
    return Array.from({ length: count }, () => draw(uniform));
  };

  test('a long time without a loss is read before the next loss comes', () => {
    const values = steady(50, 40, 8);
    const quiet = judgeSeries({ family: geometricGaps, values, open: 20, least: 12 });
    const silent = judgeSeries({ family: geometricGaps, values, open: 1_500, least: 12 });
    expect(quiet).toMatchObject({ kind: 'judged', finding: 'steady' });
    expect(silent).toMatchObject({ kind: 'judged', finding: 'above' });
  });

  test('is the same again for the same values', () => {
    const request = { family: geometricGaps, values: Object.freeze(steady(50, 40, 8)), open: 20, least: 12 };
    expect(judgeSeries(request)).toEqual(judgeSeries(request));
  });

  test('too few values, values without a level, and levels that are two are told as such', () => {
    expect(judgeSeries({ family: geometricGaps, values: [4, 9, 2], least: 12 }).kind).toBe('too-few');
    expect(judgeSeries({ family: geometricGaps, values: [], open: 40, least: 12 }).kind).toBe('no-level');
    expect(judgeSeries({ family: geometricGaps, values: new Array(30).fill(0), least: 12 }).kind).toBe('no-level');
    expect(judgeSeries({ family: revenue, values: new Array(30).fill(0.1), least: 12 }).kind).toBe('no-level');
    const twoLevels = [...steady(200, 14, 3), ...steady(10, 11, 4), ...steady(200, 30, 5)];
    expect(judgeSeries({ family: geometricGaps, values: twoLevels, least: 12 })).toMatchObject({
      finding: 'unsteady-baseline',
    });
  });

  test('a move inside the first values shortens the usual level to those before it', () => {
    const values = [...steady(200, 16, 3), ...steady(12, 40, 4)];
    const found = judgeSeries({ family: geometricGaps, values, least: 12 });
    expect(found).toMatchObject({ kind: 'judged', finding: 'below' });
    if (found.kind === 'judged') expect(found.frame.baselineLast).toBeLessThan(20);
  });

  test('gaps that scatter much more than chance would have them ask for more evidence', () => {
    const clustered = Array.from({ length: 40 }, (_, i) => (i % 5 === 0 ? 400 + 13 * i : 3 + (i % 4)));
    const found = judgeSeries({ family: geometricGaps, values: clustered, least: 12 });
    expect(found.kind === 'judged' && found.checks!.spread).toBeGreaterThan(1.5);
    expect(found.kind === 'judged' && found.checks!.spreadPValue).toBeLessThan(0.01);
  });
});

describe('run lengths of a series', () => {
  test('of normal values are those of a normal chart under tests 1, 2, 5 and 6: 109.05 points, recomputed by an exact chain', () => {
    const { mean, standardError } = seriesRunLength(revenue, { mean: 0, sigma: 1 }, undefined, [1, 2, 5, 6])!;
    expect(Math.abs(mean - 109.0493)).toBeLessThan(3.5 * standardError);
  });

  test('of one test are one over its chance: a g chart that flags gaps beyond its upper limit alone', () => {
    const level = { mean: 99, sigma: 99.5 };
    const upper = geometricGaps.edges(level).above[2];
    const chance = 0.99 ** (upper + 1);
    const { mean, standardError } = seriesRunLength(geometricGaps, level, undefined, [1])!;
    expect(Math.abs(mean - 1 / chance)).toBeLessThan(3.5 * standardError);
  });
});
