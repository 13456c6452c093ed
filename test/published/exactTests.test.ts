import chiSquareCdf from '@stdlib/stats-base-dists-chisquare-cdf';
import { describe, expect, test } from 'vitest';
import { fisherExact } from '../../src/charts/checks/fisherExact.ts';
import { freemanHalton } from '../../src/charts/checks/freemanHalton.ts';
import { homogeneity } from '../../src/charts/checks/homogeneity.ts';
import { checkValue } from './checkValues.ts';

const close = (actual: number, expected: number, tolerance: number): void =>
  expect(Math.abs(actual - expected)).toBeLessThanOrEqual(tolerance);
type Two = readonly [readonly [number, number], readonly [number, number]];

describe('Fisher’s exact test', () => {
  const tea = checkValue<{ table: Two }, { greater: number; two_sided: number }>('fisher-tea');
  test(`tea tasting: ${tea.cited}`, () => {
    const found = fisherExact(tea.inputs.table);
    close(found.greater, tea.expected.greater, tea.tolerance);
    close(found.twoSided, tea.expected.two_sided, tea.tolerance);
  });

  const twins = checkValue<{ table: Two }, { less: number; two_sided: number }>('fisher-twins');
  test(`convictions of twins: ${twins.cited}`, () => {
    const found = fisherExact(twins.inputs.table);
    close(found.less, twins.expected.less, twins.tolerance);
    close(found.twoSided, twins.expected.two_sided, twins.tolerance);
  });

  const job = checkValue<{ table: number[][] }, number>('fisher-job');
  test(`job satisfaction by income, four rows and four columns: ${job.cited}`, () => {
    const found = freemanHalton(job.inputs.table, { steps: 2_000_000 })!;
    expect(found.method).toBe('exact');
    close(found.pValue, job.expected, job.tolerance);
  });

  test(`the same table by drawing lies within three standard errors, whatever the seed: ${job.cited}`, () => {
    for (const seed of [1, 2, 3, 4]) {
      const found = freemanHalton(job.inputs.table, { steps: 10, seed })!;
      expect(found.method).toBe('simulated');
      close(found.pValue, job.expected, 3 * found.standardError!);
    }
  });
});

describe('chi-square of a table of two by two', () => {
  const two = checkValue<
    { table: [[number, number], [number, number]] },
    { x2: number; p: number; x2_cc: number; p_cc: number }
  >('chisq-2x2');
  test(`without continuity correction it is what homogeneity gives, and the corrected value lies nearer to Fisher’s: ${two.cited}`, () => {
    const [[a, b], [c, d]] = two.inputs.table;
    const plain = homogeneity([
      { lost: a, accounts: a + c },
      { lost: b, accounts: b + d },
    ])!;
    close(plain.chiSquare, two.expected.x2, two.tolerance);
    close(plain.pValue, two.expected.p, two.tolerance);
    // Ours has no correction; the published corrected value, by its formula, is a check on the table and on the tail.
    const n = a + b + c + d;
    const corrected = (n * (Math.abs(a * d - b * c) - n / 2) ** 2) / ((a + b) * (c + d) * (a + c) * (b + d));
    close(corrected, two.expected.x2_cc, two.tolerance);
    close(1 - chiSquareCdf(corrected, 1), two.expected.p_cc, two.tolerance);
    const exact = fisherExact(two.inputs.table).twoSided;
    expect(Math.abs(exact - two.expected.p_cc)).toBeLessThan(Math.abs(exact - plain.pValue));
  });
});
