import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { betaBinomialSampler } from '../../src/charts/random/betaBinomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { simulateHistories } from '../../src/charts/standing/histories.ts';
import type { BlockDesign } from '../../src/charts/standing/lastBlock.ts';
import { standingJudge } from '../../src/charts/standing/standing.ts';
import { standingThreshold } from '../../src/charts/standing/threshold.ts';

const RATE = 0.06;
/** Dispersion 3 at n = 150. */
const CORRELATION = 2 / 149;

const design = (correlation?: number): BlockDesign => ({
  accounts: Array.from({ length: 57 }, () => 150),
  baselineLast: 25,
  excluded: [],
  ...(correlation === undefined ? {} : { correlation }),
});

/** Share of fresh overdispersed histories that read as moved above or below, judged as `judged` and held to its own threshold. */
function readings(judged: BlockDesign, factor: number, seed: number): { above: number; below: number } {
  const judge = standingJudge(judged);
  const { ratio } = standingThreshold(judged, RATE);
  const histories = 1_500;
  let above = 0;
  let below = 0;
  simulateHistories(
    design(CORRELATION),
    [
      { from: 1, rate: RATE },
      { from: 39, rate: factor * RATE },
    ],
    histories,
    seed,
    (lost) => {
      const standing = judge(lost);
      if (standing.above.score > ratio) above++;
      else if (standing.below.score > ratio) below++;
    },
  );
  return { above: above / histories, below: below / histories };
}

describe('counts that vary three times as much as the binomial', () => {
  it('with nothing changed read as moved in at most 5 of 100 cases on a p′ chart, and far more often on a p chart', () => {
    const prime = readings(design(CORRELATION), 1, 71);
    expect(prime.above + prime.below).toBeLessThan(0.055);
    // The control: the same histories, judged as if only the binomial acted.
    const plain = readings(design(), 1, 71);
    expect(plain.above + plain.below).toBeGreaterThan(0.15);
  });

  it('a doubling is still read, and never as a fall', () => {
    const { above, below } = readings(design(CORRELATION), 2, 72);
    expect(above).toBeGreaterThan(0.85);
    expect(below).toBe(0);
  });
});

describe('beta-binomial counts', () => {
  it('have the stated mean and variance', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 5, max: 300 }),
        fc.double({ min: 0.02, max: 0.6, noNaN: true }),
        fc.double({ min: 0.001, max: 0.3, noNaN: true }),
        (size, rate, correlation) => {
          const sampler = betaBinomialSampler(size, rate, correlation);
          const uniform = seededUniform(8);
          const draws = Array.from({ length: 4_000 }, () => sampler.draw(uniform));
          const mean = draws.reduce((sum, x) => sum + x, 0) / draws.length;
          const variance = draws.reduce((sum, x) => sum + (x - mean) ** 2, 0) / draws.length;
          const expected = size * rate * (1 - rate) * (1 + (size - 1) * correlation);
          expect(Math.abs(mean - size * rate)).toBeLessThan(4.5 * Math.sqrt(expected / draws.length));
          expect(variance / expected).toBeGreaterThan(0.75);
          expect(variance / expected).toBeLessThan(1.3);
        },
      ),
      { numRuns: 40, seed: 5 },
    );
  });

  it('are binomial without correlation, and certain at rates 0 and 1', () => {
    const sampler = betaBinomialSampler(40, 0.1, 0);
    for (const u of [0.001, 0.2, 0.5, 0.9, 0.9999]) {
      const k = sampler.quantile(u);
      expect(binomialCdf(k, 40, 0.1)).toBeGreaterThanOrEqual(u);
      if (k > 0) expect(binomialCdf(k - 1, 40, 0.1)).toBeLessThan(u);
    }
    expect(betaBinomialSampler(40, 0, 0.2).quantile(0.99)).toBe(0);
    expect(betaBinomialSampler(40, 1, 0.2).quantile(0.01)).toBe(40);
  });
});
