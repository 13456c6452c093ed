import normalQuantile from '@stdlib/stats-base-dists-normal-quantile';
import { describe, expect, test } from 'vitest';
import { clopperPearsonInterval } from '../../src/charts/intervals/clopperPearson.ts';
import { newcombeInterval } from '../../src/charts/intervals/newcombe.ts';
import { wilsonInterval, Z_95 } from '../../src/charts/intervals/wilson.ts';
import {
  jeffreys,
  likelihoodRatio,
  type Method,
  midP,
  newcombeCorrected,
  wald,
  waldCorrected,
  wilsonCorrected,
} from '../support/proportionIntervals.ts';
import { checkValues } from './checkValues.ts';

test('the 95 % quantile is the normal distribution’s', () => {
  expect(Math.abs(Z_95 - normalQuantile(0.975, 0, 1))).toBeLessThan(1e-14);
});

describe('Wilson interval, method 3', () => {
  for (const entry of checkValues<{ x: number; n: number }, [number, number]>('ci-wilson-')) {
    test(`${entry.inputs.x} of ${entry.inputs.n}: ${entry.cited}`, () => {
      const { estimate, low, high } = wilsonInterval(entry.inputs.x, entry.inputs.n);
      expect(estimate).toBe(entry.inputs.x / entry.inputs.n);
      expect(Math.abs(low - entry.expected[0])).toBeLessThanOrEqual(entry.tolerance);
      expect(Math.abs(high - entry.expected[1])).toBeLessThanOrEqual(entry.tolerance);
    });
  }
});

describe('Newcombe interval for a difference, method 10', () => {
  const rows = checkValues<{ x1: number; n1: number; x2: number; n2: number }, [number, number, number]>('newcombe10-');
  test('all eight published rows are here', () => expect(rows).toHaveLength(8));
  for (const { inputs, expected, tolerance, cited } of rows) {
    test(`${inputs.x1}/${inputs.n1} - ${inputs.x2}/${inputs.n2}: ${cited}`, () => {
      const interval = newcombeInterval(
        { lost: inputs.x1, accounts: inputs.n1 },
        { lost: inputs.x2, accounts: inputs.n2 },
      );
      [interval.estimate, interval.low, interval.high].forEach((value, i) => {
        expect(Math.abs(value - expected[i]!)).toBeLessThanOrEqual(tolerance);
      });
    });
  }
});

const exact: Method = (lost, accounts) => {
  const { low, high } = clopperPearsonInterval(lost, accounts);
  return [low, high];
};
/** The product uses the exact one beside Wilson's; the rest checks the table it comes from, and is there to be compared with. */
const METHODS: readonly (readonly [beginning: string, name: string, method: Method])[] = [
  ['ci-cp-', 'exact, method 5', exact],
  ['ci-wald-', 'Wald', wald],
  ['ci-wald_cc-', 'Wald with continuity correction', waldCorrected],
  ['ci-wilson_cc-', 'Wilson with continuity correction', wilsonCorrected],
  ['ci-midp-', 'mid-P', midP],
  ['ci-lr-', 'likelihood ratio', likelihoodRatio],
  ['ci-jeffreys-', 'Jeffreys', jeffreys],
];

for (const [beginning, name, method] of METHODS) {
  describe(`interval for one proportion: ${name}`, () => {
    for (const { inputs, expected, tolerance, cited } of checkValues<{ x: number; n: number }, [number, number]>(
      beginning,
    )) {
      test(`${inputs.x} of ${inputs.n}: ${cited}`, () => {
        const [low, high] = method(inputs.x, inputs.n);
        expect(Math.abs(low - expected[0])).toBeLessThanOrEqual(tolerance);
        expect(Math.abs(high - expected[1])).toBeLessThanOrEqual(tolerance);
      });
    }
  });
}

describe('Newcombe interval for a difference with continuity correction, method 11', () => {
  for (const { inputs, expected, tolerance, cited } of checkValues<
    { x1: number; n1: number; x2: number; n2: number },
    [number, number, number]
  >('newcombe11-')) {
    test(`${inputs.x1}/${inputs.n1} - ${inputs.x2}/${inputs.n2}: ${cited}`, () => {
      newcombeCorrected(inputs.x1, inputs.n1, inputs.x2, inputs.n2).forEach((value, i) => {
        expect(Math.abs(value - expected[i]!)).toBeLessThanOrEqual(tolerance);
      });
    });
  }
});
