import { describe, expect, test } from 'vitest';
import { binomialSampler } from '../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { simulatedRunLength } from '../../src/charts/runLength/simulatedRunLength.ts';
import type { RunLength } from '../../src/charts/runLength/types.ts';
import { nelsonTests, SHIFT_TESTS } from '../../src/charts/tests/nelsonTests.ts';
import type { TestNumber } from '../../src/charts/types.ts';

/** A plain p chart of these sizes with this centre line, at this rate. */
const simulated = (sizes: readonly number[], center: number, rate: number, tests: readonly TestNumber[], seed = 4) =>
  simulatedRunLength(sizes, { center, rate, sigmaZ: 1, correlation: 0 }, tests, { seed });

/** The figures, without the function that cannot be compared. */
const figures = ({ within, ...rest }: RunLength) => ({ ...rest, within: [1, 5, 25, 100, 1_000].map(within) });

/** The plain way: make a long history, look for its first flag with the tests that a real chart gets. */
function naiveRunLength(size: number, center: number, rate: number, tests: readonly TestNumber[], runs: number) {
  const uniform = seededUniform(2_718);
  const sampler = binomialSampler(size, rate);
  const sigma = Math.sqrt((center * (1 - center)) / size);
  const lengths = Array.from({ length: runs }, () => {
    // A history without a flag goes on; to begin it anew would leave out the long runs.
    const values: { value: number; center: number; sigma: number }[] = [];
    for (;;) {
      for (let i = 0; i < 200; i++) values.push({ value: sampler.draw(uniform) / size, center, sigma });
      const first = nelsonTests(values).find((episode) => tests.includes(episode.test));
      if (first) return first.point;
    }
  });
  const mean = lengths.reduce((sum, length) => sum + length, 0) / runs;
  const variance = lengths.reduce((sum, length) => sum + (length - mean) ** 2, 0) / (runs - 1);
  return { mean, error: Math.sqrt(variance / runs) };
}

describe('the simulated run length', () => {
  test.each([
    [85, 0.06, 0.06, SHIFT_TESTS],
    [85, 0.06, 0.03, SHIFT_TESTS],
    [85, 0.06, 0.096, SHIFT_TESTS],
    [40, 0.3, 0.3, SHIFT_TESTS],
    [50, 0.23, 0.3, [1, 2] as const],
  ])('agrees with a plain simulation at n = %d, centre line %d, rate %d', (size, center, rate, tests) => {
    const found = simulated([size], center, rate, tests)!;
    const naive = naiveRunLength(size, center, rate, tests, 800);
    expect(Math.abs(found.mean! - naive.mean) / Math.hypot(found.standardError!, naive.error)).toBeLessThan(4);
  });

  // A single test's run length is geometric: 1 / chance of a point outside. Exact binomial chance from the NIST wafers: 0.002596.
  test('of test 1 alone at the wafers’ rate is one over the exact chance outside', () => {
    const p = 347 / 1_500;
    const found = simulated([50], p, p, [1])!;
    expect(Math.abs(found.mean! - 1 / 0.002596) / found.standardError!).toBeLessThan(4);
  });

  test('gives its standard error, and the same figure for the same seed', () => {
    const found = simulated([85], 0.06, 0.06, SHIFT_TESTS)!;
    expect(figures(found)).toEqual(figures(simulated([85], 0.06, 0.06, SHIFT_TESTS)!));
    expect(found.standardError).toBeLessThan(found.mean! / 30);
    const others = [11, 12, 13, 14].map((seed) => simulated([85], 0.06, 0.06, SHIFT_TESTS, seed)!);
    for (const other of others) {
      expect(Math.abs(other.mean! - found.mean!) / Math.hypot(other.standardError!, found.standardError!)).toBeLessThan(
        4,
      );
    }
  });

  test('of one size is that of the same size repeated', () => {
    const one = simulated([60], 0.1, 0.1, SHIFT_TESTS)!;
    expect(figures(simulated([60, 60, 60], 0.1, 0.1, SHIFT_TESTS)!)).toEqual(figures(one));
  });

  test('of a chart that cannot flag is not told', () => {
    // Nobody is lost: every point lies in the same place below the centre line, and tests 1, 3, 5 and 6 never see it.
    expect(simulated([10], 0.05, 0, [1, 3, 5, 6])).toBeNull();
  });
});
