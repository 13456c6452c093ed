import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { clopperPearsonInterval } from '../../src/charts/intervals/clopperPearson.ts';
import { newcombeInterval } from '../../src/charts/intervals/newcombe.ts';
import { rateInterval, SPARSE } from '../../src/charts/intervals/rateInterval.ts';
import {
  coverage,
  intervalsOf,
  jeffreys,
  likelihoodRatio,
  type Method,
  midP,
  wald,
  waldCorrected,
  wilson,
  wilsonCorrected,
} from '../support/proportionIntervals.ts';
import { subgroup } from './arbitraries.ts';

const exact: Method = (lost, accounts) => {
  const { low, high } = clopperPearsonInterval(lost, accounts);
  return [low, high];
};
const taken: Method = (lost, accounts) => {
  const { low, high } = rateInterval(lost, accounts);
  return [low, high];
};

/** Smallest coverage over all rates: it can only lie where a count drops out, just beside the end of some interval. */
function worst(method: Method, n: number): number {
  const intervals = intervalsOf(method, n);
  const ends = intervals.flatMap(([low, high]) => [low - 1e-9, low + 1e-9, high - 1e-9, high + 1e-9]);
  return Math.min(...ends.filter((p) => p > 0 && p < 1).map((p) => coverage(intervals, p)));
}

const size = fc.integer({ min: 5, max: 120 });

describe('coverage by exact enumeration', () => {
  test('the exact interval covers at least 95 % at every rate and size', () => {
    fc.assert(
      fc.property(size, (n) => {
        expect(worst(exact, n)).toBeGreaterThanOrEqual(0.95 - 1e-7);
      }),
      { numRuns: 25 },
    );
  });

  test('Wilson’s covers at least 91 % wherever five losses and five kept are to be expected', () => {
    fc.assert(
      fc.property(fc.integer({ min: 12, max: 300 }), fc.double({ min: 0, max: 1, noNaN: true }), (n, at) => {
        const p = (5 + at * (n - 10)) / n;
        expect(coverage(intervalsOf(wilson, n), p)).toBeGreaterThan(0.91);
      }),
    );
  });

  test('Wilson’s falls to 84 % where a loss is hardly to be expected; the interval taken is still right about 92 times in 100', () => {
    fc.assert(
      fc.property(size, (n) => {
        expect(worst(wilson, n)).toBeLessThan(0.842);
        expect(worst(taken, n)).toBeGreaterThan(0.915);
      }),
      { numRuns: 25 },
    );
  });

  test('Newcombe’s covers the true difference in 92 to 99 % of samples wherever five losses are to be expected in both groups', () => {
    const group = fc
      .integer({ min: 12, max: 60 })
      .chain((n) => fc.tuple(fc.constant(n), fc.double({ min: 5 / n, max: 1 - 5 / n, noNaN: true })));
    fc.assert(
      fc.property(group, group, ([m, p], [n, q]) => {
        const mass = (k: number, of: number, rate: number): number =>
          binomialCdf(k, of, rate) - (k > 0 ? binomialCdf(k - 1, of, rate) : 0);
        const first = Array.from({ length: m + 1 }, (_, k) => mass(k, m, p));
        const second = Array.from({ length: n + 1 }, (_, k) => mass(k, n, q));
        let covered = 0;
        for (const [a, chance] of first.entries()) {
          for (const [b, other] of second.entries()) {
            const { low, high } = newcombeInterval({ lost: a, accounts: m }, { lost: b, accounts: n });
            if (low <= p - q && p - q <= high) covered += chance * other;
          }
        }
        expect(covered).toBeGreaterThan(0.92);
        expect(covered).toBeLessThan(0.99);
      }),
      { numRuns: 60 },
    );
  });

  test('of the eight, the exact one alone never falls short, and Wilson’s comes nearest to 95 % on average of those that are quick', () => {
    const rates = Array.from({ length: 400 }, (_, i) => (i + 0.5) / 400);
    const mean = (method: Method): number => {
      const intervals = intervalsOf(method, 40);
      return rates.reduce((sum, p) => sum + coverage(intervals, p), 0) / rates.length;
    };
    const off = (method: Method): number => Math.abs(mean(method) - 0.95);
    expect(off(wilson)).toBeLessThan(0.005);
    for (const other of [wald, waldCorrected, wilsonCorrected]) expect(off(other)).toBeGreaterThan(off(wilson));
    for (const other of [wald, waldCorrected, wilson, midP, likelihoodRatio, jeffreys])
      expect(worst(other, 40)).toBeLessThan(0.945);
  });
});

describe('the interval taken', () => {
  test('is the exact one below five lost or kept, Wilson’s otherwise, and lies within 0 and 1 around the estimate', () => {
    fc.assert(
      fc.property(subgroup(2_000), ({ lost, accounts }) => {
        const { estimate, low, high, method } = rateInterval(lost, accounts);
        expect(method).toBe(lost < SPARSE || accounts - lost < SPARSE ? 'exact' : 'wilson');
        expect([low, high].every((end) => end >= 0 && end <= 1)).toBe(true);
        expect(low).toBeLessThanOrEqual(estimate);
        expect(high).toBeGreaterThanOrEqual(estimate);
      }),
    );
  });

  test('the exact interval mirrors when lost and kept change places, and holds the mid-P interval', () => {
    fc.assert(
      fc.property(subgroup(500), ({ lost, accounts }) => {
        const one = clopperPearsonInterval(lost, accounts);
        const other = clopperPearsonInterval(accounts - lost, accounts);
        expect(one.low).toBeCloseTo(1 - other.high, 9);
        expect(one.high).toBeCloseTo(1 - other.low, 9);
        const [low, high] = midP(lost, accounts);
        expect(one.low).toBeLessThanOrEqual(low + 1e-12);
        expect(one.high).toBeGreaterThanOrEqual(high - 1e-12);
      }),
    );
  });
});
