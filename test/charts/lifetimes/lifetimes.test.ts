import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compounded } from '../../../src/charts/lifetimes/compounding.ts';
import { constantLifetime } from '../../../src/charts/lifetimes/constantLifetime.ts';
import { geometricLifetime, geometricRestrictedMean } from '../../../src/charts/lifetimes/geometricLifetime.ts';
import { intervalDifference } from '../../../src/charts/lifetimes/intervalDifference.ts';
import { lifetimeValue } from '../../../src/charts/lifetimes/lifetimeValue.ts';
import { measuredLifetime, tailPeriods } from '../../../src/charts/lifetimes/measuredLifetime.ts';
import { binomialSampler } from '../../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../../src/charts/random/uniform.ts';

const hazards = fc.array(
  fc.record({ atRisk: fc.integer({ min: 1, max: 5_000 }), share: fc.double({ min: 0, max: 1, noNaN: true }) }),
  {
    minLength: 1,
    maxLength: 40,
  },
);
const setsOf = (rows: readonly { atRisk: number; share: number }[]) =>
  rows.map(({ atRisk, share }, i) => ({ time: i + 1, atRisk, lost: Math.round(atRisk * share) }));

/** Hazards of a subscription: high at first and at renewals, low between. */
const RENEWALS = Array.from({ length: 30 }, (_, i) => {
  const month = i + 1;
  const hazard = month === 1 ? 0.08 : month % 12 === 0 ? 0.15 : 0.02;
  const atRisk = Math.round(4_000 * 0.96 ** i);
  return { time: month, atRisk, lost: Math.round(atRisk * hazard) };
});

describe('measuredLifetime', () => {
  it('is never NaN or infinite, and its intervals hold their estimates', () => {
    fc.assert(
      fc.property(hazards, (rows) => {
        const { restricted, total, tail, survival, horizon } = measuredLifetime(setsOf(rows));
        expect(survival).toHaveLength(horizon + 1);
        for (const interval of [restricted, total]) {
          if (interval === null) continue;
          for (const value of [interval.low, interval.estimate, interval.high])
            expect(Number.isFinite(value)).toBe(true);
          expect(interval.low).toBeLessThanOrEqual(interval.estimate);
          expect(interval.high).toBeGreaterThanOrEqual(interval.estimate);
        }
        expect(restricted.estimate).toBeLessThanOrEqual(horizon);
        if (tail && total) expect(total.estimate).toBeCloseTo(restricted.estimate + tail.periods, 8);
      }),
    );
  });

  it('a constant hazard gives 1/p, however many periods were measured', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 60 }), fc.integer({ min: 1, max: 1000 }), (periods, lost) => {
        const sets = Array.from({ length: periods }, (_, i) => ({ time: i + 1, atRisk: 1000, lost }));
        expect(measuredLifetime(sets).total!.estimate).toBeCloseTo(geometricLifetime(lost / 1000).mean, 6);
      }),
    );
  });

  it('everybody lost: no tail is needed', () => {
    const { total, restricted, tail } = measuredLifetime([
      { time: 1, atRisk: 10, lost: 4 },
      { time: 2, atRisk: 6, lost: 6 },
    ]);
    expect(tail).toBeNull();
    expect(restricted.estimate).toBeCloseTo(1.6, 12);
    expect(total!.estimate).toBeCloseTo(1.6, 12);
  });

  it('the tail pools the last year, or the later half of what was measured when a year would reach into the first months', () => {
    expect([1, 2, 7, 15, 16, 48].map(tailPeriods)).toEqual([1, 1, 4, 8, 12, 12]);
  });

  it('nobody lost lately: the restricted mean alone, no total', () => {
    const sets = [
      { time: 1, atRisk: 100, lost: 5 },
      ...[2, 3, 4, 5, 6, 7, 8].map((time) => ({ time, atRisk: 90, lost: 0 })),
    ];
    const { total, tail, restricted } = measuredLifetime(sets);
    expect(total).toBeNull();
    expect(tail).toBeNull();
    expect(restricted.estimate).toBeCloseTo(1 + 0.95 * 7, 12);
  });

  it.each([
    ['total', 'total'],
    ['restricted mean', 'restricted'],
  ] as const)('the interval of the %s is that of a parametric bootstrap on the counts', (_, part) => {
    const uniform = seededUniform(71);
    const samplers = RENEWALS.map(({ atRisk, lost }) => binomialSampler(atRisk, lost / atRisk));
    const drawn = Array.from({ length: 2_000 }, () => {
      const sets = RENEWALS.map(({ time, atRisk }, i) => ({ time, atRisk, lost: samplers[i]!.draw(uniform) }));
      return measuredLifetime(sets)[part]!.estimate;
    }).sort((a, b) => a - b);
    const { estimate, low, high } = measuredLifetime(RENEWALS)[part]!;
    // 2,000 draws give a limit to about a tenth of the half width.
    expect(Math.abs(drawn[49]! - low)).toBeLessThan(0.15 * (estimate - low));
    expect(Math.abs(drawn[1949]! - high)).toBeLessThan(0.15 * (high - estimate));
  });
});

describe('intervalDifference', () => {
  it('of equal widths is that of two normal intervals', () => {
    const { estimate, low, high } = intervalDifference(
      { estimate: 14, low: 13, high: 15 },
      { estimate: 12, low: 11, high: 13 },
    );
    expect(estimate).toBe(2);
    expect(low).toBeCloseTo(2 - Math.SQRT2, 12);
    expect(high).toBeCloseTo(2 + Math.SQRT2, 12);
  });
});

describe('constantLifetime', () => {
  it('3 months at 3 % a month is 1/0.03 months', () => {
    const { mean, hazard } = constantLifetime({ lost: 87_327, accounts: 1_000_000 }, 3);
    expect(hazard.estimate).toBeCloseTo(0.03, 6);
    expect(mean.estimate).toBeCloseTo(1 / 0.03, 3);
    expect(mean.low).toBeLessThan(mean.estimate!);
    expect(mean.high).toBeGreaterThan(mean.estimate!);
  });

  it('nobody lost: a lower limit and no more; everybody lost: one period', () => {
    const none = constantLifetime({ lost: 0, accounts: 50 }, 3);
    expect(none.mean.estimate).toBeNull();
    expect(none.mean.high).toBeNull();
    expect(none.mean.low).toBeGreaterThan(30);
    const all = constantLifetime({ lost: 1, accounts: 1 }, 3);
    expect(all.mean.estimate).toBe(1);
    expect(Number.isFinite(all.mean.high)).toBe(true);
  });
});

describe('closed forms', () => {
  it('compounding over parts is compounding over the whole, and can be undone', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 0.3, noNaN: true }), fc.integer({ min: 1, max: 12 }), (loss, periods) => {
        expect(compounded(compounded(loss, periods), 1 / periods)).toBeCloseTo(loss, 9);
        expect(compounded(loss, periods)).toBeGreaterThanOrEqual(loss - 1e-12);
      }),
    );
    expect(compounded(1, 0.5)).toBe(1);
  });

  it('the restricted mean grows towards 1/p and is the number of periods when nobody leaves', () => {
    expect(geometricRestrictedMean(0, 12)).toBe(12);
    expect(geometricRestrictedMean(0.2, 500)).toBeCloseTo(5, 10);
    expect(geometricLifetime(1)).toEqual({ mean: 1, meanCompleted: 0, standardDeviation: 0, median: 1 });
  });
});

describe('lifetimeValue', () => {
  const lifetime = { estimate: 20, low: 16, high: 25 };

  it('with an amount known exactly, the interval is that of the lifetime', () => {
    const { estimate, low, high } = lifetimeValue({ mean: 10, standardError: 0 }, lifetime);
    expect(estimate).toBe(200);
    expect(low).toBeCloseTo(160, 9);
    expect(high).toBeCloseTo(250, 9);
  });

  it('an uncertain amount widens it', () => {
    const value = lifetimeValue({ mean: 10, standardError: 1 }, lifetime);
    expect(value.low).toBeLessThan(160);
    expect(value.high).toBeGreaterThan(250);
  });
});
