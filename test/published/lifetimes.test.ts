import { describe, expect, test } from 'vitest';
import { compounded } from '../../src/charts/lifetimes/compounding.ts';
import {
  geometricLifetime,
  geometricRestrictedMean,
  geometricSurvival,
} from '../../src/charts/lifetimes/geometricLifetime.ts';
import { measuredLifetime } from '../../src/charts/lifetimes/measuredLifetime.ts';
import { checkValue, checkValues } from './checkValues.ts';

const relative = (got: number, wanted: number, tolerance: number): void =>
  expect(Math.abs(got / wanted - 1), `${got} for ${wanted}`).toBeLessThanOrEqual(tolerance);

interface Closed {
  mean: number;
  mean_after: number;
  sd: number;
  median: number;
  surv: Record<string, number>;
  rmst12: number;
  rmst24: number;
}

describe('lifetimes at a constant hazard', () => {
  const rows = checkValues<{ p: number }, Closed>('geometric-p');
  test('all six hazards are here', () => expect(rows).toHaveLength(6));
  for (const { inputs, expected, tolerance, cited } of rows) {
    test(`p = ${inputs.p}: ${cited}`, () => {
      const lifetime = geometricLifetime(inputs.p);
      relative(lifetime.mean, expected.mean, tolerance);
      relative(lifetime.meanCompleted, expected.mean_after, tolerance);
      relative(lifetime.standardDeviation, expected.sd, tolerance);
      expect(lifetime.median).toBe(expected.median);
      for (const [k, share] of Object.entries(expected.surv))
        relative(geometricSurvival(inputs.p, Number(k)), share, tolerance);
      relative(geometricRestrictedMean(inputs.p, 12), expected.rmst12, tolerance);
      relative(geometricRestrictedMean(inputs.p, 24), expected.rmst24, tolerance);
    });

    test(`p = ${inputs.p}, measured month by month, gives the same: ${cited}`, () => {
      const sets = Array.from({ length: 24 }, (_, i) => ({ time: i + 1, atRisk: 10_000, lost: inputs.p * 10_000 }));
      const { restricted, total, survival } = measuredLifetime(sets);
      relative(restricted.estimate, expected.rmst24, 1e-12);
      relative(measuredLifetime(sets.slice(0, 12)).restricted.estimate, expected.rmst12, 1e-12);
      relative(total!.estimate, expected.mean, 1e-12);
      relative(survival[12]!, expected.surv['12']!, 1e-12);
    });
  }
});

test('3 % a month is 30.6 % a year, and back', () => {
  const { inputs, expected, tolerance } = checkValue<{ monthly: number }, { yearly: number }>('compound-hazard');
  relative(compounded(inputs.monthly, 12), expected.yearly, tolerance);
  relative(compounded(expected.yearly, 1 / 12), inputs.monthly, 1e-12);
});
