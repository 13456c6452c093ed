import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { chanceSeen } from '../../src/census/sizes.ts';
import { flagDelay, sizeThatSees } from '../../src/charts/runLength/flagDelay.ts';

describe('flagDelay', () => {
  it('within six points agrees with the chain over low points alone, where high points have no part', () => {
    for (const [size, rate] of [
      [85, 0.06],
      [145, 0.06],
      [400, 0.02],
    ] as const)
      expect(flagDelay(size, rate, rate / 2).within(6)).toBeCloseTo(chanceSeen(size, rate, rate / 2), 2);
  });

  it('a larger move is flagged sooner', () => {
    fc.assert(
      fc.property(fc.integer({ min: 50, max: 800 }), fc.double({ min: 0.03, max: 0.3, noNaN: true }), (size, rate) => {
        const delays = [1.2, 1.5, 2].map((move) => flagDelay(size, rate, rate * move).mean!);
        delays.slice(1).forEach((delay, i) => {
          expect(delay).toBeLessThanOrEqual(delays[i]!);
        });
        expect(delays.at(-1)).toBeGreaterThanOrEqual(1);
      }),
      { numRuns: 20 },
    );
  });
});

describe('sizeThatSees', () => {
  it('sees it, and four fifths of that size do not', () => {
    for (const [rate, move, points] of [
      [0.06, 0.5, 6],
      [0.06, 1.5, 6],
      [0.2, 0.8, 3],
      [0.01, 1.25, 10],
    ] as const) {
      const size = sizeThatSees(rate, rate * move, points, 0.8, 5 / rate)!;
      expect(flagDelay(size, rate, rate * move).within(points)).toBeGreaterThanOrEqual(0.8);
      expect(flagDelay(Math.floor(size * 0.8), rate, rate * move).within(points)).toBeLessThan(0.8);
    }
  });

  it('five losses a point see a large move at once, and no smaller size is offered', () => {
    expect(sizeThatSees(0.06, 0.3, 6, 0.8, 85)).toBe(85);
  });

  it('a move too small for any size is said to be so', () => {
    expect(sizeThatSees(0.05, 0.05 * 1.00001, 3, 0.8, 100)).toBeNull();
  });
});
