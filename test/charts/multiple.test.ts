import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { bonferroni, holm } from '../../src/charts/multiple/stepDown.ts';
import { benjaminiHochberg, benjaminiYekutieli, hochberg } from '../../src/charts/multiple/stepUp.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';

const ALL = { bonferroni, holm, hochberg, benjaminiHochberg, benjaminiYekutieli };
const family = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { maxLength: 25 });

/** The procedure as its paper states it: the largest k with p(k) <= k q / m, and everything up to it. */
function rejectedByDefinition(p: readonly number[], level: number): boolean[] {
  const sorted = p.toSorted((a, b) => a - b);
  const k = sorted.findLastIndex((value, i) => value * (p.length / (i + 1)) <= level);
  return p.map((value) => k >= 0 && value <= sorted[k]!);
}

describe('adjusted p values', () => {
  test('never lie below the p value or above 1, keep the order of the p values, and do not depend on the order they come in', () => {
    fc.assert(
      fc.property(family, (p) => {
        for (const procedure of Object.values(ALL)) {
          const { adjusted } = procedure(Object.freeze(p), 0.05);
          expect(adjusted).toHaveLength(p.length);
          const turned = procedure(p.toReversed(), 0.05).adjusted.toReversed();
          for (const [i, value] of adjusted.entries()) {
            expect(value).toBeGreaterThanOrEqual(p[i]!);
            expect(value).toBeLessThanOrEqual(1);
            expect(turned[i]).toBeCloseTo(value, 12);
            for (const [j, other] of adjusted.entries()) if (p[i]! < p[j]!) expect(value).toBeLessThanOrEqual(other);
          }
        }
      }),
    );
  });

  test('a procedure that promises more rejects no more: Bonferroni, Holm, Hochberg, Benjamini-Hochberg', () => {
    fc.assert(
      fc.property(family, (p) => {
        const order = [bonferroni, holm, hochberg, benjaminiHochberg].map((procedure) => procedure(p, 0.05).adjusted);
        for (const [stricter, laxer] of [order.slice(0, 2), order.slice(1, 3), order.slice(2, 4)])
          for (const [i, value] of laxer!.entries()) expect(value).toBeLessThanOrEqual(stricter![i]! + 1e-12);
      }),
    );
  });

  test('Benjamini-Hochberg rejects what its definition rejects', () => {
    fc.assert(
      fc.property(family, fc.constantFrom(0.01, 0.05, 0.2), (p, level) => {
        expect(benjaminiHochberg(p, level).rejected).toEqual(rejectedByDefinition(p, level));
      }),
    );
  });

  test('of one test the p value stays as it is, and of none there is nothing', () => {
    for (const procedure of Object.values(ALL)) {
      expect(procedure([0.04], 0.05)).toEqual({ adjusted: [0.04], rejected: [true] });
      expect(procedure([], 0.05)).toEqual({ adjusted: [], rejected: [] });
    }
  });

  test('with 3 real findings among 12, the false part of what is found stays at 5 % of 9/12 on average', () => {
    const uniform = seededUniform(12);
    const families = 4_000;
    let sum = 0;
    for (let i = 0; i < families; i++) {
      const p = Array.from({ length: 12 }, (_, k) => (k < 3 ? uniform() ** 6 / 20 : uniform()));
      const { rejected } = benjaminiHochberg(p, 0.05);
      const found = rejected.filter(Boolean).length;
      if (found > 0) sum += rejected.slice(3).filter(Boolean).length / found;
    }
    expect(Math.abs(sum / families - 0.05 * 0.75)).toBeLessThan(4 * Math.sqrt(0.0375 / 4 / families));
  });
});
