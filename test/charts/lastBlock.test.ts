import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type BlockDesign, LEAST_BEFORE, lastBlockFinder } from '../../src/charts/standing/lastBlock.ts';
import { startCandidates } from '../../src/charts/standing/startCandidates.ts';
import type { SubgroupCount } from '../../src/charts/types.ts';
import { history } from './arbitraries.ts';

/** Binomial log likelihood without its constant, written out. */
function logLikelihood(lost: number, accounts: number, rate: number): number {
  return (lost > 0 ? lost * Math.log(rate) : 0) + (lost < accounts ? (accounts - lost) * Math.log(1 - rate) : 0);
}

const total = (counts: readonly SubgroupCount[]): SubgroupCount => ({
  accounts: counts.reduce((sum, count) => sum + count.accounts, 0),
  lost: counts.reduce((sum, count) => sum + count.lost, 0),
});
const atBest = ({ lost, accounts }: SubgroupCount, rate = lost / accounts): number =>
  logLikelihood(lost, accounts, rate);

/** Every block summed anew: the ratio of each start, signed by its side. */
function naiveRatios(counts: readonly SubgroupCount[], { baselineLast, excluded }: BlockDesign) {
  const isUsed = (i: number): boolean => i >= baselineLast || !excluded.includes(i + 1);
  const usedFrom = (from: number, to: number): SubgroupCount[] =>
    counts.filter((_, i) => i >= from && i < to && isUsed(i));
  const trial = baselineLast >= counts.length;
  const level = total(usedFrom(0, baselineLast));
  return counts.flatMap((_, i) => {
    if (i < (trial ? LEAST_BEFORE : baselineLast) || !isUsed(i)) return [];
    const block = total(usedFrom(i, counts.length));
    const before = trial ? total(usedFrom(0, i)) : level;
    if (before.accounts === 0) return [];
    const difference = block.lost / block.accounts - before.lost / before.accounts;
    const ratio = trial
      ? atBest(block) + atBest(before) - atBest(level)
      : atBest(block) - atBest(block, level.lost / level.accounts);
    return [{ first: i + 1, ratio, side: Math.abs(difference) < 1e-12 ? 0 : Math.sign(difference) }];
  });
}

const design = history(10, 30).chain((counts) =>
  fc.record({
    counts: fc.constant(counts),
    baselineLast: fc.oneof(fc.constant(counts.length), fc.integer({ min: 2, max: counts.length })),
    excluded: fc.oneof(fc.constant([]), fc.array(fc.integer({ min: 1, max: 8 }), { maxLength: 1 })),
  }),
);

describe('the last block', () => {
  test('is the one a search over all starts finds, on either side, with or without points left out', () => {
    fc.assert(
      fc.property(design, ({ counts, baselineLast, excluded }) => {
        const accounts = Object.freeze(counts.map((count) => count.accounts));
        const blocks = lastBlockFinder({ accounts, baselineLast, excluded: Object.freeze(excluded) });
        const found = blocks(Object.freeze(counts.map((count) => count.lost)));
        const ratios = naiveRatios(counts, { accounts, baselineLast, excluded });
        for (const [side, sign] of [
          ['above', 1],
          ['below', -1],
        ] as const) {
          const best = ratios.filter((one) => one.side === sign).reduce((most, one) => Math.max(most, one.ratio), 0);
          if (best === Number.POSITIVE_INFINITY) expect(found[side].ratio).toBe(best);
          else expect(Math.abs(found[side].ratio - best)).toBeLessThan(1e-7 * (1 + best));
          if (best > 1e-6) {
            const there = ratios.find((one) => one.first === found[side].first)!;
            expect(there.side).toBe(sign);
            if (best < Number.POSITIVE_INFINITY) expect(Math.abs(there.ratio - best)).toBeLessThan(1e-7 * (1 + best));
          }
        }
      }),
      { numRuns: 500 },
    );
  });

  test('below the level is what above the level is for those who stayed', () => {
    fc.assert(
      fc.property(design, ({ counts, baselineLast, excluded }) => {
        const blocks = lastBlockFinder({ accounts: counts.map((count) => count.accounts), baselineLast, excluded });
        const one = blocks(counts.map((count) => count.lost));
        const other = blocks(counts.map((count) => count.accounts - count.lost));
        for (const [side, opposite] of [
          ['above', 'below'],
          ['below', 'above'],
        ] as const) {
          const [a, b] = [one[side].ratio, other[opposite].ratio];
          if (Math.max(a, b) === Number.POSITIVE_INFINITY) expect(a).toBe(b);
          else expect(Math.abs(a - b)).toBeLessThan(1e-6 * (1 + a));
        }
      }),
      { numRuns: 300 },
    );
  });
});

describe('start candidates', () => {
  test('hold the most likely start, after the baseline, and leave their inputs alone', () => {
    const counts = Object.freeze([...Array.from({ length: 25 }, (_, i) => 5 + (i % 3)), 6, 4, 5, 11, 14, 12, 13, 10]);
    const accounts = Object.freeze(counts.map(() => 100));
    const found = startCandidates({ accounts, baselineLast: 25, excluded: Object.freeze([3]) }, counts, 'above');
    expect(found.first).toBe(29);
    expect(found.candidates[0]).toBeLessThanOrEqual(29);
    expect(found.candidates[0]).toBeGreaterThan(25);
    expect(found.candidates[1]).toBeGreaterThanOrEqual(29);
    expect(found.candidates[1]).toBeLessThanOrEqual(33);
  });

  test('of a move that can hardly be told stay among the points at which it can have begun', () => {
    const counts = [...Array.from({ length: 25 }, () => 2), 2, 2, 3, 2, 3];
    const accounts = counts.map(() => 40);
    const { candidates } = startCandidates({ accounts, baselineLast: 25, excluded: [] }, counts, 'above');
    // The baseline's own points count too, as long as enough lie before to be a level.
    expect(candidates[0]).toBeGreaterThan(LEAST_BEFORE);
    expect(candidates[1]).toBeLessThanOrEqual(30);
  });
});
