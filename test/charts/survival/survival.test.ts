import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { kaplanMeier, survivalAt } from '../../../src/charts/survival/kaplanMeier.ts';
import { logRank } from '../../../src/charts/survival/logRank.ts';
import { nelsonAalen } from '../../../src/charts/survival/nelsonAalen.ts';
import { restrictedMean } from '../../../src/charts/survival/restrictedMean.ts';
import { riskSets } from '../../../src/charts/survival/riskSets.ts';
import { survivalInterval } from '../../../src/charts/survival/survivalInterval.ts';
import { survivalQuantile } from '../../../src/charts/survival/survivalQuantile.ts';
import type { Departures } from '../../../src/charts/survival/types.ts';

const departures = fc.array(
  fc.record({ time: fc.integer({ min: 1, max: 40 }), lost: fc.nat(30), censored: fc.nat(30) }),
  { minLength: 1, maxLength: 60 },
);
const shuffledPair = departures.chain((list) =>
  fc.tuple(fc.constant(list), fc.shuffledSubarray(list, { minLength: list.length, maxLength: list.length })),
);

/** The product over single accounts, one by one, without counting anything up first. */
function naiveSurvival(list: readonly Departures[], time: number): number {
  const lives = list.flatMap((entry) => [
    ...new Array(entry.lost).fill(0).map(() => ({ at: entry.time, lost: true })),
    ...new Array(entry.censored).fill(0).map(() => ({ at: entry.time, lost: false })),
  ]);
  let survival = 1;
  for (let at = 1; at <= time; at++) {
    const there = lives.filter((life) => life.at >= at).length;
    if (there > 0) survival *= 1 - lives.filter((life) => life.at === at && life.lost).length / there;
  }
  return survival;
}

describe('kaplanMeier', () => {
  it('never rises, stays in [0, 1], and has finite errors', () => {
    fc.assert(
      fc.property(departures, (list) => {
        let before = 1;
        for (const { survival, standardError, lost, atRisk } of kaplanMeier(riskSets(list))) {
          expect(survival).toBeLessThanOrEqual(before);
          expect(survival).toBeGreaterThanOrEqual(0);
          expect(lost).toBeLessThanOrEqual(atRisk);
          if (survival > 0) expect(Number.isFinite(standardError)).toBe(true);
          else expect(standardError).toBeNull();
          before = survival;
        }
      }),
    );
  });

  it('does not depend on the order of the rows', () => {
    fc.assert(
      fc.property(shuffledPair, ([list, shuffled]) => {
        expect(riskSets(shuffled)).toEqual(riskSets(list));
      }),
    );
  });

  it('agrees with the product taken account by account', () => {
    fc.assert(
      fc.property(departures, fc.integer({ min: 0, max: 45 }), (list, time) => {
        expect(survivalAt(kaplanMeier(riskSets(list)), time)).toBeCloseTo(naiveSurvival(list, time), 10);
      }),
    );
  });

  it('without censoring is the plain share still there, with the binomial error', () => {
    fc.assert(
      fc.property(departures, (list) => {
        const uncensored = list.map(({ time, lost }) => ({ time, lost, censored: 0 }));
        const all = uncensored.reduce((sum, { lost }) => sum + lost, 0);
        for (const { time, survival, standardError } of kaplanMeier(riskSets(uncensored))) {
          const there = uncensored.reduce((sum, entry) => (entry.time > time ? sum + entry.lost : sum), 0);
          expect(survival).toBeCloseTo(there / all, 10);
          if (there > 0) expect(standardError).toBeCloseTo(Math.sqrt((survival * (1 - survival)) / all), 10);
        }
      }),
    );
  });

  it('nobody lost: no steps, nothing to say', () => {
    const steps = kaplanMeier(riskSets([{ time: 5, lost: 0, censored: 3 }]));
    expect(steps).toEqual([]);
    expect(survivalQuantile(steps, 0.5)).toEqual({ time: null, low: null, high: null });
    expect(restrictedMean(steps, 12)).toEqual({ mean: 12, standardError: 0 });
  });
});

describe('intervals, quantiles and areas', () => {
  it('every interval holds its survival and stays in [0, 1]', () => {
    fc.assert(
      fc.property(departures, fc.constantFrom('plain' as const, 'log' as const, 'log-log' as const), (list, scale) => {
        for (const step of kaplanMeier(riskSets(list))) {
          const interval = survivalInterval(step, scale);
          if (interval === null) expect(step.survival).toBe(0);
          else {
            expect(interval.low).toBeGreaterThanOrEqual(0);
            expect(interval.low).toBeLessThanOrEqual(step.survival);
            expect(interval.high).toBeGreaterThanOrEqual(step.survival);
            expect(interval.high).toBeLessThanOrEqual(1);
          }
        }
      }),
    );
  });

  it('a larger share takes at least as long, and limits lie on their own sides', () => {
    fc.assert(
      fc.property(departures, fc.double({ min: 0.05, max: 0.9, noNaN: true }), (list, share) => {
        const steps = kaplanMeier(riskSets(list));
        const { time, low, high } = survivalQuantile(steps, share);
        const later = survivalQuantile(steps, share + 0.05).time;
        if (later !== null) expect(time!).toBeLessThanOrEqual(later);
        if (time !== null) expect(low!).toBeLessThanOrEqual(time);
        if (high !== null) expect(high).toBeGreaterThanOrEqual(time!);
      }),
    );
  });

  it('the restricted mean is the sum of the survival at whole ages, and never more than the horizon', () => {
    fc.assert(
      fc.property(departures, fc.integer({ min: 1, max: 50 }), (list, horizon) => {
        const steps = kaplanMeier(riskSets(list));
        const { mean } = restrictedMean(steps, horizon);
        let sum = 0;
        for (let at = 0; at < horizon; at++) sum += survivalAt(steps, at);
        expect(mean).toBeCloseTo(sum, 9);
        expect(mean).toBeLessThanOrEqual(horizon);
      }),
    );
  });

  it('the cumulative hazard is never above minus the log of the survival', () => {
    fc.assert(
      fc.property(departures, (list) => {
        const sets = riskSets(list);
        const steps = kaplanMeier(sets);
        nelsonAalen(sets).forEach(({ hazard, standardError }, i) => {
          expect(standardError).toBeGreaterThan(0);
          if (steps[i]!.survival > 0) expect(hazard).toBeLessThanOrEqual(-Math.log(steps[i]!.survival) + 1e-9);
        });
      }),
    );
  });
});

describe('logRank', () => {
  const groups = fc.array(departures, { minLength: 2, maxLength: 5 });

  it('observed and expected add up to the same, and the result is finite', () => {
    fc.assert(
      fc.property(groups, (list) => {
        const result = logRank(list);
        if (result === null) return;
        const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0);
        expect(sum(result.observed)).toBeCloseTo(sum(result.expected), 8);
        expect(result.chiSquare).toBeGreaterThanOrEqual(0);
        expect(result.pValue).toBeGreaterThanOrEqual(0);
        expect(result.pValue).toBeLessThanOrEqual(1);
        expect(result.degreesOfFreedom).toBeLessThan(list.length);
        for (const row of result.variance) expect(Math.abs(sum(row))).toBeLessThan(1e-8 * (1 + sum(result.observed)));
      }),
    );
  });

  it('does not depend on the order of groups or rows', () => {
    fc.assert(
      fc.property(groups, (list) => {
        const there = logRank(list);
        const back = logRank(list.map((group) => [...group].reverse()).reverse());
        if (there === null) expect(back).toBeNull();
        else {
          expect(back!.chiSquare).toBeCloseTo(there.chiSquare, 6);
          expect(back!.degreesOfFreedom).toBe(there.degreesOfFreedom);
        }
      }),
    );
  });

  it('groups that are copies of each other do not differ', () => {
    fc.assert(
      fc.property(departures, (list) => {
        const result = logRank([list, list]);
        if (result !== null) expect(result.chiSquare).toBeLessThan(1e-9);
      }),
    );
  });

  it('two groups: the chi-square is (observed - expected)^2 / variance, whichever group is taken', () => {
    fc.assert(
      fc.property(departures, departures, (one, other) => {
        const result = logRank([one, other]);
        if (result === null) return;
        for (const i of [0, 1]) {
          const excess = result.observed[i]! - result.expected[i]!;
          expect(excess ** 2 / result.variance[i]![i]!).toBeCloseTo(result.chiSquare, 6);
        }
      }),
    );
  });

  it('says nothing when nobody was lost, when there is one group, or when no two were at risk together', () => {
    const kept = [{ time: 3, lost: 0, censored: 5 }];
    expect(logRank([kept, kept])).toBeNull();
    expect(logRank([[{ time: 3, lost: 2, censored: 5 }]])).toBeNull();
    expect(logRank([[{ time: 3, lost: 2, censored: 5 }], [{ time: 1, lost: 0, censored: 4 }]])).toBeNull();
  });

  it('a group without accounts changes nothing', () => {
    const one = [{ time: 3, lost: 2, censored: 5 }];
    const other = [{ time: 3, lost: 6, censored: 2 }];
    expect(logRank([one, other, []])!.chiSquare).toBeCloseTo(logRank([one, other])!.chiSquare, 12);
    expect(logRank([one, other, []])!.degreesOfFreedom).toBe(1);
  });
});
