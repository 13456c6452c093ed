import { describe, expect, it } from 'vitest';
import { backToGaps, fromPower, toPower } from '../../src/charts/kinds/gapsByPower.ts';
import { gChart } from '../../src/charts/kinds/gChart.ts';
import { exponentialEdges } from '../../src/charts/series/exponential.ts';
import { geometricEdges } from '../../src/charts/series/geometric.ts';
import { movingRangeLevel } from '../../src/charts/series/normal.ts';
import { symmetricEdges } from '../../src/charts/tests/zoneEdges.ts';
import { checkValue, checkValues } from './checkValues.ts';

interface Geometric {
  gbar: number;
  p: number;
  ucl3: number;
  lcl3: number;
  sigma: number;
  median_exact: number;
  U_smallest_k_with_tail_le: number;
  U_quantile_ppf: number;
  L_largest_k_with_cdf_le: number;
  false_alarm_3s: number;
}

/** Chance that a gap is left of, or past, its limits, summed one gap at a time. */
function chanceAtLeast(k: number, p: number): number {
  let chance = 1;
  for (let x = 0; x < k; x++) chance -= p * (1 - p) ** x;
  return chance;
}

/** The published edges are for this tail, which is that of three sigma rounded. */
const areas = (alpha: number): readonly [number, number, number] => [0.15865525393145707, 0.02275013194817921, alpha];

describe('g chart', () => {
  for (const { id, inputs, expected, cited } of checkValues<{ gbar: number; alpha: number }, Geometric>('g-limits-')) {
    it(`has exact limits and median, ${id}: ${cited}`, () => {
      const edges = geometricEdges(inputs.gbar, areas(inputs.alpha));
      expect(edges.center).toBe(expected.median_exact);
      expect(edges.above[2]).toBe(expected.U_quantile_ppf);
      // "Above the upper limit" begins with the first gap whose tail is small enough.
      expect(edges.above[2] + 1).toBe(expected.U_smallest_k_with_tail_le);
      // No gap is short enough: nothing lies below a lower limit of 0.
      expect(expected.L_largest_k_with_cdf_le).toBe(-1);
      expect(edges.below[2]).toBe(0);
      expect(geometricEdges(inputs.gbar)).toEqual(edges);
    });

    it(`would flag far too many long gaps at three sigma, ${id}: ${cited}`, () => {
      expect(inputs.gbar + 3 * expected.sigma).toBeCloseTo(expected.ucl3, 5);
      expect(chanceAtLeast(Math.floor(expected.ucl3) + 1, expected.p)).toBeCloseTo(expected.false_alarm_3s, 6);
      const exact = geometricEdges(inputs.gbar).above[2];
      expect(chanceAtLeast(exact + 1, expected.p)).toBeLessThanOrEqual(0.00135);
      expect(chanceAtLeast(exact, expected.p)).toBeGreaterThan(0.00135);
    });
  }

  const series = checkValue<{ x: number[] }, Geometric>('g-constructed');
  it(`of twelve gaps: ${series.cited}`, () => {
    const chart = gChart(series.inputs.x);
    expect(chart.mean).toBeCloseTo(series.expected.gbar, 6);
    expect(chart.center).toBe(series.expected.median_exact);
    expect(chart.points[0]!.sigma).toBeCloseTo(series.expected.sigma, 6);
    expect(chart.points[0]!.upper).toBe(series.expected.U_quantile_ppf);
    expect(chart.points[0]!.lower).toBe(0);
    expect(chart.baseline.lost / chart.baseline.accounts).toBeCloseTo(series.expected.p, 9);
  });
});

describe('t chart', () => {
  interface Power {
    y: number[];
    ybar: number;
    mrbar: number;
    ucl: number;
    lcl: number;
    center_back: number;
    ucl_back: number;
    lcl_back: number;
  }
  for (const [id, power] of [
    ['t-valve-0.2777', 0.2777],
    ['t-valve-inv36', undefined],
  ] as const) {
    const valves = checkValue<{ x: number[] }, Power>(id);
    it(`through a power, ${id}: ${valves.cited}`, () => {
      const y = toPower(valves.inputs.x, power);
      y.forEach((value, i) => {
        expect(value).toBeCloseTo(valves.expected.y[i]!, 5);
      });
      const level = movingRangeLevel(y)!;
      expect(level.mean).toBeCloseTo(valves.expected.ybar, 6);
      expect(level.sigma * 1.128).toBeCloseTo(valves.expected.mrbar, 5);
      expect(level.mean + 3 * level.sigma).toBeCloseTo(valves.expected.ucl, 5);
      expect(level.mean - 3 * level.sigma).toBeCloseTo(valves.expected.lcl, 5);
      const edges = backToGaps(symmetricEdges(level.mean, level.sigma), power);
      expect(edges.center).toBeCloseTo(valves.expected.center_back, 4);
      expect(edges.above[2]).toBeCloseTo(valves.expected.ucl_back, 3);
      expect(edges.below[2]).toBe(valves.expected.lcl_back);
      expect(fromPower(y[2]!, power)).toBeCloseTo(valves.inputs.x[2]!, 9);
    });
  }

  const exact = checkValue<{ mean: number; alpha: number }, { mean: number; lo: number; med: number; hi: number }>(
    't-valve-exp',
  );
  it(`at exact quantiles: ${exact.cited}`, () => {
    const edges = exponentialEdges(exact.inputs.mean, areas(exact.inputs.alpha));
    expect(edges.below[2]).toBeCloseTo(exact.expected.lo, 6);
    expect(edges.center).toBeCloseTo(exact.expected.med, 6);
    expect(edges.above[2]).toBeCloseTo(exact.expected.hi, 5);
  });
});
