import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { seededUniform } from '../../../src/charts/random/uniform.ts';
import { cusumRunLength } from '../../../src/charts/runLength/cusumRunLength.ts';
import { gaussLegendre } from '../../../src/charts/runLength/gaussLegendre.ts';
import { solveLinear } from '../../../src/charts/runLength/solveLinear.ts';
import { areApart, jointRunLength } from '../../../src/charts/sums/jointRunLength.ts';
import { type SumWalk, sumRunLength } from '../../../src/charts/sums/sumRunLength.ts';
import { accountsToAlarm, designWatch, type WatchSum, watchSteps } from '../../../src/charts/sums/watchSum.ts';

/** The chain's equations written down plainly. */
function byEquations({ up, down, chanceUp, limit, start = 0 }: SumWalk): number {
  const matrix = new Float64Array(limit * limit);
  for (let s = 0; s < limit; s++) {
    matrix[s * limit + s]! += 1;
    matrix[s * limit + Math.max(0, s - down)]! -= 1 - chanceUp;
    if (s + up < limit) matrix[s * limit + s + up]! -= chanceUp;
  }
  return solveLinear(matrix, new Float64Array(limit).fill(1))[start]!;
}

/** Account by account, the plain way: how long until the first of some sums raises an alarm. */
function simulate(sums: readonly WatchSum[], rate: number, runs: number, seed: number) {
  const uniform = seededUniform(seed);
  let total = 0;
  let squares = 0;
  for (let run = 0; run < runs; run++) {
    const values = sums.map(({ start }) => start);
    let accounts = 0;
    do {
      accounts++;
      const lost = uniform() < rate;
      sums.forEach((sum, i) => {
        values[i] = Math.max(0, values[i]! + (lost ? sum.lostStep : sum.keptStep));
      });
    } while (sums.every((sum, i) => values[i]! < sum.limit));
    total += accounts;
    squares += accounts * accounts;
  }
  const mean = total / runs;
  return { mean, error: Math.sqrt((squares / runs - mean * mean) / runs) };
}

describe('the run length of a sum of whole steps', () => {
  const walk = fc
    .record({
      up: fc.integer({ min: 1, max: 25 }),
      down: fc.integer({ min: 1, max: 25 }),
      chanceUp: fc.double({ min: 0.02, max: 0.98, noNaN: true }),
      limit: fc.integer({ min: 1, max: 60 }),
    })
    .chain((steps) => fc.integer({ min: 0, max: steps.limit - 1 }).map((start) => ({ ...steps, start })));

  test('is what its equations give, solved the plain way', () => {
    fc.assert(
      fc.property(walk, (steps) => {
        const found = sumRunLength(steps);
        // The plain way loses its digits when a run takes ages.
        fc.pre(found < 1e7);
        expect(Math.abs(found / byEquations(steps) - 1)).toBeLessThan(1e-6);
      }),
      { numRuns: 300 },
    );
  });

  test('grows with the limit, shrinks with a head start, and is at least the shortest way up', () => {
    fc.assert(
      fc.property(walk, (steps) => {
        const here = sumRunLength(steps);
        expect(sumRunLength({ ...steps, limit: steps.limit + 1 })).toBeGreaterThan(here * (1 - 1e-12));
        expect(sumRunLength({ ...steps, start: 0 })).toBeGreaterThanOrEqual(here * (1 - 1e-12));
        expect(here).toBeGreaterThanOrEqual(Math.ceil((steps.limit - steps.start) / steps.up) * (1 - 1e-12));
      }),
    );
  });

  test('of a very rare loss and a far limit stays a number', () => {
    const sum = designWatch(0.0005, 0.001, 2_000_000);
    expect(accountsToAlarm(sum, 0.0005)).toBeGreaterThanOrEqual(2_000_000);
    expect(accountsToAlarm({ ...sum, limit: sum.limit - 1 }, 0.0005)).toBeLessThan(2_000_000);
  });
});

describe('the design of a watch', () => {
  const moves: [number, number][] = [
    [0.06, 0.09],
    [0.06, 0.03],
    [0.01, 0.02],
    [0.01, 0.005],
    [0.25, 0.375],
    [0.25, 0.125],
    [0.8, 0.9],
    [0.8, 0.6],
    [0.45, 0.5],
  ];
  test.each(moves)(
    'from %d to %d has the smallest limit that raises false alarms no more often than wanted',
    (p0, p1) => {
      const sum = designWatch(p0, p1, 3_000);
      expect(accountsToAlarm(sum, p0)).toBeGreaterThanOrEqual(3_000);
      expect(accountsToAlarm({ ...sum, limit: sum.limit - 1 }, p0)).toBeLessThan(3_000);
      // The rounded steps still look for nearly the wanted move.
      expect(Math.abs(sum.moved - p1)).toBeLessThan(0.15 * Math.abs(p1 - p0));
      expect(accountsToAlarm(sum, p1)).toBeLessThan(3_000);
    },
  );

  test.each(moves)(
    'from %d to %d: the chain agrees with account-by-account simulation within 3 standard errors',
    (p0, p1) => {
      const sum = designWatch(p0, p1, 500);
      for (const rate of [p0, p1]) {
        const plain = simulate([sum], rate, 1_500, 31);
        expect(Math.abs(plain.mean - accountsToAlarm(sum, rate)) / plain.error).toBeLessThan(3);
      }
    },
  );

  test('a head start sees a move sooner and costs false alarms early on', () => {
    const plain = designWatch(0.06, 0.09, 3_000);
    const ahead = designWatch(0.06, 0.09, 3_000, 0.5);
    expect(ahead).toEqual({ ...plain, start: Math.floor(plain.limit / 2) });
    expect(accountsToAlarm(ahead, 0.09)).toBeLessThan(0.8 * accountsToAlarm(plain, 0.09));
    expect(accountsToAlarm(ahead, 0.06)).toBeLessThan(accountsToAlarm(plain, 0.06));
    const simulated = simulate([ahead], 0.09, 1_500, 32);
    expect(Math.abs(simulated.mean - accountsToAlarm(ahead, 0.09)) / simulated.error).toBeLessThan(3);
  });

  test('counting kept accounts instead of lost ones turns a rise into a fall and changes nothing else', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 0.95, noNaN: true }),
        fc.double({ min: 0.01, max: 0.95, noNaN: true }),
        (p0, p1) => {
          fc.pre(Math.abs(p1 - p0) > 0.1 * p0 && Math.abs(p1 - p0) > 0.1 * (1 - p0));
          const lost = watchSteps(p0, p1);
          const kept = watchSteps(1 - p0, 1 - p1);
          expect(kept.direction).not.toBe(lost.direction);
          expect(kept.lostStep).toBe(lost.keptStep);
          expect(kept.keptStep).toBe(lost.lostStep);
          expect(kept.moved).toBeCloseTo(1 - lost.moved, 9);
        },
      ),
    );
  });

  test('a watch for no move at all is refused', () => {
    expect(() => watchSteps(0.06, 0.06)).toThrow(RangeError);
  });
});

describe('two sums that watch the same accounts', () => {
  const pairs: [number, number, number, number, number][] = [
    [0.06, 1.5, 0.5, 4_000, 4_000],
    [0.06, 2, 0.5, 4_000, 4_000],
    [0.2, 1.5, 0.5, 2_000, 2_000],
    [0.02, 1.5, 0.5, 4_000, 4_000],
    [0.06, 1.5, 0.5, 600, 30_000],
    [0.06, 1.5, 0.5, 30_000, 600],
  ];
  test.each(pairs)(
    'at %d, rise by %d, fall by %d: together as a plain simulation has it, whichever way it is found',
    (p0, up, down, n1, n2) => {
      const rise = designWatch(p0, p0 * up, n1);
      const fall = designWatch(p0, p0 * down, n2);
      for (const rate of [p0, p0 * up, p0 * down]) {
        const joint = jointRunLength(rise, fall, rate);
        const plain = simulate([rise, fall], rate, 700, 33);
        expect(joint.method).toBe(areApart(rise, fall) ? 'exact' : 'simulated');
        expect(Math.abs(joint.accounts - plain.mean) / Math.hypot(plain.error, joint.standardError ?? 0)).toBeLessThan(
          3.5,
        );
      }
    },
  );

  test('both ways of finding it occur, and where both apply they agree', () => {
    const rise = designWatch(0.06, 0.09, 4_000);
    const fall = designWatch(0.06, 0.03, 4_000);
    const exact = pairs.map(([p0, up, down, n1, n2]) =>
      areApart(designWatch(p0, p0 * up, n1), designWatch(p0, p0 * down, n2)),
    );
    expect(new Set(exact).size).toBe(2);
    const ahead = jointRunLength({ ...rise, start: 1 }, fall, 0.06);
    expect(ahead.method).toBe('simulated');
    const apart = 1 / (1 / accountsToAlarm(rise, 0.06) + 1 / accountsToAlarm(fall, 0.06));
    // A head start of one whole step, a fraction of an account, changes next to nothing.
    expect(Math.abs(ahead.accounts - apart) / ahead.standardError!).toBeLessThan(3.5);
  });
});

describe('the parts', () => {
  test('the quadrature is exact for polynomials it should be exact for', () => {
    const { nodes, weights } = gaussLegendre(6, -1, 3);
    for (let power = 0; power <= 11; power++) {
      const sum = nodes.reduce((total, x, i) => total + weights[i]! * x ** power, 0);
      const exact = (3 ** (power + 1) - (-1) ** (power + 1)) / (power + 1);
      expect(sum / exact).toBeCloseTo(1, 11);
    }
  });

  test('equations without a single solution are refused', () => {
    expect(() => solveLinear(Float64Array.of(1, 2, 2, 4), Float64Array.of(1, 1))).toThrow(RangeError);
    expect([...solveLinear(Float64Array.of(0, 2, 4, 0), Float64Array.of(2, 4))]).toEqual([1, 1]);
  });

  test('a CUSUM of normal values with a head start answers sooner, as simulated', () => {
    // Lucas and Crosier 1982: a head start of half the limit.
    expect(cusumRunLength(0.5, 5, 1, 2.5)).toBeLessThan(0.75 * cusumRunLength(0.5, 5, 1));
    expect(cusumRunLength(0.5, 5, 0, 2.5)).toBeGreaterThan(0.9 * cusumRunLength(0.5, 5, 0));
  });
});
