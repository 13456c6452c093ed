import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { autocorrelation } from '../../src/charts/checks/autocorrelation.ts';
import { dispersion } from '../../src/charts/checks/dispersion.ts';
import { homogeneity } from '../../src/charts/checks/homogeneity.ts';
import { steadiness } from '../../src/charts/checks/steadiness.ts';
import { type Stratum, stratifiedDifference } from '../../src/charts/checks/stratifiedDifference.ts';
import { binomialSampler } from '../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import type { SubgroupCount } from '../../src/charts/types.ts';
import { history, subgroup } from './arbitraries.ts';

const stratum: fc.Arbitrary<Stratum> = fc.record({ before: subgroup(), after: subgroup() });
const close = (a: number, b: number): void => expect(Math.abs(a - b)).toBeLessThan(1e-9 * (1 + Math.abs(b)));

describe('stratified difference', () => {
  test('with one group it is the plain difference, and its chi-square the pooled one times (N - 1) / N', () => {
    fc.assert(
      fc.property(stratum, ({ before, after }) => {
        const found = stratifiedDifference([Object.freeze({ before: Object.freeze(before), after })]);
        const n = before.accounts + after.accounts;
        const lost = before.lost + after.lost;
        if (lost === 0 || lost === n) {
          expect(found).toBeNull();
          return;
        }
        const difference = after.lost / after.accounts - before.lost / before.accounts;
        close(found!.difference, difference);
        const p = lost / n;
        const pooled = difference ** 2 / (p * (1 - p) * (1 / before.accounts + 1 / after.accounts));
        close(found!.chiSquare, (pooled * (n - 1)) / n);
      }),
    );
  });

  test('does not depend on the order of the groups, and turns round with before and after', () => {
    fc.assert(
      fc.property(fc.array(stratum, { minLength: 2, maxLength: 6 }), (strata) => {
        const one = stratifiedDifference(Object.freeze(strata));
        const turned = stratifiedDifference([...strata].reverse());
        const swapped = stratifiedDifference(strata.map(({ before, after }) => ({ before: after, after: before })));
        if (!one) {
          expect([turned, swapped]).toEqual([null, null]);
          return;
        }
        close(turned!.difference, one.difference);
        close(turned!.chiSquare, one.chiSquare);
        close(swapped!.difference, -one.difference);
        close(swapped!.chiSquare, one.chiSquare);
      }),
    );
  });

  test('groups on one side only count for nothing; without any group on both sides there is no answer', () => {
    const both: Stratum = { before: { accounts: 100, lost: 10 }, after: { accounts: 80, lost: 12 } };
    const gone: Stratum = { before: { accounts: 50, lost: 25 }, after: { accounts: 0, lost: 0 } };
    expect(stratifiedDifference([both, gone])).toEqual(stratifiedDifference([both]));
    expect(stratifiedDifference([gone])).toBeNull();
    expect(stratifiedDifference([])).toBeNull();
  });

  test('a mix that moves between steady groups leaves no difference', () => {
    const found = stratifiedDifference([
      { before: { accounts: 900, lost: 45 }, after: { accounts: 300, lost: 15 } },
      { before: { accounts: 100, lost: 20 }, after: { accounts: 700, lost: 140 } },
    ]);
    close(found!.difference, 0);
    close(found!.chiSquare, 0);
  });
});

/** Every table with these sizes and this many lost, by its number of ways: the chance of one at most as likely as the one seen. */
function exactPValue(groups: readonly SubgroupCount[]): number {
  const lost = groups.reduce((sum, group) => sum + group.lost, 0);
  const ways = (n: number, k: number): number => {
    let product = 1;
    for (let i = 1; i <= k; i++) product *= (n - k + i) / i;
    return product;
  };
  const observed = groups.reduce((product, group) => product * ways(group.accounts, group.lost), 1);
  let all = 0;
  let unlikely = 0;
  const visit = (i: number, left: number, weight: number): void => {
    if (i === groups.length) {
      if (left !== 0) return;
      all += weight;
      if (weight <= observed * (1 + 1e-7)) unlikely += weight;
      return;
    }
    const { accounts: n } = groups[i]!;
    for (let d = 0; d <= Math.min(n, left); d++) visit(i + 1, left - d, weight * ways(n, d));
  };
  visit(0, lost, 1);
  return unlikely / all;
}

describe('homogeneity', () => {
  test('of sparse groups is the exact conditional chance', () => {
    fc.assert(
      fc.property(fc.array(subgroup(12), { minLength: 2, maxLength: 4 }), (groups) => {
        const found = homogeneity(Object.freeze(groups));
        const accounts = groups.reduce((sum, group) => sum + group.accounts, 0);
        const lost = groups.reduce((sum, group) => sum + group.lost, 0);
        if (lost === 0 || lost === accounts) {
          expect(found).toBeNull();
          return;
        }
        if (found!.method === 'chi-square') return;
        expect(found!.method).toBe('exact');
        close(found!.pValue, exactPValue(groups));
      }),
      { numRuns: 60 },
    );
  });

  test('is sparse by expected counts under 5, of the lost or of the kept', () => {
    const method = (lost: readonly number[]): string | undefined =>
      homogeneity(lost.map((d) => ({ accounts: 50, lost: d })))?.method;
    expect(method([5, 5])).toBe('chi-square');
    expect(method([5, 4])).toBe('exact');
    expect(method([45, 45])).toBe('chi-square');
    expect(method([45, 46])).toBe('exact');
  });

  test('without two groups that have accounts, or with nobody lost, there is nothing to compare', () => {
    expect(homogeneity([])).toBeNull();
    expect(homogeneity([{ accounts: 5, lost: 2 }])).toBeNull();
    expect(
      homogeneity([
        { accounts: 5, lost: 2 },
        { accounts: 0, lost: 0 },
      ]),
    ).toBeNull();
    expect(
      homogeneity([
        { accounts: 5, lost: 0 },
        { accounts: 9, lost: 0 },
      ]),
    ).toBeNull();
  });
});

/** Histories of one rate, by seed. */
function steady(seed: number, points: number, size: number, rate: number): SubgroupCount[] {
  const uniform = seededUniform(seed);
  const sampler = binomialSampler(size, rate);
  return Array.from({ length: points }, () => ({ accounts: size, lost: sampler.draw(uniform) }));
}

describe('dispersion', () => {
  test('of one rate is called unlikely about as often as stated: 1 in 100 at 0.01', () => {
    const histories = 3_000;
    let called = 0;
    for (let seed = 0; seed < histories; seed++) {
      if (dispersion(steady(seed, 25, 85, 0.06))!.pValue < 0.01) called++;
    }
    expect(called / histories).toBeLessThan(0.01 + 4 * Math.sqrt(0.0099 / histories));
    expect(called).toBeGreaterThan(0);
  });

  test('of two stretches with a rate each is their sum, and a step between them is no spread', () => {
    const low = steady(1, 15, 100, 0.05);
    const high = steady(2, 15, 100, 0.3);
    const [a, b, both] = [dispersion(low)!, dispersion(high)!, dispersion(low, high)!];
    close(both.chiSquare, a.chiSquare + b.chiSquare);
    expect(both.degreesOfFreedom).toBe(28);
    expect(both.pValue).toBeGreaterThan(0.01);
    expect(dispersion([...low, ...high])!.pValue).toBeLessThan(1e-6);
  });

  test('one point, or nobody lost, tells nothing', () => {
    expect(dispersion()).toBeNull();
    expect(dispersion([{ accounts: 9, lost: 3 }], [])).toBeNull();
    expect(dispersion(steady(3, 5, 10, 0), steady(3, 5, 10, 1))).toBeNull();
  });
});

describe('steadiness', () => {
  test('finds the split after which a rate doubles, and calls it unlikely', () => {
    const found = steadiness([...steady(4, 15, 200, 0.05), ...steady(5, 10, 200, 0.15)])!;
    expect(found.splitAfter).toBe(15);
    expect(found.pValue).toBe(1 / 1_000);
    // Points that vary fifty times as much as the binomial allows would make the same split unremarkable.
    expect(steadiness([...steady(4, 15, 200, 0.05), ...steady(5, 10, 200, 0.15)], 50)!.pValue).toBeGreaterThan(0.2);
  });

  test('of one rate has a p value spread evenly from 0 to 1', () => {
    const histories = 150;
    const values = Array.from({ length: histories }, (_, i) => steadiness(steady(50 + i, 25, 85, 0.06))!.pValue);
    const mean = values.reduce((sum, value) => sum + value, 0) / histories;
    expect(Math.abs(mean - 0.5)).toBeLessThan(4 / Math.sqrt(12 * histories));
    expect(values.filter((value) => value < 0.1).length / histories).toBeLessThan(
      0.1 + 4 * Math.sqrt(0.09 / histories),
    );
  });

  test('of fewer than four points, or of nobody lost, is not told', () => {
    expect(steadiness(steady(6, 3, 50, 0.3))).toBeNull();
    expect(steadiness(steady(6, 9, 50, 0))).toBeNull();
    expect(steadiness(steady(6, 9, 50, 1))).toBeNull();
  });

  test('leaves its points alone, and its split lies inside them', () => {
    fc.assert(
      fc.property(history(4, 12, 60), (counts) => {
        const found = steadiness(counts);
        if (!found) return;
        expect(found.splitAfter).toBeGreaterThanOrEqual(1);
        expect(found.splitAfter).toBeLessThan(counts.length);
        expect(found.pValue).toBeGreaterThan(0);
        expect(found.pValue).toBeLessThanOrEqual(1);
      }),
      { numRuns: 40 },
    );
  });
});

describe('autocorrelation', () => {
  test('lies within -1 and 1, does not change with unit or origin, and is null when nothing varies', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 0, max: 50 }), { minLength: 3, maxLength: 40 }),
        fc.integer({ min: -9, max: 9 }),
        (values, shift) => {
          const found = autocorrelation(Object.freeze(values));
          if (new Set(values).size === 1) {
            expect(found).toBeNull();
            return;
          }
          expect(Math.abs(found!.r1)).toBeLessThanOrEqual(1);
          close(autocorrelation(values.map((value) => 3 * value + shift))!.r1, found!.r1);
        },
      ),
    );
  });

  test('is strongly negative when values take turns, and positive when they drift', () => {
    expect(autocorrelation([1, 9, 1, 9, 1, 9, 1, 9])!.r1).toBeCloseTo(-7 / 8, 12);
    expect(autocorrelation([1, 2, 3, 4, 5, 6, 7, 8])!.r1).toBeGreaterThan(0.5);
    expect(autocorrelation([1, 2])).toBeNull();
  });
});
