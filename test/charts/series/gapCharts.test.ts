import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { gChart } from '../../../src/charts/kinds/gChart.ts';
import { tChart } from '../../../src/charts/kinds/tChart.ts';
import { nelsonTests } from '../../../src/charts/tests/nelsonTests.ts';
import type { Chart } from '../../../src/charts/types.ts';

const episodes = (chart: Chart) => nelsonTests(chart.points.map((point) => ({ ...point, center: chart.center })));

const gaps = fc.array(fc.integer({ min: 0, max: 400 }), { minLength: 1, maxLength: 60 });

describe('charts of gaps', () => {
  test('count every account once: those in the gaps, the lost ones, and those since the last loss', () => {
    fc.assert(
      fc.property(gaps, fc.integer({ min: 0, max: 900 }), (values, open) => {
        const chart = gChart(Object.freeze(values), { open });
        const closed = chart.points.filter((point) => !point.open);
        const all = closed.reduce((sum, point) => sum + point.accounts, 0);
        expect(all).toBe(values.reduce((sum, gap) => sum + gap + 1, 0));
        expect(closed.every((point) => point.lost === 1)).toBe(true);
        const unfinished = chart.points.filter((point) => point.open);
        expect(unfinished.map((point) => [point.accounts, point.lost])).toEqual(open > chart.center ? [[open, 0]] : []);
        for (const point of chart.points) {
          for (const number of [point.value, point.sigma, point.lower, point.upper])
            expect(number).toBeGreaterThanOrEqual(0);
          expect(Number.isFinite(point.upper)).toBe(true);
          expect(point.lower).toBeLessThanOrEqual(chart.center);
          expect(point.upper).toBeGreaterThanOrEqual(chart.center);
        }
      }),
    );
  });

  test.each([gChart, tChart])('flag a point beyond the limits they show, and no other: %o', (kind) => {
    fc.assert(
      fc.property(gaps, (values) => {
        const chart = kind(values);
        const beyond = new Set<number>();
        for (const { test: number, point, until } of episodes(chart))
          for (let i = point; number === 1 && i <= until; i++) beyond.add(i);
        for (const { index, value, lower, upper } of chart.points)
          expect(beyond.has(index)).toBe(value < lower || value > upper);
      }),
    );
  });

  test('an unfinished gap becomes a point once it can only end above the centre line', () => {
    const values = [4, 12, 30, 7, 55, 18, 3, 22, 41, 9, 16, 27];
    const lasting = gChart(values, { baselineLast: 12, open: 15 });
    // On trial limits the accounts since the last loss count in the usual level too.
    expect(lasting.mean).toBeCloseTo((244 + 15) / 12, 9);
    expect(lasting.center).toBe(15);
    expect(lasting.points).toHaveLength(12);
    const longer = gChart([...values, 20], { baselineLast: 12, open: 400 });
    expect(longer.mean).toBeCloseTo(244 / 12, 9);
    expect(longer.points.at(-1)).toMatchObject({ index: 14, value: 400, accounts: 400, lost: 0, open: true });
    expect(episodes(longer).map(({ test: number, side, point }) => [number, side, point])).toEqual([[1, 'above', 14]]);
  });

  test('two losses on one day are 0 days apart, and that alone is no flag', () => {
    const chart = tChart([0, 3, 5, 0, 2, 9, 1, 4, 6, 2, 0, 3]);
    expect(chart.points[0]!.lower).toBe(0);
    expect(episodes(chart)).toEqual([]);
  });

  test('losses at every account, or all on one day, give a flat chart and not a division by zero', () => {
    for (const chart of [gChart([0, 0, 0]), tChart([0, 0])]) {
      expect(chart.center).toBe(0);
      expect(episodes(chart)).toEqual([]);
    }
  });

  test('no gap at all is no chart', () => {
    expect(() => gChart([])).toThrow(RangeError);
    expect(() => tChart([], { open: 12 })).toThrow(RangeError);
    expect(() => gChart([3, 4], { excluded: [1, 2] })).toThrow(RangeError);
  });
});
