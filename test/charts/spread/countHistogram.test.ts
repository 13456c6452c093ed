import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { countHistogram } from '../../../src/charts/spread/countHistogram.ts';
import { furthestOut } from '../../../src/charts/spread/furthestOut.ts';

const counts = fc.array(fc.tuple(fc.integer({ min: 1, max: 400 }), fc.double({ min: 0, max: 1, noNaN: true })), {
  minLength: 1,
  maxLength: 60,
});

describe('histogram of the points beside the binomial', () => {
  test('bars of equal points hold the exact binomial chances', () => {
    const rows = [6, 5, 7, 6, 4, 9].map((lost) => ({ accounts: 85, lost }));
    const { of, bins } = countHistogram(rows, 0.07);
    expect(of).toBe('lost');
    for (const bin of bins) {
      const below = bin.from === 0 ? 0 : binomialCdf(bin.from - 1, 85, 0.07);
      expect(bin.expected).toBeCloseTo(6 * (binomialCdf(bin.to, 85, 0.07) - below), 9);
      expect(bin.seen).toBe(rows.filter(({ lost }) => lost >= bin.from && lost <= bin.to).length);
    }
  });

  test('every point is seen once and nearly every expected one is in a bar, whatever the sizes', () => {
    fc.assert(
      fc.property(counts, fc.double({ min: 0.002, max: 0.998, noNaN: true }), fc.boolean(), (made, rate, equal) => {
        const rows = made.map(([accounts, share]) => {
          const n = equal ? made[0]![0] : accounts;
          return { accounts: n, lost: Math.round(n * share) };
        });
        const { bins } = countHistogram(rows, rate);
        expect(bins.length).toBeLessThanOrEqual(26);
        expect(bins.reduce((sum, bin) => sum + bin.seen, 0)).toBe(rows.length);
        const expected = bins.reduce((sum, bin) => sum + bin.expected, 0);
        expect(expected).toBeLessThanOrEqual(rows.length * (1 + 1e-9));
        expect(expected).toBeGreaterThan(rows.length * 0.9998);
      }),
    );
  });

  test('points of different sizes are compared by their distance from the rate', () => {
    const { of, bins } = countHistogram(
      [
        { accounts: 100, lost: 10 },
        { accounts: 60, lost: 6 },
      ],
      0.1,
    );
    expect(of).toBe('score');
    expect(bins.find((bin) => bin.from === 0)?.seen).toBe(2);
  });
});

describe('points furthest out', () => {
  test('come furthest first, with how many of so many points chance would have so far out', () => {
    const rows = [6, 15, 6, 0, 7].map((lost) => ({ accounts: 100, lost }));
    const far = furthestOut(rows, 0.06);
    expect(far.map(({ at }) => at)).toEqual([1, 3, 4]);
    expect(far[0]!.expected).toBeCloseTo(5 * (1 - binomialCdf(14, 100, 0.06)), 12);
    expect(far[1]!.expected).toBeCloseTo(5 * binomialCdf(0, 100, 0.06), 12);
    expect(far[1]!.z).toBeLessThan(0);
  });
});
