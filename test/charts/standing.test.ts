import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { smallestDetectable } from '../../src/charts/standing/detectable.ts';
import { historyCount, type RateFrom, simulateHistories } from '../../src/charts/standing/histories.ts';
import type { BlockDesign } from '../../src/charts/standing/lastBlock.ts';
import { standingJudge } from '../../src/charts/standing/standing.ts';
import { CANDIDATE_COVERAGE, startCandidates } from '../../src/charts/standing/startCandidates.ts';
import { AIMED_FALSE_VERDICTS, standingThreshold } from '../../src/charts/standing/threshold.ts';
import { nelsonTests } from '../../src/charts/tests/nelsonTests.ts';
import type { ShiftTest } from '../../src/charts/types.ts';

/* Every figure is simulated again here with seeds of its own: a calibration must hold on histories it has not seen. */

const equal = (size: number, points: number, baselineLast: number): BlockDesign => ({
  accounts: Object.freeze(Array.from({ length: points }, () => size)),
  baselineLast,
  excluded: Object.freeze([]),
});

/** Counts that average so many a point, as evenly as whole numbers can. */
const calmLosses = (each: number, points: number): Int32Array =>
  Int32Array.from({ length: points }, (_, i) => Math.floor((i + 1) * each) - Math.floor(i * each));

/** Share of histories in which `holds`. */
function share(
  design: BlockDesign,
  rates: readonly RateFrom[],
  histories: number,
  seed: number,
  holds: (lost: Int32Array) => boolean,
): number {
  let count = 0;
  simulateHistories(design, rates, histories, seed, (lost) => {
    if (holds(lost)) count++;
  });
  return count / histories;
}

function reads(design: BlockDesign, ratio: number) {
  const judge = standingJudge(design);
  return (lost: ArrayLike<number>): 'above' | 'below' | null => {
    const { above, below } = judge(lost);
    const side = above.score >= below.score ? 'above' : 'below';
    return Math.max(above.score, below.score) > ratio ? side : null;
  };
}

const designs: [string, BlockDesign, number][] = [
  ['n = 85, 57 points, baseline of 25', equal(85, 57, 25), 0.06],
  ['n = 85, 57 points, baseline of 30', equal(85, 57, 30), 0.06],
  ['n = 120, 40 points, baseline of 25', equal(120, 40, 25), 0.06],
  ['trial limits on 20 points', equal(100, 20, 20), 0.06],
  ['trial limits on 28 points', equal(100, 28, 28), 0.06],
  [
    'unequal sizes, 57 points',
    { accounts: Array.from({ length: 57 }, (_, i) => [60, 85, 130, 95, 70][i % 5]!), baselineLast: 25, excluded: [] },
    0.06,
  ],
  ['two baseline points left out', { ...equal(85, 57, 25), excluded: [4, 11] }, 0.06],
  ['small subgroups, n = 20 at 5 %', equal(20, 57, 25), 0.05],
];

describe('the threshold of a standing flag', () => {
  const HISTORIES = 8_000;
  test.each(designs)('with nothing changed, at most 5 in 100 fresh histories read as moved: %s', (_, design, rate) => {
    const { ratio, falseVerdictChance, standardError, histories } = standingThreshold(design, rate);
    expect(falseVerdictChance).toBeLessThanOrEqual(AIMED_FALSE_VERDICTS);
    expect(histories).toBe(historyCount(design.accounts.length));
    expect(standardError).toBeLessThan(0.005);
    const read = reads(design, ratio);
    const moved = share(design, [{ from: 1, rate }], HISTORIES, 4_711, (lost) => read(lost) !== null);
    expect(moved).toBeLessThanOrEqual(0.05);
    // Nor is it so strict that it says less than it might.
    expect(moved).toBeGreaterThan(0.025);
  });

  test('the rate is only estimated, and at most 5 in 100 still read as moved with the threshold of each history’s own rate', () => {
    for (const [, design, rate] of designs.slice(0, 3)) {
      const size = design.accounts[0]!;
      const all = size * design.baselineLast;
      // One threshold for every twelfth possible baseline count: they change slowly.
      const thresholds = new Map<number, number>();
      const judge = standingJudge(design);
      let moved = 0;
      const histories = 4_000;
      simulateHistories(design, [{ from: 1, rate }], histories, 815, (lost) => {
        let inBaseline = 0;
        for (let i = 0; i < design.baselineLast; i++) inBaseline += lost[i]!;
        const near = 12 * Math.round(inBaseline / 12);
        let ratio = thresholds.get(near);
        if (ratio === undefined) {
          ratio = standingThreshold(design, near / all).ratio;
          thresholds.set(near, ratio);
        }
        const { above, below } = judge(lost);
        if (Math.max(above.score, below.score) > ratio) moved++;
      });
      expect(moved / histories).toBeLessThanOrEqual(0.05);
    }
  });

  test('a halving and a rise by 60 %, two thirds of the way, are read right in at least 9 of 10', () => {
    const rate = 0.06;
    for (const baselineLast of [25, 30]) {
      const design = equal(85, 57, baselineLast);
      const read = reads(design, standingThreshold(design, rate).ratio);
      for (const [factor, side] of [
        [0.5, 'below'],
        [1.6, 'above'],
      ] as const) {
        const pieces = [
          { from: 1, rate },
          { from: 39, rate: factor * rate },
        ];
        expect(share(design, pieces, 4_000, 99, (lost) => read(lost) === side)).toBeGreaterThanOrEqual(0.9);
        expect(share(design, pieces, 4_000, 98, (lost) => read(lost) !== null && read(lost) !== side)).toBeLessThan(
          0.005,
        );
      }
    }
  });

  test('is the same again for the same seed, and takes at most a few seconds on the longest charts', () => {
    const design = equal(85, 57, 25);
    expect(standingThreshold(design, 0.06)).toEqual(standingThreshold(design, 0.06));
    const started = performance.now();
    const { ratio } = standingThreshold(equal(100, 3_000, 30), 0.06);
    expect(performance.now() - started).toBeLessThan(5_000);
    expect(ratio).toBeGreaterThan(1);
  });

  test('rates so small that most baselines lose nobody still have a threshold', () => {
    const { ratio, falseVerdictChance } = standingThreshold(equal(5, 40, 25), 0.004);
    expect(ratio).toBeGreaterThan(0);
    expect(falseVerdictChance).toBeLessThanOrEqual(0.05);
  });
});

describe('a standing flag', () => {
  test('needs a shift test on its side inside the block: a drift without a flag scores nothing', () => {
    const lost = [...Array.from({ length: 25 }, (_, i) => (i % 2 === 0 ? 9 : 11)), 12, 9, 12, 9, 12, 12, 9, 12];
    const { above } = standingJudge(equal(100, lost.length, 25))(lost);
    expect(above.block.ratio).toBeGreaterThan(0);
    expect(above.score).toBe(0);
  });

  test('does not count flags inside a baseline that is followed by judged points', () => {
    const lost = [...Array.from({ length: 24 }, (_, i) => (i % 2 === 0 ? 9 : 11)), 60, 10, 10, 10, 10];
    const { above, below } = standingJudge(equal(100, lost.length, 25))(lost);
    expect(above.score).toBe(0);
    expect(below.score).toBe(0);
  });
});

describe('start candidates', () => {
  const moves: [string, BlockDesign, number, number][] = [
    ['a halving 19 points ago', equal(85, 57, 25), 39, 0.5],
    ['a rise by 60 % 19 points ago', equal(85, 57, 25), 39, 1.6],
    ['a rise by 60 % 7 points ago', equal(85, 57, 25), 51, 1.6],
    ['a rise by 30 % 19 points ago', equal(85, 57, 25), 39, 1.3],
    ['a halving on a short chart', equal(120, 40, 25), 28, 0.5],
    ['a rise by 60 % that began inside the baseline', equal(85, 57, 25), 20, 1.6],
    ['a fall by 60 % on trial limits', equal(100, 20, 20), 13, 0.4],
  ];
  test.each(moves)('hold the true start as often as they claim, of %s, once it is read', (_, design, from, factor) => {
    const rate = 0.06;
    const side = factor > 1 ? 'above' : 'below';
    const read = reads(design, standingThreshold(design, rate).ratio);
    let moved = 0;
    let inside = 0;
    simulateHistories(
      design,
      [
        { from: 1, rate },
        { from, rate: factor * rate },
      ],
      600,
      31,
      (lost) => {
        if (moved >= 200 || read(lost) !== side) return;
        moved++;
        const found = startCandidates(design, lost, side);
        expect(found.coverage).toBe(CANDIDATE_COVERAGE);
        if (found.candidates[0] <= from && from <= found.candidates[1]) inside++;
      },
    );
    expect(moved).toBeGreaterThan(150);
    const error = Math.sqrt((CANDIDATE_COVERAGE * (1 - CANDIDATE_COVERAGE)) / moved);
    expect(inside / moved).toBeGreaterThan(CANDIDATE_COVERAGE - 3 * error);
  });
});

test('a flag stands in a block where the tests on the whole chart say that one of them holds', () => {
  const size = fc.constantFrom(30, 85);
  const chart = fc.record({
    size,
    last: fc.integer({ min: 5, max: 30 }),
    tests: fc.subarray<ShiftTest>([1, 2, 3, 5, 6], { minLength: 1 }),
    lost: fc.array(fc.oneof(fc.integer({ min: 0, max: 12 }), fc.integer({ min: 3, max: 7 })), {
      minLength: 30,
      maxLength: 45,
    }),
  });
  fc.assert(
    fc.property(chart, ({ size: n, last, tests, lost }) => {
      const design = { ...equal(n, lost.length, last), tests };
      const used = lost.slice(0, last);
      const center = used.reduce((sum, d) => sum + d, 0) / (n * last);
      fc.pre(center > 0);
      const sigma = Math.sqrt((center * (1 - center)) / n);
      const from = last >= lost.length ? 1 : last + 1;
      const standing = standingJudge(design)(lost);
      const episodes = nelsonTests(lost.map((d) => ({ value: d / n, center, sigma })));
      for (const side of ['above', 'below'] as const) {
        const { block, score } = standing[side];
        const flagged = episodes.some(
          (one) =>
            (tests as readonly number[]).includes(one.test) &&
            one.side === side &&
            one.until >= Math.max(from, block.first),
        );
        expect(score > 0).toBe(flagged && block.ratio > 0);
      }
    }),
    { numRuns: 500, seed: 46 },
  );
});

describe('the smallest move that would have been seen', () => {
  test.each([
    ['n = 85, 57 points', equal(85, 57, 25), 26],
    ['n = 120, 40 points', equal(120, 40, 25), 26],
    ['trial limits on 28 points', equal(100, 28, 28), 19],
  ] as const)(
    'is seen in about 80 of 100 fresh continuations of the chart, and one half as large in far fewer: %s',
    (_, design, from) => {
      const rate = 0.06;
      const { ratio } = standingThreshold(design, rate);
      // A chart whose points so far have given just this level.
      const before = calmLosses(design.accounts[0]! * rate, from - 1);
      const found = smallestDetectable(design, before, rate, from, ratio, 0.8);
      expect(found.chance).toBe(0.8);
      const judge = standingJudge(design);
      for (const [moved, side] of [
        [found.rise!, 'above'],
        [found.fall!, 'below'],
      ] as const) {
        const seen = (to: number): number =>
          share(
            design,
            [
              { from: 1, rate },
              { from, rate: to },
            ],
            4_000,
            271,
            (lost) => {
              lost.set(before.slice(0, from - 1));
              return judge(lost)[side].score > ratio;
            },
          );
        expect(Math.abs(seen(moved) - 0.8)).toBeLessThan(0.04);
        expect(seen((moved + rate) / 2)).toBeLessThan(0.6);
      }
    },
  );

  test('is none where even the greatest move would not be seen', () => {
    // One judged point of two accounts cannot be far from anything.
    const design = { accounts: [...Array.from({ length: 25 }, () => 20), 2], baselineLast: 25, excluded: [] };
    expect(smallestDetectable(design, calmLosses(10, 25), 0.5, 26, 6, 0.8)).toEqual({
      rise: null,
      fall: null,
      chance: 0.8,
    });
  });
});
