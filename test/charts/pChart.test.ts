import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { poolBaseline, recommendedBaseline } from '../../src/charts/baseline.ts';
import { pChart } from '../../src/charts/kinds/pChart.ts';
import { nelsonTests } from '../../src/charts/tests/nelsonTests.ts';
import type { Chart, Side } from '../../src/charts/types.ts';
import { history } from './arbitraries.ts';

const near = (a: number, b: number): boolean => Math.abs(a - b) <= 1e-12;
const flags = (chart: Chart) =>
  nelsonTests(chart.points.map(({ value, sigma }) => ({ value, sigma, center: chart.center })));

describe('p chart', () => {
  test('limits lie within 0 and 1, enclose the centre line, and are three sigma away where not clipped', () => {
    fc.assert(
      fc.property(history(), (counts) => {
        const chart = pChart(counts);
        for (const { lower, upper, sigma, value, lost, accounts } of chart.points) {
          expect(lower).toBeGreaterThanOrEqual(0);
          expect(upper).toBeLessThanOrEqual(1);
          expect(lower).toBeLessThanOrEqual(chart.center);
          expect(upper).toBeGreaterThanOrEqual(chart.center);
          expect(value).toBe(lost / accounts);
          if (lower > 0) expect(near(chart.center - lower, 3 * sigma)).toBe(true);
          if (upper < 1) expect(near(upper - chart.center, 3 * sigma)).toBe(true);
        }
      }),
    );
  });

  test('a larger subgroup never has wider limits', () => {
    fc.assert(
      fc.property(history(2), (counts) => {
        const points = [...pChart(counts).points].sort((a, b) => a.accounts - b.accounts);
        for (let i = 1; i < points.length; i++) {
          expect(points[i]!.lower).toBeGreaterThanOrEqual(points[i - 1]!.lower);
          expect(points[i]!.upper).toBeLessThanOrEqual(points[i - 1]!.upper);
        }
      }),
    );
  });

  test('counting those who stayed instead of those who left mirrors the chart and every flag', () => {
    const other: Record<Side, Side> = { above: 'below', below: 'above', both: 'both' };
    fc.assert(
      // Sizes up to 20 make ties, points on the centre line and points on sigma lines common.
      fc.property(fc.oneof(history(20, 60, 20), history(20, 60, 300)), (counts) => {
        const chart = pChart(counts);
        const mirror = pChart(counts.map(({ accounts, lost }) => ({ accounts, lost: accounts - lost })));
        expect(near(chart.center, 1 - mirror.center)).toBe(true);
        chart.points.forEach((point, i) => {
          expect(near(point.lower, 1 - mirror.points[i]!.upper)).toBe(true);
          expect(near(point.upper, 1 - mirror.points[i]!.lower)).toBe(true);
          expect(near(point.sigma, mirror.points[i]!.sigma)).toBe(true);
        });
        const byPlace = (a: { point: number; test: number; side: Side }, b: typeof a): number =>
          a.point - b.point || a.test - b.test || a.side.localeCompare(b.side);
        const mirrored = flags(mirror).map((episode) => ({ ...episode, side: other[episode.side] }));
        expect(mirrored.sort(byPlace)).toEqual(flags(chart).sort(byPlace));
      }),
      { numRuns: 300 },
    );
  });

  test('the centre line is the pooled rate of the baseline, without the points left out, and later points do not move it', () => {
    const asked = history(3).chain((counts) =>
      fc.record({
        counts: fc.constant(counts),
        baselineLast: fc.integer({ min: 2, max: counts.length }),
        left: fc.integer({ min: 1, max: counts.length }),
      }),
    );
    fc.assert(
      fc.property(asked, ({ counts, baselineLast, left }) => {
        const excluded = Object.freeze([left]);
        const chart = pChart(counts, { baselineLast, excluded });
        const used = counts.slice(0, baselineLast).filter((_, i) => i + 1 !== left);
        const accounts = used.reduce((sum, count) => sum + count.accounts, 0);
        const lost = used.reduce((sum, count) => sum + count.lost, 0);
        expect(chart.baseline).toEqual({
          first: 1,
          last: baselineLast,
          excluded: left <= baselineLast ? [left] : [],
          provisional: used.length < 25,
          accounts,
          lost,
        });
        expect(chart.center).toBe(lost / accounts);
        expect(pChart(counts.slice(0, baselineLast), { baselineLast, excluded }).center).toBe(chart.center);
      }),
    );
  });

  test('no subgroup, and a baseline with every point left out, are contract breaches', () => {
    expect(() => pChart([])).toThrow(RangeError);
    expect(() => poolBaseline([{ accounts: 5, lost: 1 }], 1, [1])).toThrow(RangeError);
  });

  test('one size is reported as the subgroup size, different sizes as none', () => {
    expect(
      pChart([
        { accounts: 9, lost: 1 },
        { accounts: 9, lost: 4 },
      ]).subgroupSize,
    ).toBe(9);
    expect(
      pChart([
        { accounts: 9, lost: 1 },
        { accounts: 8, lost: 4 },
      ]).subgroupSize,
    ).toBeNull();
  });

  test('nobody lost, or everybody: limits shrink onto the centre line', () => {
    const none = pChart(Array.from({ length: 5 }, () => ({ accounts: 10, lost: 0 })));
    expect([none.center, none.points[0]!.lower, none.points[0]!.upper, none.points[0]!.sigma]).toEqual([0, 0, 0, 0]);
    const all = pChart(Array.from({ length: 5 }, () => ({ accounts: 10, lost: 10 })));
    expect([all.center, all.points[0]!.lower, all.points[0]!.upper, all.points[0]!.sigma]).toEqual([1, 1, 1, 0]);
    expect(flags(none)).toEqual(flags(all));
  });
});

test('a baseline of 25 points is a full one, of 24 a provisional one, left-out points not counted', () => {
  const counts = Array.from({ length: 40 }, () => ({ accounts: 10, lost: 1 }));
  expect(poolBaseline(counts, 25).provisional).toBe(false);
  expect(poolBaseline(counts, 24).provisional).toBe(true);
  expect(poolBaseline(counts, 25, [7]).provisional).toBe(true);
  expect(poolBaseline(counts, 26, [7]).provisional).toBe(false);
});

test('the recommended baseline is everything up to 30 points, then 25, and 30 from 60 points on', () => {
  expect([1, 24, 30, 31, 59, 60, 400].map(recommendedBaseline)).toEqual([1, 24, 30, 25, 25, 30, 30]);
});
