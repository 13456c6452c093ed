import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { binomialSampler } from '../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';

const rate = fc.double({ min: 1e-4, max: 1 - 1e-4, noNaN: true });
const size = fc.integer({ min: 1, max: 5_000 });
const cell = fc.integer({ min: 0, max: 4294967295 }).map((k) => (k + 0.5) / 4294967296);

describe('uniform numbers', () => {
  test('the same seed gives the same numbers, another seed others, never 0 or 1', () => {
    const take = (seed: number): number[] => Array.from({ length: 100 }, seededUniform(seed));
    expect(take(5)).toEqual(take(5));
    expect(take(5)).not.toEqual(take(6));
    for (const u of [...take(0), ...take(-1)]) expect(u > 0 && u < 1).toBe(true);
  });

  // The numbers of small seeds once all began close to 1, 1 and then 0 or 1.
  test('the first numbers of neighbouring seeds are spread evenly and have nothing to do with each other', () => {
    const seeds = 2_000;
    for (let place = 0; place < 6; place++) {
      const numbers = Array.from({ length: seeds }, (_, seed) => {
        const uniform = seededUniform(seed);
        for (let i = 0; i < place; i++) uniform();
        return uniform();
      });
      const tenths = new Array<number>(10).fill(0);
      for (const u of numbers) tenths[Math.floor(10 * u)]!++;
      const chiSquare = tenths.reduce((sum, count) => sum + (count - seeds / 10) ** 2 / (seeds / 10), 0);
      // 9 degrees of freedom: beyond 33.7 once in ten thousand
      expect(chiSquare, `number ${place + 1}`).toBeLessThan(33.7);
      const neighbours =
        numbers.slice(1).reduce((sum, u, i) => sum + (u - 0.5) * (numbers[i]! - 0.5), 0) * (12 / seeds);
      expect(Math.abs(neighbours)).toBeLessThan(4.5 / Math.sqrt(seeds));
    }
  });
});

describe('binomial quantiles', () => {
  test('the quantile is the first count whose cumulative chance reaches u, by another library’s distribution', () => {
    fc.assert(
      fc.property(size, rate, cell, (n, p, u) => {
        const k = binomialSampler(n, p).quantile(u);
        expect(k).toBeGreaterThanOrEqual(0);
        expect(k).toBeLessThanOrEqual(n);
        expect(binomialCdf(k, n, p)).toBeGreaterThanOrEqual(u - 1e-9);
        if (k > 0) expect(binomialCdf(k - 1, n, p)).toBeLessThanOrEqual(u + 1e-9);
      }),
      { numRuns: 400 },
    );
  });

  test('a higher rate never gives a lower count for the same number, nor a higher number a lower count', () => {
    fc.assert(
      fc.property(size, rate, rate, cell, cell, (n, p, q, u, v) => {
        const low = binomialSampler(n, Math.min(p, q));
        const high = binomialSampler(n, Math.max(p, q));
        expect(high.quantile(u)).toBeGreaterThanOrEqual(low.quantile(u));
        expect(low.quantile(Math.max(u, v))).toBeGreaterThanOrEqual(low.quantile(Math.min(u, v)));
      }),
      { numRuns: 400 },
    );
  });

  test('rates of 0 and 1 give none and all; a size of a billion is still drawn', () => {
    const uniform = seededUniform(1);
    expect(binomialSampler(7, 0).draw(uniform)).toBe(0);
    expect(binomialSampler(7, 1).draw(uniform)).toBe(7);
    const billion = binomialSampler(1e9, 0.06);
    const draws = Array.from({ length: 200 }, () => (billion.draw(uniform) - 6e7) / Math.sqrt(1e9 * 0.06 * 0.94));
    expect(Math.max(...draws.map(Math.abs))).toBeLessThan(5);
    expect(Math.abs(draws.reduce((sum, z) => sum + z, 0) / 200)).toBeLessThan(4 / Math.sqrt(200));
  });

  test('draws have the binomial mean and variance', () => {
    const draws = 40_000;
    for (const [n, p] of [
      [85, 0.06],
      [40, 0.5],
      [300, 0.97],
    ] as const) {
      const sampler = binomialSampler(n, p);
      const uniform = seededUniform(8);
      const values = Array.from({ length: draws }, () => sampler.draw(uniform));
      const mean = values.reduce((sum, x) => sum + x, 0) / draws;
      const variance = values.reduce((sum, x) => sum + (x - mean) ** 2, 0) / draws;
      expect(Math.abs(mean - n * p)).toBeLessThan(4 * Math.sqrt((n * p * (1 - p)) / draws));
      expect(Math.abs(variance / (n * p * (1 - p)) - 1)).toBeLessThan(0.04);
    }
  });
});
