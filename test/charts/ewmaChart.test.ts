import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { ewmaChart, USUAL_SMOOTHING } from '../../src/charts/kinds/ewmaChart.ts';
import { pChart } from '../../src/charts/kinds/pChart.ts';
import { smoother } from '../../src/charts/kinds/smoothed.ts';
import { ewmaRunLength } from '../../src/charts/runLength/ewmaRunLength.ts';
import { checkValue } from '../published/checkValues.ts';
import { frozen, history } from './arbitraries.ts';

describe('the smoothed value', () => {
  const series = checkValue<
    { x: number[]; mu0: number; sigma: number; lam: number; L: number },
    { rows: number[][]; first_signal: number }
  >('ewma-series');
  test(`with limits that widen with its age: ${series.cited}`, () => {
    const { x, mu0, sigma, lam, L } = series.inputs;
    const smooth = smoother(lam, mu0);
    const steps = x.map((value) => smooth(value, sigma));
    steps.forEach((step, i) => {
      const [value, lower, upper] = series.expected.rows[i]!;
      expect(step.value).toBeCloseTo(value!, 5);
      expect(mu0 - L * step.sigma).toBeCloseTo(lower!, 5);
      expect(mu0 + L * step.sigma).toBeCloseTo(upper!, 5);
    });
    expect(steps.findIndex((step) => Math.abs(step.value - mu0) > L * step.sigma) + 1).toBe(
      series.expected.first_signal,
    );
  });
});

describe('the EWMA chart of lost shares', () => {
  test('with full weight on the newest point is the p chart', () => {
    fc.assert(
      fc.property(history(1), (counts) => {
        const all = ewmaChart(counts, { smoothing: { lambda: 1, width: 3 } });
        const plain = pChart(counts);
        expect(all.points.map(({ value }) => value)).toEqual(plain.points.map(({ value }) => value));
        all.points.forEach((point, i) => {
          expect(point.upper).toBeCloseTo(plain.points[i]!.upper, 12);
          expect(point.lower).toBeCloseTo(plain.points[i]!.lower, 12);
        });
      }),
    );
  });

  test('counting kept accounts instead of lost ones mirrors it', () => {
    fc.assert(
      fc.property(history(2), (counts) => {
        const lost = ewmaChart(counts);
        const kept = ewmaChart(frozen(counts.map(({ accounts, lost: gone }) => ({ accounts, lost: accounts - gone }))));
        lost.points.forEach((point, i) => {
          expect(kept.points[i]!.value).toBeCloseTo(1 - point.value, 12);
          expect(kept.points[i]!.sigma).toBeCloseTo(point.sigma, 12);
          expect(kept.points[i]!.upper).toBeCloseTo(1 - point.lower, 12);
        });
      }),
    );
  });

  test('of equal subgroups has limits that only widen, towards those of an old chart', () => {
    const counts = frozen(Array.from({ length: 80 }, (_, i) => ({ accounts: 85, lost: 3 + (i % 5) })));
    const { points, center } = ewmaChart(counts);
    const { lambda, width } = USUAL_SMOOTHING;
    for (const [i, point] of points.slice(1).entries()) expect(point.sigma).toBeGreaterThan(points[i]!.sigma);
    const old = Math.sqrt(((center * (1 - center)) / 85) * (lambda / (2 - lambda)));
    expect(points.at(-1)!.upper).toBeCloseTo(center + width * old, 6);
  });

  test('keeps every value between the smallest and the largest share and never leaves what a share can be', () => {
    fc.assert(
      fc.property(history(1), (counts) => {
        const { points, center } = ewmaChart(counts);
        const shares = [...counts.map(({ accounts, lost }) => lost / accounts), center];
        for (const { value, lower, upper } of points) {
          expect(value).toBeGreaterThanOrEqual(Math.min(...shares) - 1e-12);
          expect(value).toBeLessThanOrEqual(Math.max(...shares) + 1e-12);
          expect(lower).toBeGreaterThanOrEqual(0);
          expect(upper).toBeLessThanOrEqual(1);
        }
      }),
    );
  });
});

describe('run lengths of an EWMA of normal values', () => {
  test('grow with the width, and are the same for a move up as down', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.05, max: 1, noNaN: true }),
        fc.double({ min: 1.5, max: 3, noNaN: true }),
        fc.double({ min: 0, max: 2, noNaN: true }),
        (lambda, width, shift) => {
          const here = ewmaRunLength(lambda, width, shift);
          expect(ewmaRunLength(lambda, width + 0.2, shift)).toBeGreaterThan(here);
          expect(Math.abs(ewmaRunLength(lambda, width, -shift) / here - 1)).toBeLessThan(1e-6);
        },
      ),
      { numRuns: 25 },
    );
  });
});
