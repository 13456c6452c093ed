import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { pChart } from '../../src/charts/kinds/pChart.ts';
import { pPrimeChart } from '../../src/charts/kinds/pPrimeChart.ts';
import { exactLimitsSentence } from '../../src/verdict/words/exactLimits.ts';
import { history } from '../charts/arbitraries.ts';

const points = (accounts: number, lost: readonly number[]) => lost.map((one) => ({ accounts, lost: one }));

describe('what the exact limits add in words', () => {
  it('with few losses to be expected, how many chance allows beside what the drawn limits allow', () => {
    expect(exactLimitsSentence(pChart(points(20, [1, 0, 2, 1, 1, 0, 1, 2, 1, 1])))).toBe(
      'With about 1.0 lost a point to be expected, three sigma limits are rough. Counted out exactly (binomial limits, as strict as three sigma of a normal value), chance allows up to 5 of 20 lost, where the drawn limits allow up to 3.',
    );
  });

  it('a point beyond the drawn limits and within the exact ones is named, and no flag by itself', () => {
    // 25 points of 20 at 1 lost each on average; the newest has 4.
    const lost = [...Array.from({ length: 24 }, (_, i) => [0, 1, 2, 1][i % 4]!), 0, 4];
    const chart = pChart(points(20, lost), { baselineLast: 25 });
    expect(chart.points.at(-1)!.value).toBeGreaterThan(chart.points.at(-1)!.upper);
    expect(exactLimitsSentence(chart)).toMatch(
      /; point 26 lies beyond the drawn limits and within the exact ones: no flag by itself\.$/,
    );
  });

  it('a point within the drawn limits and beyond the exact ones is worth a look, however many are expected', () => {
    const chart = pChart(points(50, [12, 12, 11, 12, 12, 12, 3]), { baselineLast: 6 });
    expect(chart.points.at(-1)!.value).toBeGreaterThan(chart.points.at(-1)!.lower);
    expect(exactLimitsSentence(chart)).toMatch(
      /; point 7 lies within the drawn limits and beyond the exact ones: worth a look\.$/,
    );
  });

  it('where both say the same of every point and enough are expected, nothing is added', () => {
    expect(exactLimitsSentence(pChart(points(100, [10, 11, 9, 10, 12, 8])))).toBeNull();
  });

  it('there is nothing to add to a chart without them, or without a level', () => {
    expect(exactLimitsSentence(pPrimeChart(points(20, [1, 0, 2, 1, 1, 0])))).toBeNull();
    expect(exactLimitsSentence(pChart(points(20, [0, 0, 0])))).toBeNull();
    expect(exactLimitsSentence(pChart(points(20, [20, 20, 20])))).toBeNull();
  });

  it('speaks exactly when a point is judged otherwise or fewer than five are to be expected', () => {
    fc.assert(
      fc.property(history(2, 30, 120), (counts) => {
        const chart = pChart(counts);
        const { center } = chart;
        fc.pre(center > 0 && center < 1);
        const otherwise = chart.points.some(
          ({ value, lower, upper, exactLower, exactUpper }) =>
            (value < lower - 1e-9 || value > upper + 1e-9) !==
            (value < exactLower! - 1e-9 || value > exactUpper! + 1e-9),
        );
        const few = Math.min(center, 1 - center) * counts.at(-1)!.accounts < 5;
        const sentence = exactLimitsSentence(chart);
        expect(sentence !== null).toBe(otherwise || few);
        expect(sentence ?? '').not.toMatch(/NaN|undefined|Infinity/);
      }),
    );
  });
});
