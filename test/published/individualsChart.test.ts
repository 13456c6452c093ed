import normalQuantile from '@stdlib/stats-base-dists-normal-quantile';
import { medianSorted } from 'simple-statistics';
import { describe, expect, it } from 'vitest';
import { c4, d2, d3 } from '../../src/charts/constants.ts';
import { individualsChart, individualsLimits, movingRanges } from '../../src/charts/kinds/individualsChart.ts';
import { checkValue, checkValues } from './checkValues.ts';

describe('constants of ranges and standard deviations', () => {
  const table = checkValue<{ n: number[] }, Record<string, Record<string, number>>>('constants-2-25');
  it(`every printed factor for 2 to 25 values follows from d2, d3 and c4: ${table.cited}`, () => {
    expect(table.inputs.n).toHaveLength(24);
    for (const n of table.inputs.n) {
      const [mean, spread, c] = [d2(n), d3(n), c4(n)];
      const rest = Math.sqrt(1 - c * c);
      const computed: Record<string, number> = {
        d2: mean,
        d3: spread,
        c4: c,
        A: 3 / Math.sqrt(n),
        A2: 3 / (mean * Math.sqrt(n)),
        A3: 3 / (c * Math.sqrt(n)),
        B3: Math.max(0, 1 - (3 * rest) / c),
        B4: 1 + (3 * rest) / c,
        B5: Math.max(0, c - 3 * rest),
        B6: c + 3 * rest,
        D1: Math.max(0, mean - 3 * spread),
        D2: mean + 3 * spread,
        D3: Math.max(0, 1 - (3 * spread) / mean),
        D4: 1 + (3 * spread) / mean,
        E2: 3 / mean,
      };
      const printed = table.expected[String(n)]!;
      expect(Object.keys(computed).sort()).toEqual(Object.keys(printed).sort());
      for (const [name, value] of Object.entries(printed))
        expect(Math.abs(computed[name]! - value), `${name}(${n})`).toBeLessThanOrEqual(1e-6);
    }
  });

  const two = checkValue<unknown, Record<'d2' | 'd3' | 'E2' | 'D4' | 'median_mr_d4' | 'median_mr_E5', number>>(
    'constants-mr',
  );
  it(`the range of two values has closed forms: ${two.cited}`, () => {
    expect(d2(2)).toBeCloseTo(two.expected.d2, 6);
    expect(d3(2)).toBeCloseTo(two.expected.d3, 6);
    expect(d2(2)).toBeCloseTo(2 / Math.sqrt(Math.PI), 7);
    expect(d3(2)).toBeCloseTo(Math.sqrt(2 - 4 / Math.PI), 7);
    expect(3 / d2(2)).toBeCloseTo(two.expected.E2, 6);
    expect(1 + (3 * d3(2)) / d2(2)).toBeCloseTo(two.expected.D4, 6);
    // The chart uses both as the tables print them.
    expect(individualsLimits([0, 1])).toMatchObject({ upper: 0.5 + 2.66, rangeUpper: 3.267 });
    expect(two.expected.E2.toFixed(2)).toBe('2.66');
    expect(two.expected.D4.toFixed(3)).toBe('3.267');
    // The median of the range of two values is sqrt(2) times the upper quartile of one.
    const median = Math.SQRT2 * normalQuantile(0.75, 0, 1);
    expect(median).toBeCloseTo(two.expected.median_mr_d4, 6);
    expect(3 / median).toBeCloseTo(two.expected.median_mr_E5, 6);
  });

  it('a range or a standard deviation of a single value does not exist', () => {
    for (const n of [1, 0, 2.5]) {
      expect(() => d2(n)).toThrow(RangeError);
      expect(() => d3(n)).toThrow(RangeError);
      expect(() => c4(n)).toThrow(RangeError);
    }
  });
});

describe('individuals and moving range chart', () => {
  for (const one of checkValues<{ x: number[] }, Record<string, number>>('xmr-')) {
    it(`${one.id}: ${one.cited}`, () => {
      const { x } = one.inputs;
      const { mean, mrbar, median_mr, ucl, lcl, ucl266, lcl266, mr_ucl, sigma, sd } = one.expected;
      const limits = individualsLimits(x);
      // Printed to as many digits as these tolerances ask for.
      expect(x).toHaveLength(one.expected['n']!);
      expect(limits.center).toBeCloseTo(mean!, 6);
      expect(limits.averageMovingRange).toBeCloseTo(mrbar!, 6);
      expect(limits.upper).toBeCloseTo(ucl266!, one.id === 'xmr-loan' ? 2 : 6);
      expect(limits.lower).toBeCloseTo(lcl266!, one.id === 'xmr-loan' ? 2 : 6);
      expect(limits.rangeUpper).toBeCloseTo(mr_ucl!, 4);
      // The same with the divisor 1.128 in place of the factor 2.66.
      expect(limits.averageMovingRange / 1.128).toBeCloseTo(sigma!, 6);
      expect(limits.center + (3 * limits.averageMovingRange) / 1.128).toBeCloseTo(ucl!, 5);
      expect(limits.center - (3 * limits.averageMovingRange) / 1.128).toBeCloseTo(lcl!, 5);
      const sorted = movingRanges(x).sort((a, b) => a - b);
      expect(medianSorted(sorted)).toBeCloseTo(median_mr!, 6);
      // The chart does not use the standard deviation of all values, which a shift would inflate.
      const s = Math.sqrt(x.reduce((sum, value) => sum + (value - mean!) ** 2, 0) / (x.length - 1));
      expect(s).toBeCloseTo(sd!, 6);
      expect(limits.sigma).not.toBeCloseTo(s, 2);
    });
  }

  const ae = checkValue<{ r: number[]; n: number[] }, { mean: number; mrbar: number; ucl: number; lcl: number }>(
    'laney-ae-xmr',
  );
  it(`proportions of very large subgroups: ${ae.cited}`, () => {
    const chart = individualsChart(
      ae.inputs.r.map((lost, i) => ({ value: lost / ae.inputs.n[i]!, lost, accounts: ae.inputs.n[i]! })),
    );
    expect(chart.center).toBeCloseTo(ae.expected.mean, 7);
    expect(chart.averageMovingRange).toBeCloseTo(ae.expected.mrbar, 7);
    expect(chart.points[0]!.upper).toBeCloseTo(ae.expected.ucl, 7);
    expect(chart.points[0]!.lower).toBeCloseTo(ae.expected.lcl, 7);
    // No range stands out, so leaving out large ones would change nothing.
    expect(chart.movingRanges.filter((range) => range !== null && range > chart.rangeUpper)).toEqual([]);
  });
});
