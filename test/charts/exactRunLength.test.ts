import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { betaBinomialSampler } from '../../src/charts/random/betaBinomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { chartRunLength } from '../../src/charts/runLength/chartRunLength.ts';
import { estimatedRunLength } from '../../src/charts/runLength/estimatedRunLength.ts';
import { exactRunLength } from '../../src/charts/runLength/exactRunLength.ts';
import { simulatedRunLength } from '../../src/charts/runLength/simulatedRunLength.ts';
import { FLAGGED, zoneChain } from '../../src/charts/runLength/zoneChain.ts';
import { type CountDesign, countZones, normalZones, type ZoneChances } from '../../src/charts/runLength/zoneChances.ts';
import type { ZoneTest } from '../../src/charts/runLength/zoneHistory.ts';
import { PatternMachine, patternMask } from '../../src/charts/tests/patterns.ts';
import { zoneOf } from '../../src/charts/tests/zone.ts';

const someTests = fc.subarray<ZoneTest>([1, 2, 5, 6, 7, 8], { minLength: 1 });

/** Chances of nine zones, some of them perhaps zero, that sum to 1. */
const anyZones = fc
  .array(fc.oneof({ weight: 4, arbitrary: fc.integer({ min: 1, max: 100 }) }, fc.constant(0)), {
    minLength: 9,
    maxLength: 9,
  })
  .filter((weights) => weights.some((weight) => weight > 0))
  .map((weights): ZoneChances => {
    const total = weights.reduce((sum, weight) => sum + weight, 0);
    return Float64Array.from(weights, (weight) => weight / total);
  });

const plain = (size: number, center: number, rate = center): CountDesign => ({
  size,
  center,
  rate,
  sigmaZ: 1,
  correlation: 0,
});

describe('the chain of states', () => {
  test('raises its first flag where the machine of the charts does, whatever the points', () => {
    fc.assert(
      fc.property(
        someTests,
        fc.array(fc.integer({ min: -4, max: 4 }), { minLength: 1, maxLength: 60 }),
        (tests, zones) => {
          const chain = zoneChain({ tests, run: 9 });
          const machine = new PatternMachine();
          const mask = patternMask(tests);
          let state = 0;
          for (const zone of zones) {
            const flagged = (machine.push(zone, 0) & mask) !== 0;
            state = chain.next[state * 9 + zone + 4]!;
            expect(state === FLAGGED).toBe(flagged);
            if (flagged) break;
          }
        },
      ),
      { numRuns: 2_000, seed: 41 },
    );
  });

  test('keeps no two states that no future tells apart, and is the same whatever the order of the tests', () => {
    // One test that sees single points needs no memory; nine in a row need a count on each side, and the start.
    expect(zoneChain({ tests: [1], run: 9 }).states).toBe(1);
    expect(zoneChain({ tests: [2], run: 9 }).states).toBe(17);
    expect(zoneChain({ tests: [2], run: 8 }).states).toBe(15);
    expect(zoneChain({ tests: [6, 1, 5, 2, 2], run: 9 })).toBe(zoneChain({ tests: [1, 2, 5, 6], run: 9 }));
  });
});

/** The plain way: mean number of points by solving one equation a state, (I - Q) m = 1, with Gauss and pivots. */
function meanByEquations(zones: ZoneChances, tests: readonly ZoneTest[], run = 9): number {
  const { states, next } = zoneChain({ tests, run });
  const rows = Array.from({ length: states }, (_, state) => {
    const row = new Float64Array(states + 1);
    row[state] = 1;
    for (let z = 0; z < 9; z++) {
      const target = next[state * 9 + z]!;
      if (target !== FLAGGED) row[target]! -= zones[z]!;
    }
    row[states] = 1;
    return row;
  });
  for (let column = 0; column < states; column++) {
    let pivot = column;
    for (let i = column + 1; i < states; i++)
      if (Math.abs(rows[i]![column]!) > Math.abs(rows[pivot]![column]!)) pivot = i;
    [rows[column], rows[pivot]] = [rows[pivot]!, rows[column]!];
    const head = rows[column]!;
    for (let i = 0; i < states; i++) {
      const factor = i === column ? 0 : rows[i]![column]! / head[column]!;
      if (factor !== 0) for (let j = column; j <= states; j++) rows[i]![j]! -= factor * head[j]!;
    }
  }
  return rows[0]![states]! / rows[0]![0]!;
}

describe('the exact run length', () => {
  test.each<[ZoneTest[], ZoneChances]>([
    [[1, 2, 5, 6], normalZones(0)],
    [[1, 2, 5, 6], countZones(plain(85, 0.06))],
    [[1, 2, 5, 6], countZones(plain(85, 0.06, 0.03))],
    [[2, 6], countZones(plain(20, 0.02))],
    [[5, 7, 8], normalZones(0.3)],
  ])('of tests %j has the mean that one equation a state gives', (tests, zones) => {
    const { mean } = exactRunLength(zones, tests);
    expect(Math.abs(mean! / meanByEquations(zones, tests) - 1)).toBeLessThan(1e-9);
  });

  test('of one test that sees single points is geometric, figure by figure', () => {
    const zones = normalZones(1);
    const chance = zones[0]! + zones[8]!;
    const { mean, median, p10, p90, within, standardError } = exactRunLength(zones, [1]);
    expect(standardError).toBeNull();
    expect(mean).toBeCloseTo(1 / chance, 9);
    const quantile = (share: number) => Math.ceil(Math.log(1 - share) / Math.log1p(-chance));
    expect([p10, median, p90]).toEqual([quantile(0.1), quantile(0.5), quantile(0.9)]);
    for (const m of [0, 1, 7, 100, 5_000]) expect(within(m)).toBeCloseTo(1 - (1 - chance) ** m, 12);
  });

  test('holds for any zones: its figures are in order, and agree with its own chances', () => {
    fc.assert(
      fc.property(anyZones, someTests, (zones, tests) => {
        const { mean, median, p10, p90, within } = exactRunLength(zones, tests);
        if (mean === null) {
          // Nothing within the longest pattern's span means nothing ever.
          expect(within(1_000_000)).toBe(0);
          return;
        }
        expect(mean).toBeGreaterThanOrEqual(1 - 1e-12);
        expect(p10!).toBeLessThanOrEqual(median!);
        expect(median!).toBeLessThanOrEqual(p90!);
        for (const [share, m] of [
          [0.1, p10!],
          [0.5, median!],
          [0.9, p90!],
        ] as const) {
          expect(within(m)).toBeGreaterThanOrEqual(share - 1e-9);
          expect(within(m - 1)).toBeLessThan(share + 1e-9);
        }
        expect(within(0)).toBe(0);
      }),
      { numRuns: 300, seed: 42 },
    );
  });

  test('is the same when everything is turned upside down', () => {
    fc.assert(
      fc.property(anyZones, someTests, (zones, tests) => {
        const mirrored = Float64Array.from(zones).reverse();
        const here = exactRunLength(zones, tests);
        const there = exactRunLength(mirrored, tests);
        if (here.mean === null) expect(there.mean).toBeNull();
        else expect(there.mean! / here.mean).toBeCloseTo(1, 9);
      }),
      { numRuns: 200, seed: 43 },
    );
  });

  test('is never longer with one more test, nor is a flag ever less likely within m points', () => {
    fc.assert(
      fc.property(anyZones, someTests, fc.constantFrom<ZoneTest>(1, 2, 5, 6, 7, 8), (zones, tests, more) => {
        const few = exactRunLength(zones, tests);
        const many = exactRunLength(zones, [...tests, more]);
        if (few.mean !== null) expect(many.mean!).toBeLessThanOrEqual(few.mean * (1 + 1e-9));
        for (const m of [1, 5, 20, 200]) expect(many.within(m)).toBeGreaterThanOrEqual(few.within(m) - 1e-12);
      }),
      { numRuns: 200, seed: 44 },
    );
  });

  test('of a chart that cannot flag is told as such, and of one that must, to the point', () => {
    // Nobody is lost: every point lies in the same place below the centre line.
    const nobody = countZones(plain(10, 0.05, 0));
    expect(exactRunLength(nobody, [1, 5, 6])).toMatchObject({ mean: null, median: null, p10: null, p90: null });
    expect(exactRunLength(nobody, [1, 2, 5, 6])).toMatchObject({ mean: 9, median: 9, p10: 9, p90: 9 });
    // Everybody is lost: the first point is beyond the upper limit.
    expect(exactRunLength(countZones(plain(10, 0.05, 1)), [1])).toMatchObject({ mean: 1, median: 1 });
  });
});

describe('zones of counts', () => {
  test('are those of every count by the chart’s own rule, and sum to 1', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 400 }),
        fc.double({ min: 0.002, max: 0.998, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: 0.5, max: 3, noNaN: true }),
        fc.constantFrom(0, 0.01),
        (size, center, rate, sigmaZ, correlation) => {
          const zones = countZones({ size, center, rate, sigmaZ, correlation });
          expect(zones.reduce((sum, chance) => sum + chance, 0)).toBeCloseTo(1, 12);
          // Against the sampler: a count drawn at u lies in the zone whose cumulative chance u falls into.
          const sigma = Math.sqrt((center * (1 - center)) / size) * sigmaZ;
          const sampler = betaBinomialSampler(size, rate, correlation);
          const cumulative = [...zones].map((_, i) => zones.slice(0, i + 1).reduce((sum, chance) => sum + chance, 0));
          for (const u of [0.01, 0.2, 0.5, 0.77, 0.999]) {
            const index = zoneOf(sampler.quantile(u) / size, center, sigma) + 4;
            expect(cumulative[index]).toBeGreaterThanOrEqual(u - 1e-9);
            expect(index === 0 ? 0 : cumulative[index - 1]).toBeLessThanOrEqual(u + 1e-9);
          }
        },
      ),
      { numRuns: 300, seed: 45 },
    );
  });

  test('a point on the centre line belongs to no side', () => {
    // 10 accounts at one half: five lost lie on the line, with chance 252 / 1024.
    expect(countZones(plain(10, 0.5))[4]).toBeCloseTo(252 / 1024, 12);
    expect(normalZones(0)[4]).toBe(0);
  });
});

/*
 * np = 5 (100 at 5 %), np below 1, lower limits clipped at zero (all where np < 9(1 - p)), a centre line that counts can hit exactly, large n,
 * and the true rate off the centre line.
 */
const GRID: [number, number, number][] = [
  [10, 0.05, 0.05],
  [100, 0.05, 0.05],
  [100, 0.05, 0.08],
  [100, 0.05, 0.025],
  [85, 0.06, 0.06],
  [135, 0.078, 0.078],
  [135, 0.078, 0.117],
  [50, 0.1, 0.1],
  [500, 0.01, 0.01],
  [400, 0.0125, 0.02],
  [40, 0.3, 0.3],
  [40, 0.5, 0.5],
  [172, 0.05, 0.05],
  [2_000, 0.1, 0.1],
  [2_000, 0.002, 0.002],
];

describe('the chain agrees with long simulations', () => {
  const sets: ZoneTest[][] = [[1], [1, 2], [1, 2, 5, 6]];
  test.each(GRID)('within 3 standard errors at n = %d, centre line %d, rate %d', (size, center, rate) => {
    for (const tests of sets) {
      const exact = exactRunLength(countZones(plain(size, center, rate)), tests);
      const budget = { seed: 5, mostRuns: 20_000, pointBudget: 1_000_000 };
      const long = simulatedRunLength([size], { center, rate, sigmaZ: 1, correlation: 0 }, tests, budget);
      if (long === null) {
        // So seldom that a run of 20,000 points saw none.
        expect(exact.mean === null || exact.mean > 3_000).toBe(true);
        continue;
      }
      const error = Math.max(long.standardError!, 1e-9);
      expect(Math.abs(long.mean! - exact.mean!) / error, `${tests}: ${exact.mean}, ${long.mean}`).toBeLessThan(3);
      for (const m of [10, 30]) {
        const chance = exact.within(m);
        const spread = Math.sqrt((chance * (1 - chance)) / (long.mean! > 50 ? 1_000_000 / long.mean! : 20_000));
        expect(Math.abs(long.within(m) - chance)).toBeLessThan(3.5 * spread + 1e-9);
      }
    }
  });

  test.each([
    [135, 0.078, 0.02],
    [60, 0.1, 0.05],
  ])('on a p′ chart too: n = %d, rate %d, correlation %d', (size, center, correlation) => {
    const limits = { center, rate: center, sigmaZ: Math.sqrt(1 + (size - 1) * correlation), correlation };
    const exact = exactRunLength(countZones({ ...limits, size }), [1, 2, 5, 6]);
    const budget = { seed: 6, mostRuns: 20_000, pointBudget: 1_000_000 };
    const long = simulatedRunLength([size], limits, [1, 2, 5, 6], budget)!;
    expect(Math.abs(long.mean! - exact.mean!) / long.standardError!).toBeLessThan(3);
  });
});

describe('the run length of a chart', () => {
  const design = { sizes: [85, 85, 85], center: 0.06, sigmaZ: 1, correlation: 0 };

  test('is exact where no test looks at moves and all sizes are equal, else simulated with its error', () => {
    const exact = chartRunLength({ ...design, tests: [1, 2, 5, 6] }, 0.06);
    expect(exact.method).toBe('exact');
    expect(exact.length!.standardError).toBeNull();
    for (const other of [
      { ...design, tests: [1, 2, 3, 5, 6] as const },
      { ...design, sizes: [85, 86], tests: [1] as const },
    ]) {
      const simulated = chartRunLength(other, 0.06);
      expect(simulated.method).toBe('simulated');
      expect(simulated.length!.standardError).toBeGreaterThan(0);
    }
  });

  test('of sizes that hardly differ is nearly that of one size', () => {
    const one = chartRunLength({ ...design, sizes: [1_000], tests: [1, 2] }, 0.06).length!;
    const two = chartRunLength({ ...design, sizes: [1_000, 1_001], tests: [1, 2] }, 0.06).length!;
    expect(Math.abs(two.mean! - one.mean!) / two.standardError!).toBeLessThan(4);
  });
});

describe('with the usual level estimated', () => {
  const tests = [1, 2, 5, 6] as const;
  const chart = (size: number) => ({ sizes: [size], sigmaZ: 1, correlation: 0, tests });

  test.each([
    [135, 0.078, 25],
    [85, 0.06, 12],
    [40, 0.3, 12],
  ])(
    'the chance of a false flag is that of histories that each estimate it: n = %d, rate %d, %d points',
    (size, rate, points) => {
      const stated = estimatedRunLength(chart(size), rate, size * points)!;
      expect(stated.method).toBe('exact');
      const known = chartRunLength({ ...chart(size), center: rate }, rate).length!;
      const level = betaBinomialSampler(size * points, rate, 0);
      const uniform = seededUniform(77);
      const CHARTS = 600;
      let sum = 0;
      for (let i = 0; i < CHARTS; i++) {
        const center = level.draw(uniform) / (size * points);
        sum += exactRunLength(countZones(plain(size, center, rate)), tests).within(30);
      }
      expect(Math.abs(stated.within(30) - sum / CHARTS)).toBeLessThan(0.02);
      // Never as good as a level that is known.
      expect(stated.within(30)).toBeGreaterThan(known.within(30));
      expect(stated.low).toBeLessThan(stated.mean!);
      expect(stated.mean!).toBeLessThan(stated.high!);
    },
  );

  test('more points in the baseline bring it nearer to the known level', () => {
    const known = chartRunLength({ ...chart(135), center: 0.078 }, 0.078).length!.within(30);
    const excess = (points: number) => estimatedRunLength(chart(135), 0.078, 135 * points)!.within(30) - known;
    expect(excess(12)).toBeGreaterThan(excess(25));
    expect(excess(25)).toBeGreaterThan(0);
    expect(Math.abs(excess(100_000))).toBeLessThan(1e-9);
  });

  test('where trends decide too it is simulated, and tells the same story', () => {
    const withTrends = estimatedRunLength({ ...chart(135), tests: [1, 2, 3, 5, 6] }, 0.078, 135 * 25)!;
    expect(withTrends.method).toBe('simulated');
    const without = estimatedRunLength(chart(135), 0.078, 135 * 25)!;
    expect(withTrends.mean!).toBeLessThan(without.mean!);
    expect(withTrends.mean!).toBeGreaterThan(0.7 * without.mean!);
  });

  test('one account in all, or none that ever flags, gives no figure', () => {
    expect(estimatedRunLength(chart(1), 0.5, 1)).toBeNull();
    expect(estimatedRunLength({ ...chart(1), tests: [5] }, 0.5, 3)).toBeNull();
  });
});
