import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { blockProfile } from '../../src/charts/standing/blockProfile.ts';
import { lastBlockFinder } from '../../src/charts/standing/lastBlock.ts';

describe('every possible last block', () => {
  test('the best on each side is the one the judge finds', () => {
    const counts = fc.array(fc.tuple(fc.integer({ min: 5, max: 200 }), fc.double({ min: 0, max: 1, noNaN: true })), {
      minLength: 12,
      maxLength: 50,
    });
    fc.assert(
      fc.property(counts, fc.boolean(), fc.boolean(), (made, trial, without) => {
        const accounts = made.map(([n]) => n);
        const lost = made.map(([n, share]) => Math.max(1, Math.min(n - 1, Math.round(n * share))));
        const design = {
          accounts,
          baselineLast: trial ? accounts.length : Math.floor(accounts.length / 2),
          excluded: without ? [2] : [],
        };
        const found = lastBlockFinder(design)(lost);
        const profile = blockProfile(design, lost);
        for (const side of ['above', 'below'] as const) {
          const best = Math.max(0, ...profile.filter((block) => block.side === side).map(({ ratio }) => ratio));
          expect(best).toBeCloseTo(found[side].ratio, 9);
        }
      }),
    );
  });
});
