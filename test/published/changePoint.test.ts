import { describe, expect, test } from 'vitest';
import { binomialSampler } from '../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { lastBlockFinder } from '../../src/charts/standing/lastBlock.ts';
import { zoneOf } from '../../src/charts/tests/zone.ts';
import { checkValue, checkValues } from './checkValues.ts';

/*
 * The published estimator knows the old rate; ours estimates it from the baseline. A baseline of one point with exactly that rate makes
 * the two the same, so that the published values can be compared digit for digit.
 */
interface Step {
  D: number[];
  n: number;
  p0: number;
}

function withKnownRate(sizes: readonly number[], lost: readonly number[], p0: number) {
  const blocks = lastBlockFinder({ accounts: [1_000, ...sizes], baselineLast: 1, excluded: [] });
  return blocks([Math.round(1_000 * p0), ...lost]);
}

const table = checkValue<Step, { tau: number; p1: number; loglik: number[] }>('changepoint-deterministic');

describe(`step change point: ${table.cited}`, () => {
  const { D, n, p0 } = table.inputs;

  test('the likelihood ratio of every start is the tabulated one', () => {
    table.expected.loglik.forEach((expected, t) => {
      // All that comes after t, put into one point, leaves only one block to choose.
      const after = D.slice(t);
      const { above } = withKnownRate([n * after.length], [after.reduce((sum, d) => sum + d, 0)], p0);
      expect(Math.abs(above.ratio - expected)).toBeLessThanOrEqual(table.tolerance);
    });
  });

  test('the most likely start is the point after the last unchanged one', () => {
    const { above, below } = withKnownRate(
      D.map(() => n),
      D,
      p0,
    );
    // + 1 for the baseline point in front, + 1 as the block starts after tau
    expect(above.first).toBe(table.expected.tau + 2);
    expect(Math.abs(above.ratio - Math.max(...table.expected.loglik))).toBeLessThanOrEqual(table.tolerance);
    expect(below.ratio).toBe(0);
    const after = D.slice(table.expected.tau);
    expect(after.reduce((sum, d) => sum + d, 0) / (n * after.length)).toBeCloseTo(table.expected.p1, 6);
  });
});

describe('how well the change point is found once a point is beyond the limit', () => {
  const RUNS = 1_500;
  type Row = { inputs: { n: number; p0: number; p1: number; tau: number }; expected: Record<string, number> };
  const rows = checkValues<Row['inputs'], Row['expected']>('changepoint-sim-').filter(
    ({ inputs }) => inputs.p1 >= 0.15,
  );

  test.each(rows)(
    '$inputs.p0 to $inputs.p1: exact and near hits as in the reference simulation',
    ({ inputs, expected }) => {
      const { n, p0, p1, tau } = inputs;
      const uniform = seededUniform(1_000 * p1);
      const old = binomialSampler(n, p0);
      const moved = binomialSampler(n, p1);
      const sigma = Math.sqrt((p0 * (1 - p0)) / n);
      const hits = new Map([0, 1, 2, 3, 5, 10].map((within) => [within, 0]));
      for (let run = 0; run < RUNS; run++) {
        const lost: number[] = [];
        const isOutside = (d: number): boolean => Math.abs(zoneOf(d / n, p0, sigma)) === 4;
        // The reference leaves out histories with a false alarm before the change: the same as drawing an outside point again.
        while (lost.length < tau) {
          const d = old.draw(uniform);
          if (!isOutside(d)) lost.push(d);
        }
        do lost.push(moved.draw(uniform));
        while (!isOutside(lost.at(-1)!));
        const { above, below } = withKnownRate(
          lost.map(() => n),
          lost,
          p0,
        );
        const last = (above.ratio >= below.ratio ? above : below).first - 2;
        for (const [within, count] of hits) if (Math.abs(last - tau) <= within) hits.set(within, count + 1);
      }
      for (const [within, count] of hits) {
        const chance = expected[`P${within}`]!;
        const error = Math.sqrt(chance * (1 - chance) * (1 / RUNS + 1 / expected.reps!));
        expect(Math.abs(count / RUNS - chance), `within ${within}`).toBeLessThan(4 * error);
      }
    },
  );
});
