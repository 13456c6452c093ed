import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import * as fc from 'fast-check';
import { expect, test } from 'vitest';
import { exactLimits, THREE_SIGMA_TAIL } from '../../src/charts/limits/exactLimits.ts';

const size = fc.integer({ min: 1, max: 3_000 });
const rate = fc.double({ min: 0, max: 1, noNaN: true });
const below = (k: number, n: number, p: number): number => (k <= 0 ? 0 : k > n ? 1 : binomialCdf(k - 1, n, p));

test('the tail is the normal one beyond three sigma', () => {
  expect(Math.abs(THREE_SIGMA_TAIL - normalCdf(-3, 0, 1))).toBeLessThan(1e-17);
});

test('neither side flags more often than the tail, and one count further in would', () => {
  fc.assert(
    fc.property(size, rate, (n, p) => {
      const { lowest, highest } = exactLimits(n, p);
      expect(lowest).toBeGreaterThanOrEqual(0);
      expect(highest).toBeLessThanOrEqual(n);
      expect(lowest).toBeLessThanOrEqual(highest);
      expect(below(lowest, n, p)).toBeLessThanOrEqual(THREE_SIGMA_TAIL);
      expect(below(n - highest, n, 1 - p)).toBeLessThanOrEqual(THREE_SIGMA_TAIL);
      if (p > 0 && p < 1) {
        expect(below(lowest + 1, n, p)).toBeGreaterThan(THREE_SIGMA_TAIL);
        expect(below(n - highest + 1, n, 1 - p)).toBeGreaterThan(THREE_SIGMA_TAIL);
      }
    }),
  );
});

test('more accounts or a higher rate never lower either limit, and one account more moves neither by more than one', () => {
  fc.assert(
    fc.property(size, rate, rate, (n, one, other) => {
      const [p, q] = [Math.min(one, other), Math.max(one, other)];
      const here = exactLimits(n, p);
      const higher = exactLimits(n, q);
      expect(higher.lowest).toBeGreaterThanOrEqual(here.lowest);
      expect(higher.highest).toBeGreaterThanOrEqual(here.highest);
      const larger = exactLimits(n + 1, p);
      expect([0, 1]).toContain(larger.lowest - here.lowest);
      expect([0, 1]).toContain(larger.highest - here.highest);
    }),
  );
});

test('lost and kept are treated alike', () => {
  fc.assert(
    fc.property(size, fc.integer({ min: 0, max: 1024 }), (n, part) => {
      const p = part / 1024;
      const one = exactLimits(n, p);
      const other = exactLimits(n, 1 - p);
      expect(other).toEqual({ lowest: n - one.highest, highest: n - one.lowest });
    }),
  );
});

test('where much is to be expected they lie beside the three sigma ones', () => {
  fc.assert(
    fc.property(fc.integer({ min: 2_000, max: 50_000 }), fc.double({ min: 0.2, max: 0.8, noNaN: true }), (n, p) => {
      const { lowest, highest } = exactLimits(n, p);
      const reach = 3 * Math.sqrt(n * p * (1 - p));
      expect(Math.abs(lowest - (n * p - reach))).toBeLessThan(3.5);
      expect(Math.abs(highest - (n * p + reach))).toBeLessThan(3.5);
    }),
  );
});

// Sums of the binomial's own terms, worked out by hand with rational numbers: nothing of the program's.
test('with 20 accounts at 5 % up to 5 losses are not flagged, where three sigma flag from 4', () => {
  const term = (k: number): number => {
    let ways = 1;
    for (let i = 0; i < k; i++) ways = (ways * (20 - i)) / (i + 1);
    return ways * 0.05 ** k * 0.95 ** (20 - k);
  };
  const above = (k: number): number =>
    Array.from({ length: 20 - k }, (_, i) => term(k + 1 + i)).reduce((a, b) => a + b, 0);
  expect(above(5)).toBeLessThan(THREE_SIGMA_TAIL);
  expect(above(4)).toBeGreaterThan(THREE_SIGMA_TAIL);
  expect(exactLimits(20, 0.05)).toEqual({ lowest: 0, highest: 5 });
  expect(20 * 0.05 + 3 * Math.sqrt(20 * 0.05 * 0.95)).toBeLessThan(4);
});

test('a rate of nought or one leaves only the one possible count', () => {
  expect(exactLimits(10, 0)).toEqual({ lowest: 0, highest: 0 });
  expect(exactLimits(10, 1)).toEqual({ lowest: 10, highest: 10 });
  expect(exactLimits(1, 0.5)).toEqual({ lowest: 0, highest: 1 });
});

test('the example of the doc block', () => {
  const [p, reach] = [347 / 1500, 3 * Math.sqrt((347 / 1500) * (1 - 347 / 1500) * 50)];
  expect([Math.ceil(50 * p - reach), Math.floor(50 * p + reach)]).toEqual([3, 20]);
  expect(exactLimits(50, 347 / 1500)).toEqual({ lowest: 4, highest: 21 });
});
