import fc from 'fast-check';
import { gammaln } from 'simple-statistics';
import { describe, expect, test } from 'vitest';
import { againstTarget, mostLost } from '../../../src/charts/predict/againstTarget.ts';
import { centralCounts, chanceOfAtMost, outlook } from '../../../src/charts/predict/nextPoints.ts';

const logBeta = (a: number, b: number): number => gammaln(a) + gammaln(b) - gammaln(a + b);

/** Beta-binomial chance from its formula, term by term: a second way, slow and plain. */
function betaBinomial(k: number, n: number, a: number, b: number): number {
  const choose = gammaln(n + 1) - gammaln(k + 1) - gammaln(n - k + 1);
  return Math.exp(choose + logBeta(k + a, n - k + b) - logBeta(a, b));
}

describe('what the next points will lose', () => {
  test('is the beta-binomial from the posterior at Jeffreys’ prior', () => {
    for (const [lost, accounts, next] of [
      [41, 1000, 85],
      [0, 300, 40],
      [20, 20, 12],
      [3, 29, 100],
    ] as const) {
      const { first, chances } = outlook({ lost, accounts }).lostAmong(next);
      for (const [i, chance] of chances.entries())
        expect(Math.abs(chance - betaBinomial(first + i, next, lost + 0.5, accounts - lost + 0.5))).toBeLessThan(1e-9);
    }
  });

  test('the uniform posterior predicts every count alike (half a loss and half a kept account away from it)', () => {
    // Beta(1, 1) is the posterior of half a loss in one account; its beta-binomial is uniform on 0..n.
    const { chances } = outlook({ lost: 0.5, accounts: 1 }).lostAmong(9);
    for (const chance of chances) expect(chance).toBeCloseTo(0.1, 10);
  });

  test('with more points the mean strays less, with a correlation within points more', () => {
    const steady = outlook({ lost: 60, accounts: 1000 });
    const uneven = outlook({ lost: 60, accounts: 1000 }, 0.02, 2);
    const width = (one: ReturnType<typeof outlook>, points: number): number => {
      const { low, high } = centralCounts(one.lostAmong(85 * points, points), 0.05);
      return (high - low) / (85 * points);
    };
    expect(width(steady, 12)).toBeLessThan(width(steady, 3));
    expect(width(steady, 3)).toBeLessThan(width(steady, 1));
    expect(width(uneven, 1)).toBeGreaterThan(width(steady, 1));
    expect(width(uneven, 12)).toBeGreaterThan(width(steady, 12));
  });

  test('chances grow with the target and lie between 0 and 1', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 2000 }), fc.double({ min: 0, max: 1, noNaN: true }), (accounts, share) => {
        const lost = Math.round(accounts * share);
        const ahead = outlook({ lost, accounts }).lostAmong(60);
        let before = 0;
        for (let most = 0; most <= 60; most += 5) {
          const chance = chanceOfAtMost(ahead, most);
          expect(chance).toBeGreaterThanOrEqual(before);
          expect(chance).toBeLessThanOrEqual(1);
          before = chance;
        }
        expect(before).toBeGreaterThan(1 - 1e-9);
      }),
    );
  });

  test('central counts leave at most the stated chance out on either side, and one count fewer would leave out more', () => {
    const ahead = outlook({ lost: 60, accounts: 1000 }).lostAmong(85);
    const { low, high } = centralCounts(ahead, 0.05);
    expect(chanceOfAtMost(ahead, low - 1)).toBeLessThanOrEqual(0.05);
    expect(chanceOfAtMost(ahead, low)).toBeGreaterThan(0.05);
    expect(1 - chanceOfAtMost(ahead, high)).toBeLessThanOrEqual(0.05);
    expect(1 - chanceOfAtMost(ahead, high - 1)).toBeGreaterThan(0.05);
  });
});

describe('a level against a target', () => {
  test('1 of 29 against the ends of its published exact interval has a tail of 2.5 %', () => {
    // Newcombe 1998, Table I, method 5: 0.0009 to 0.1776.
    expect(againstTarget({ lost: 1, accounts: 29 }, 0.17764).soFew).toBeCloseTo(0.025, 3);
    expect(againstTarget({ lost: 1, accounts: 29 }, 0.000873).soMany).toBeCloseTo(0.025, 3);
  });

  test('the interval lies below the target exactly when so few would be a surprise, and above likewise', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 3000 }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: 0.001, max: 0.999, noNaN: true }),
        fc.constantFrom(1, 1, 1.7, 4),
        (accounts, share, target, dispersion) => {
          const lost = Math.round(accounts * share);
          const { interval, soFew, soMany } = againstTarget({ lost, accounts }, target, dispersion);
          fc.pre(Math.abs(soFew - 0.025) > 1e-6 && Math.abs(soMany - 0.025) > 1e-6);
          expect(interval.high < target).toBe(soFew < 0.025);
          expect(interval.low > target).toBe(soMany < 0.025);
          expect([soFew, soMany].every((chance) => chance >= 0 && chance <= 1)).toBe(true);
        },
      ),
    );
  });

  test('a share equal to the target meets it, in spite of how fractions are kept', () => {
    expect(mostLost(100, 0.05)).toBe(5);
    expect(mostLost(50, 0.14)).toBe(7);
    expect(mostLost(100, 0.29)).toBe(29);
    expect(mostLost(85, 0.05)).toBe(4);
    expect(mostLost(85, 1)).toBe(85);
  });
});
