import { describe, expect, it } from 'vitest';
import { pChart } from '../../src/charts/kinds/pChart.ts';
import { pPrimeChart } from '../../src/charts/kinds/pPrimeChart.ts';
import type { ChartPoint } from '../../src/charts/types.ts';
import { checkValue } from './checkValues.ts';

const outside = (points: readonly ChartPoint[]): number[] =>
  points.filter((point) => point.value < point.lower || point.value > point.upper).map((point) => point.index);

describe('Laney p′ chart', () => {
  const ae = checkValue<
    { r: number[]; n: number[] },
    { p: number; sigma_z: number; ucl: number[]; lcl: number[]; out_p_chart: number[]; out_p_prime: number[] }
  >('laney-ae');
  const counts = ae.inputs.r.map((lost, i) => ({ accounts: ae.inputs.n[i]!, lost }));

  it(`widens the limits of very large subgroups to what they really vary by: ${ae.cited}`, () => {
    const chart = pPrimeChart(counts);
    expect(chart.center).toBeCloseTo(ae.expected.p, 9);
    // The printed divisor is 1.128.
    expect(chart.sigmaZ).toBeCloseTo(ae.expected.sigma_z, 5);
    chart.points.forEach((point, i) => {
      expect(point.upper).toBeCloseTo(ae.expected.ucl[i]!, 6);
      expect(point.lower).toBeCloseTo(ae.expected.lcl[i]!, 6);
    });
    expect(outside(chart.points)).toEqual(ae.expected.out_p_prime);
    expect(outside(pChart(counts).points)).toEqual(ae.expected.out_p_chart);
  });

  const wafers = checkValue<{ counts: number[]; n: number }, { sigma_z: number; ucl: number; lcl: number }>(
    'laney-nist',
  );
  it(`of the wafers: ${wafers.cited}`, () => {
    const chart = pPrimeChart(wafers.inputs.counts.map((lost) => ({ accounts: wafers.inputs.n, lost })));
    expect(chart.sigmaZ).toBeCloseTo(wafers.expected.sigma_z, 5);
    expect(chart.points[0]!.upper).toBeCloseTo(wafers.expected.ucl, 5);
    // Printed before clipping: below zero.
    expect(wafers.expected.lcl).toBeLessThan(0);
    expect(chart.points[0]!.lower).toBe(0);
  });

  const orders = checkValue<{ D: number[]; n: number[] }, { sigma_z: number }>('laney-po');
  it(`can narrow the limits too: ${orders.cited}`, () => {
    const chart = pPrimeChart(orders.inputs.D.map((lost, i) => ({ accounts: orders.inputs.n[i]!, lost })));
    expect(chart.sigmaZ).toBeCloseTo(orders.expected.sigma_z, 5);
  });

  it('is the p chart where nothing varies: nobody lost, one point, or all points equal', () => {
    for (const flat of [
      [
        { accounts: 20, lost: 0 },
        { accounts: 30, lost: 0 },
      ],
      [{ accounts: 20, lost: 3 }],
      [
        { accounts: 20, lost: 3 },
        { accounts: 20, lost: 3 },
      ],
    ]) {
      const chart = pPrimeChart(flat);
      expect(chart.sigmaZ).toBe(1);
      const plain = pChart(flat).points.map(({ exactLower: _lower, exactUpper: _upper, ...point }) => point);
      expect(chart.points).toEqual(plain);
    }
  });
});
