import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { betaBinomialSampler } from '../../../src/charts/random/betaBinomialSampler.ts';
import { seededUniform } from '../../../src/charts/random/uniform.ts';
import { bernoulliCusum } from '../../../src/charts/sums/bernoulliCusum.ts';
import { scatter } from '../../../src/charts/sums/scatter.ts';
import { detectableBySums, type SumHistory, sumThreshold } from '../../../src/charts/sums/standingSums.ts';
import { buildWatch, raised } from '../../../src/charts/sums/watchDesign.ts';

const MOVES = { rise: 1.5, fall: 0.5 };

/**
 * The whole way, without its short cuts: losses of the level and of every watched account, a watch designed anew on the estimated level,
 * its sums run forwards over all accounts. Returns the share of histories whose sum stands beyond the threshold.
 */
function readAsMoved(history: SumHistory, rate: number, moved: number, every: number, ratio: number, runs: number) {
  const uniform = seededUniform(77);
  const { baselineAccounts, watched, clusters } = history;
  let read = { rise: 0, fall: 0 };
  const watches = new Map<number, ReturnType<typeof buildWatch>>();
  for (let run = 0; run < runs; run++) {
    const size = clusters?.size ?? 1;
    const counts = (p: number, accounts: number): number[] => {
      const sampler = betaBinomialSampler(size, p, clusters?.correlation ?? 0);
      return Array.from({ length: Math.ceil(accounts / size) }, () => sampler.draw(uniform));
    };
    const lost = counts(rate, baselineAccounts).reduce((sum, n) => sum + n, 0);
    // Levels are rounded a little, so that not every history needs a design of its own.
    const level = Number((lost / baselineAccounts).toPrecision(2));
    const watch = watches.get(level) ?? buildWatch(level, MOVES, every);
    watches.set(level, watch);
    const losses = counts(moved, watched)
      .flatMap((n, group) => [...scatter(n, size, uniform)].map((at) => group * size + at))
      .filter((at) => at <= watched);
    const rise = bernoulliCusum(watch.rise, losses, watched).value / watch.rise.limit;
    const fall = bernoulliCusum(watch.fall, losses, watched).value / watch.fall.limit;
    read = { rise: read.rise + (rise > ratio ? 1 : 0), fall: read.fall + (fall > ratio ? 1 : 0) };
  }
  return { rise: read.rise / runs, fall: read.fall / runs };
}

const designs: [string, SumHistory, number, number][] = [
  ['a usual chart', { baselineAccounts: 2_125, watched: 1_500 }, 0.06, 4_000],
  ['a short level', { baselineAccounts: 700, watched: 2_000 }, 0.06, 3_000],
  ['a high rate', { baselineAccounts: 400, watched: 600 }, 0.3, 1_500],
  [
    'points that vary more',
    { baselineAccounts: 2_125, watched: 1_500, clusters: { size: 85, correlation: 0.01 } },
    0.06,
    4_000,
  ],
];

describe('how high a sum must stand to be believed', () => {
  test.each(designs)(
    'on %s, read forwards with a design of its own, nothing changed reads as moved in at most 5 of 100',
    (_, history, rate, every) => {
      const watch = buildWatch(rate, MOVES, every);
      const { ratio, falseVerdictChance } = sumThreshold(watch, history, rate);
      expect(ratio).toBeGreaterThanOrEqual(1);
      expect(falseVerdictChance).toBeLessThanOrEqual(0.04);
      const runs = 1_500;
      const read = readAsMoved(history, rate, rate, every, ratio, runs);
      // Both are simulated: three standard errors of the difference above the promise.
      expect(read.rise + read.fall).toBeLessThan(0.05 + 3 * Math.sqrt((0.05 * 0.95) / runs));
      // At the threshold's own chance, within sampling error, unless the limit itself decides.
      if (ratio > 1)
        expect(Math.abs(read.rise + read.fall - 0.04)).toBeLessThan(
          3.5 * Math.sqrt(0.04 * 0.96 * (1 / runs + 1 / 2_000)),
        );
    },
  );

  test.each(designs)(
    'on %s, the smallest moves that would be seen are seen in about 80 of 100',
    (_, history, rate, every) => {
      const watch = buildWatch(rate, MOVES, every);
      const { ratio } = sumThreshold(watch, history, rate);
      const { rise, fall } = detectableBySums(watch, history, rate, ratio, 0.8);
      expect(rise!).toBeGreaterThan(rate);
      expect(fall!).toBeLessThan(rate);
      const runs = 500;
      expect(Math.abs(readAsMoved(history, rate, rise!, every, ratio, runs).rise - 0.8)).toBeLessThan(0.12);
      expect(Math.abs(readAsMoved(history, rate, fall!, every, ratio, runs).fall - 0.8)).toBeLessThan(0.12);
    },
  );

  test('is the same figure every time', () => {
    const [, history, rate, every] = designs[0]!;
    const watch = buildWatch(rate, MOVES, every);
    expect(sumThreshold(watch, history, rate)).toEqual(sumThreshold(watch, history, rate));
  });

  test('with no account watched nothing could have been seen', () => {
    const watch = buildWatch(0.06, MOVES, 4_000);
    const history = { baselineAccounts: 2_125, watched: 0 };
    expect(sumThreshold(watch, history, 0.06)).toMatchObject({ ratio: 1, falseVerdictChance: 0 });
    expect(detectableBySums(watch, history, 0.06, 1, 0.8)).toEqual({ rise: null, fall: null, chance: 0.8 });
  });
});

describe('the parts of it', () => {
  test('a rise never passes 1, and is the factor where it can be', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.001, max: 0.999, noNaN: true }),
        fc.double({ min: 1.1, max: 20, noNaN: true }),
        (rate, factor) => {
          const to = raised(rate, factor);
          expect(to).toBeGreaterThan(rate);
          expect(to).toBeLessThan(1);
          if (rate * factor <= 0.5) expect(to).toBe(rate * factor);
        },
      ),
    );
  });

  test('scattered losses are different accounts in order, every account equally often', () => {
    const uniform = seededUniform(5);
    const hits = new Array<number>(10).fill(0);
    for (const lost of [0, 3, 7, 10]) {
      for (let run = 0; run < 2_000; run++) {
        const places = [...scatter(lost, 10, uniform)];
        expect(places).toHaveLength(lost);
        expect(places).toEqual([...new Set(places)].sort((a, b) => a - b));
        for (const place of places) hits[place - 1]!++;
      }
    }
    // Expected 4,000 each: 2,000 times (0 + 3 + 7 + 10) / 10; standard deviation about 29.
    for (const hit of hits) expect(Math.abs(hit - 4_000)).toBeLessThan(130);
  });
});
