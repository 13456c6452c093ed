import { describe, expect, test } from 'vitest';
import { cusumLimitFor, cusumRunLength, twoSidedCusumRunLength } from '../../src/charts/runLength/cusumRunLength.ts';
import { ewmaRunLength } from '../../src/charts/runLength/ewmaRunLength.ts';
import { likelihoodSteps, movedRateFor, nearFraction } from '../../src/charts/sums/bernoulliSteps.ts';
import { accountsToAlarm, watchSteps } from '../../src/charts/sums/watchSum.ts';
import { tabularCusum } from '../support/tabularCusum.ts';
import { checkValue, checkValues } from './checkValues.ts';

describe('average run length of an EWMA of normal values', () => {
  // Found by their beginning: ewma-arl-0.4-3.054, 0.25-2.998, 0.2-2.962, 0.1-2.814, 0.05-2.615, 0.5-3.071, 0.03-2.437, 0.1-2.7.
  const tables = checkValues<{ lam: number; L: number; shifts: number[] }, number[]>('ewma-arl-').filter(
    ({ expected }) => Array.isArray(expected),
  );
  test('eight tables are there to compare with', () => expect(tables).toHaveLength(8));
  for (const { id, inputs, expected, tolerance, cited } of tables) {
    test(`${id} at eleven shifts: ${cited}`, () => {
      inputs.shifts.forEach((shift, i) => {
        expect(Math.abs(ewmaRunLength(inputs.lam, inputs.L, shift) - expected[i]!)).toBeLessThan(tolerance);
      });
    });
  }

  const one = checkValue<{ lam: number; L: number; shift: number }, number>('ewma-arl-0.25-3-shift1');
  test(`to nine digits: ${one.cited}`, () => {
    const { lam, L, shift } = one.inputs;
    expect(Math.abs(ewmaRunLength(lam, L, shift) - one.expected)).toBeLessThan(one.tolerance);
  });
});

describe('average run length of a CUSUM of normal values', () => {
  for (const id of ['cusum2-h4', 'cusum2-h5']) {
    const { inputs, expected, tolerance, cited } = checkValue<{ k: number; h: number; shifts: number[] }, number[]>(id);
    test(`two-sided, limit ${inputs.h}, at eleven shifts: ${cited}`, () => {
      inputs.shifts.forEach((shift, i) => {
        expect(Math.abs(twoSidedCusumRunLength(inputs.k, inputs.h, shift) - expected[i]!)).toBeLessThan(tolerance);
      });
    });
  }

  const quiet = checkValue<{ k: number; h: number[] }, number[]>('cusum1-arl0');
  test(`one-sided with nothing changed: ${quiet.cited}`, () => {
    quiet.inputs.h.forEach((h, i) => {
      expect(Math.abs(cusumRunLength(quiet.inputs.k, h) - quiet.expected[i]!)).toBeLessThan(quiet.tolerance);
    });
  });

  for (const id of ['cusum1-be-shift', 'cusum1-k25h8']) {
    const { inputs, expected, tolerance, cited } = checkValue<{ k: number; h: number; shift: number }, number>(id);
    test(`one-sided, reference ${inputs.k}, limit ${inputs.h}, shift ${inputs.shift}: ${cited}`, () => {
      expect(Math.abs(cusumRunLength(inputs.k, inputs.h, inputs.shift) - expected)).toBeLessThan(tolerance);
    });
  }

  const table = checkValue<{ k: number[] }, number[]>('cusum-hk370');
  test(`the limits that give 370 both ways together: ${table.cited}`, () => {
    table.inputs.k.forEach((k, i) => {
      // The run length of the p chart with 3 sigma limits on normal values, 370.4, both ways together: 740.8 for one.
      expect(Math.abs(cusumLimitFor(k, 2 * 370.4) - table.expected[i]!)).toBeLessThan(table.tolerance);
    });
  });
});

describe('a worked series', () => {
  interface Series {
    x: number[];
    mu0: number;
    sigma: number;
    k: number;
    h: number;
  }
  const { inputs, expected, cited } = checkValue<
    Series,
    { rows: number[][]; first_signal: number; mean_estimate: number }
  >('cusum-series');
  test(`both sums, how long they have been above zero, the first flag and the new mean: ${cited}`, () => {
    const { x, mu0, sigma, k, h } = inputs;
    const { steps, first } = tabularCusum(Object.freeze(x), mu0, sigma, k, h);
    steps.forEach(({ up, upFor, down, downFor }, i) => {
      const [wantUp, wantUpFor, wantDown, wantDownFor] = expected.rows[i]!;
      expect(up).toBeCloseTo(wantUp!, 9);
      expect(upFor).toBe(wantUpFor);
      expect(down).toBeCloseTo(wantDown!, 9);
      expect(downFor).toBe(wantDownFor);
    });
    expect(first?.point).toBe(expected.first_signal);
    expect(first?.side).toBe('above');
    expect(first?.estimate).toBeCloseTo(expected.mean_estimate, 6);
  });
});

describe('the Bernoulli CUSUM', () => {
  interface Published {
    r1: number;
    r2: number;
    gamma: number;
    one_over_gamma: number;
    m: number;
    p1_adjusted: number;
    r1_adj: number;
    r2_adj: number;
    anos: Record<string, { H: number; anos_p0: number; anos_p1: number; cda_p0: number }>;
  }
  // Found by their beginning: bern-cusum-0.01-0.02, 0.01-0.025, 0.05-0.1, 0.02-0.04, 0.1-0.15.
  for (const { id, inputs, expected, cited } of checkValues<{ p0: number; p1: number; h: number[] }, Published>(
    'bern-cusum-',
  )) {
    const { p0, p1 } = inputs;
    test(`${id}: steps and their rounding: ${cited}`, () => {
      const { r1, r2, gamma } = likelihoodSteps(p0, p1);
      expect(r1).toBeCloseTo(expected.r1, 8);
      expect(r2).toBeCloseTo(expected.r2, 8);
      expect(gamma).toBeCloseTo(expected.gamma, 8);
      expect(1 / gamma).toBeCloseTo(expected.one_over_gamma, 7);
      expect(watchSteps(p0, p1).gamma).toEqual({ numerator: 1, denominator: expected.m });
      expect(nearFraction(gamma, 0.1 * (gamma - p0))).toEqual({ numerator: 1, denominator: expected.m });
      const moved = movedRateFor(p0, 1 / expected.m);
      expect(moved).toBeCloseTo(expected.p1_adjusted, 8);
      expect(likelihoodSteps(p0, moved).r1).toBeCloseTo(expected.r1_adj, 8);
      expect(likelihoodSteps(p0, moved).r2).toBeCloseTo(expected.r2_adj, 8);
    });

    test(`${id}: accounts to an alarm, before and after the move: ${cited}`, () => {
      const steps = watchSteps(p0, p1);
      for (const [h, { H, anos_p0, anos_p1, cda_p0 }] of Object.entries(expected.anos)) {
        expect(Number(h) * steps.gamma.denominator).toBe(H);
        const sum = { ...steps, limit: H, start: 0 };
        expect(accountsToAlarm(sum, p0)).toBeCloseTo(anos_p0, 5);
        expect(accountsToAlarm(sum, p1)).toBeCloseTo(anos_p1, 5);
        expect(correctedDiffusion(p0, Number(h), expected.r1_adj, expected.r2_adj)).toBeCloseTo(cda_p0, 0);
      }
    });
  }

  /** Reynolds and Stoumbos' approximation, another way to the same figure: within a tenth of it, closer as the limit grows. */
  function correctedDiffusion(p: number, h: number, r1: number, r2: number): number {
    const l = Math.log(p);
    const epsilon =
      p >= 0.01
        ? 0.41 - 0.0842 * l - 0.0391 * l ** 3 - 0.00376 * l ** 4 - 0.000008 * l ** 7
        : (Math.sqrt((1 - p) / p) - Math.sqrt(p / (1 - p))) / 3;
    const corrected = (h + epsilon * Math.sqrt(p * (1 - p))) * r2;
    return (Math.exp(corrected) - corrected - 1) / Math.abs(r2 * p - r1);
  }
});
