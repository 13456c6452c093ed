import chiSquareCdf from '@stdlib/stats-base-dists-chisquare-cdf';
import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import { describe, expect, test } from 'vitest';
import { autocorrelation } from '../../src/charts/checks/autocorrelation.ts';
import { dispersion } from '../../src/charts/checks/dispersion.ts';
import { homogeneity } from '../../src/charts/checks/homogeneity.ts';
import { checkValue, checkValues } from './checkValues.ts';

const close = (actual: number, expected: number, tolerance: number): void =>
  expect(Math.abs(actual - expected)).toBeLessThanOrEqual(tolerance);

describe('dispersion', () => {
  for (const entry of checkValues<
    { D: number[]; n: number[] },
    { chi2: number; df: number; p?: number; ratio: number }
  >('disp-')) {
    test(`${entry.id}: chi-square, degrees of freedom and ratio: ${entry.cited}`, () => {
      const found = dispersion(entry.inputs.D.map((lost, i) => ({ lost, accounts: entry.inputs.n[i]! })))!;
      close(found.chiSquare, entry.expected.chi2, entry.tolerance);
      close(found.ratio, entry.expected.ratio, entry.tolerance);
      expect(found.degreesOfFreedom).toBe(entry.expected.df);
      close(found.pValue, entry.expected.p ?? 0, 1e-12);
    });
  }
});

describe('lag-1 autocorrelation', () => {
  const entry = checkValue<Record<'nist' | 'flow' | 'mont', number[]>, Record<string, number>>('acf-lag1');
  for (const series of ['nist', 'flow', 'mont'] as const) {
    test(`${series}: ${entry.cited}`, () => {
      close(autocorrelation(entry.inputs[series])!.r1, entry.expected[series]!, entry.tolerance);
    });
  }
  test('the A&E proportions and the limits that go with each length', () => {
    const { inputs } = checkValue<{ D: number[]; n: number[] }, unknown>('disp-ae');
    close(autocorrelation(inputs.D.map((d, i) => d / inputs.n[i]!))!.r1, entry.expected.ae!, entry.tolerance);
    // The reference uses 1.959964; 1.96 differs from it in the fifth digit only.
    const limits = entry.expected.lim as unknown as Record<string, number>;
    for (const [n, limit] of Object.entries(limits)) {
      close(autocorrelation(Array.from({ length: Number(n) }, (_, i) => i))!.limit, limit, 1e-5);
    }
  });
});

describe('homogeneity', () => {
  const smokers = checkValue<{ x: number[]; n: number[] }, { x2: number; df: number; p: number }>('chisq-smokers');
  test(`four proportions: ${smokers.cited}`, () => {
    const found = homogeneity(smokers.inputs.x.map((lost, i) => ({ lost, accounts: smokers.inputs.n[i]! })))!;
    expect(found.method).toBe('chi-square');
    expect(found.degreesOfFreedom).toBe(smokers.expected.df);
    close(found.chiSquare, smokers.expected.x2, smokers.tolerance);
    close(found.pValue, smokers.expected.p, 1e-12);
  });

  for (const id of ['chisq-party', 'chisq-2x2']) {
    const entry = checkValue<{ table: [number[], number[]] }, { x2: number; df?: number; p: number }>(id);
    test(`${id}, its columns as groups: ${entry.cited}`, () => {
      const [lost, kept] = entry.inputs.table;
      const found = homogeneity(lost.map((d, i) => ({ lost: d, accounts: d + kept[i]! })))!;
      close(found.chiSquare, entry.expected.x2, entry.tolerance);
      close(found.pValue, entry.expected.p, 1e-12);
    });
  }

  const tea = checkValue<{ table: [number[], number[]] }, { two_sided: number }>('fisher-tea');
  test(`a sparse table gets its exact chance: ${tea.cited}`, () => {
    const groups = tea.inputs.table[0].map((lost, i) => ({ lost, accounts: lost + tea.inputs.table[1][i]! }));
    const found = homogeneity(groups)!;
    expect(found.method).toBe('exact');
    close(found.pValue, tea.expected.two_sided, tea.tolerance);
  });
});

describe('distribution functions taken from a library', () => {
  test('chi-square agrees with the closed forms at 1, 2, 4 and 6 degrees of freedom, far into the tail', () => {
    for (const x of [0.01, 0.5, 1, 3.84, 10, 25, 60]) {
      close(chiSquareCdf(x, 1), 2 * normalCdf(Math.sqrt(x), 0, 1) - 1, 1e-13);
      close(1 - chiSquareCdf(x, 2), Math.exp(-x / 2), 1e-13);
      close(1 - chiSquareCdf(x, 4), Math.exp(-x / 2) * (1 + x / 2), 1e-13);
      close(1 - chiSquareCdf(x, 6), Math.exp(-x / 2) * (1 + x / 2 + x ** 2 / 8), 1e-13);
    }
  });
  const beyond = checkValue<unknown, number>('nelson-prob-t1');
  test('the normal distribution gives the chance beyond three sigma', () => {
    close(2 * normalCdf(-3, 0, 1), beyond.expected, beyond.tolerance);
  });
});
