import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { individualsChart, individualsLimits } from '../../src/charts/kinds/individualsChart.ts';

const values = fc.array(fc.double({ min: -1e4, max: 1e4, noNaN: true }), { minLength: 1, maxLength: 60 });
const close = (a: number, b: number): boolean => Math.abs(a - b) <= 1e-9 * Math.max(1, Math.abs(a), Math.abs(b)) * 1e4;
const points = (list: readonly number[]) => list.map((value) => ({ value, accounts: 100, lost: 7 }));

describe('individuals and moving range chart', () => {
  it('limits move with a shift and stretch with a scale', () => {
    fc.assert(
      fc.property(
        values,
        fc.double({ min: -100, max: 100, noNaN: true }),
        fc.integer({ min: 1, max: 50 }),
        (x, by, times) => {
          const plain = individualsLimits(Object.freeze(x));
          const moved = individualsLimits(x.map((value) => value * times + by));
          expect(close(moved.upper, plain.upper * times + by)).toBe(true);
          expect(close(moved.lower, plain.lower * times + by)).toBe(true);
          expect(close(moved.rangeUpper, plain.rangeUpper * times)).toBe(true);
        },
      ),
    );
  });

  it('reads the same backwards', () => {
    fc.assert(
      fc.property(values, (x) => {
        const [there, back] = [individualsLimits(x), individualsLimits([...x].reverse())];
        expect(close(there.upper, back.upper) && close(there.lower, back.lower)).toBe(true);
      }),
    );
  });

  it('one point, or points that are all equal, have limits on the centre line and nothing that is no number', () => {
    for (const flat of [[0.04], [0.04, 0.04, 0.04], [0]]) {
      const chart = individualsChart(points(flat));
      expect(chart.averageMovingRange).toBe(0);
      for (const point of chart.points)
        expect([point.lower, point.upper, point.sigma]).toEqual([chart.center, chart.center, 0]);
    }
    expect(() => individualsChart([])).toThrow(RangeError);
  });

  it('limits stay within what is possible', () => {
    const chart = individualsChart(points([0.9, 0.1, 0.9, 0.1]), {}, [0, 1]);
    expect(chart.points.map(({ lower, upper }) => [lower, upper])).toEqual(Array(4).fill([0, 1]));
    expect(individualsChart(points([2.5, 0.1])).points[0]!.upper).toBeGreaterThan(2.5);
  });

  it('the baseline is frozen: later points change neither the centre line nor the limits, and have ranges of their own', () => {
    const steady = Array.from({ length: 30 }, (_, i) => 0.05 + (i % 2) * 0.01);
    const later = individualsChart(points([...steady, 0.5, 0.6]), { baselineLast: 30 });
    const before = individualsChart(points(steady), { baselineLast: 30 });
    expect(later.center).toBe(before.center);
    expect(later.points[31]!.upper).toBe(before.points[0]!.upper);
    expect(later.baseline.provisional).toBe(false);
    expect(later.movingRanges[0]).toBeNull();
    expect(later.movingRanges[31]).toBeCloseTo(0.1, 12);
    expect(later.movingRanges[30]).toBeGreaterThan(later.rangeUpper);
  });

  it('a point left out by decision sets no limit', () => {
    const list = [0.05, 0.06, 0.9, 0.05, 0.06, 0.05];
    const chart = individualsChart(points(list), { excluded: [3] });
    const without = individualsLimits(list.filter((_, i) => i !== 2));
    expect(chart.center).toBeCloseTo(without.center, 12);
    expect(chart.points[0]!.upper).toBeCloseTo(without.upper, 12);
    expect(chart.baseline).toMatchObject({ excluded: [3], accounts: 500, lost: 35, provisional: true });
  });
});
