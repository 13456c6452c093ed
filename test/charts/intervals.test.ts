import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { newcombeInterval } from '../../src/charts/intervals/newcombe.ts';
import { wilsonInterval } from '../../src/charts/intervals/wilson.ts';
import { subgroup } from './arbitraries.ts';

const mass = (k: number, n: number, p: number): number => binomialCdf(k, n, p) - (k > 0 ? binomialCdf(k - 1, n, p) : 0);

describe('Wilson interval', () => {
  test('lies within 0 and 1 and contains the estimate', () => {
    fc.assert(
      fc.property(subgroup(1_000_000), ({ lost, accounts }) => {
        const { estimate, low, high } = wilsonInterval(lost, accounts);
        expect(low).toBeGreaterThanOrEqual(0);
        expect(high).toBeLessThanOrEqual(1);
        expect(low).toBeLessThanOrEqual(estimate);
        expect(high).toBeGreaterThanOrEqual(estimate);
      }),
    );
  });

  test('mirrors when lost and kept change places', () => {
    fc.assert(
      fc.property(subgroup(), ({ lost, accounts }) => {
        const one = wilsonInterval(lost, accounts);
        const other = wilsonInterval(accounts - lost, accounts);
        expect(one.low).toBeCloseTo(1 - other.high, 12);
        expect(one.high).toBeCloseTo(1 - other.low, 12);
      }),
    );
  });

  // The score test turned round: a rate is inside exactly when the observed share is within z standard errors of it.
  test('holds exactly the rates that a score test does not reject', () => {
    fc.assert(
      fc.property(subgroup(), fc.double({ min: 0.001, max: 0.999, noNaN: true }), ({ lost, accounts }, p) => {
        const { low, high } = wilsonInterval(lost, accounts);
        const score = Math.abs(lost / accounts - p) / Math.sqrt((p * (1 - p)) / accounts);
        fc.pre(Math.abs(score - 1.959963984540054) > 1e-9);
        expect(p >= low && p <= high).toBe(score < 1.959963984540054);
      }),
    );
  });

  test('covers 95 % on average over all rates, by exact enumeration at sizes of 5 to 100', () => {
    for (const n of [5, 10, 20, 50, 100]) {
      const intervals = Array.from({ length: n + 1 }, (_, lost) => wilsonInterval(lost, n));
      let sum = 0;
      const rates = 400;
      for (let i = 0; i < rates; i++) {
        const p = (i + 0.5) / rates;
        intervals.forEach(({ low, high }, lost) => {
          if (low <= p && p <= high) sum += mass(lost, n, p);
        });
      }
      // Agresti and Coull 1998 report means close to the nominal level for the score interval (from memory).
      expect(Math.abs(sum / rates - 0.95)).toBeLessThan(0.006);
    }
  });
});

describe('Newcombe interval', () => {
  test('lies within -1 and 1, contains the difference, and turns round with its groups', () => {
    fc.assert(
      fc.property(subgroup(), subgroup(), (a, b) => {
        const one = newcombeInterval(a, b);
        const other = newcombeInterval(b, a);
        expect(one.low).toBeGreaterThanOrEqual(-1 - 1e-12);
        expect(one.high).toBeLessThanOrEqual(1 + 1e-12);
        expect(one.low).toBeLessThanOrEqual(one.estimate);
        expect(one.high).toBeGreaterThanOrEqual(one.estimate);
        expect(other.low).toBeCloseTo(-one.high, 12);
        expect(other.high).toBeCloseTo(-one.low, 12);
      }),
    );
  });

  test('covers the true difference in about 95 % of all samples, by exact enumeration', () => {
    for (const [m, p, n, q] of [
      [30, 0.1, 40, 0.1],
      [60, 0.06, 25, 0.15],
      [40, 0.5, 40, 0.2],
    ] as const) {
      let covered = 0;
      for (let a = 0; a <= m; a++) {
        for (let b = 0; b <= n; b++) {
          const { low, high } = newcombeInterval({ lost: a, accounts: m }, { lost: b, accounts: n });
          if (low <= p - q && p - q <= high) covered += mass(a, m, p) * mass(b, n, q);
        }
      }
      expect(covered).toBeGreaterThan(0.93);
      expect(covered).toBeLessThan(0.985);
    }
  });
});
