import { describe, expect, it } from 'vitest';
import { individualsChart } from '../../../src/charts/kinds/individualsChart.ts';
import { type BesideRevenue, revenueAlt, revenueScene } from '../../../src/picture/questions/revenue.ts';
import type { PictureInput } from '../../../src/verdict/types.ts';
import { faults } from '../faults.ts';

/** Shares that go up and down around a level, with one far point at the end. */
function example(points: number, level: number, far: number, apart: boolean): [PictureInput, BesideRevenue] {
  const values = Array.from({ length: points }, (_, i) => ({
    value: i === points - 1 ? far : level * (1 + 0.3 * Math.sin(i * 2.1)),
    accounts: 60,
    lost: 5,
  }));
  const chart = individualsChart(values, {}, [0, 1]);
  const verdict = {
    outcome: 'steady' as const,
    headline: `Revenue churn is steady: the usual ${(level * 100).toFixed(1)} % of the revenue is lost within 3 months.`,
    evidence: [],
    cautions: ['Points can reach zero by chance, so one low point alone can never flag a fall, only several together.'],
    next: [],
    since: null,
    before: null,
    after: null,
    difference: null,
  };
  const input: PictureInput = {
    chart,
    dates: values.map((_, i) => ({ firstStart: 19_400 + i * 14, lastStart: 19_413 + i * 14, asOf: 19_505 + i * 14 })),
    signals: [],
    verdict,
    waiting: { accounts: 12, of: 60, on: 20_400 },
    immature: 240,
    measure: 'revenue lost within 3 months of starting',
    subject: 'Marrowby Seed Club, June export',
    asOf: 20_300,
  };
  const wave = (size: number): number[] => values.map((_, i) => size * (1 + Math.cos(i)));
  return [
    input,
    {
      movingRanges: chart.movingRanges,
      averageMovingRange: chart.averageMovingRange,
      rangeUpper: chart.rangeUpper,
      logo: wave(0.05),
      contraction: apart ? wave(0.01) : null,
      expansion: apart ? wave(0.03) : null,
      totals: { logo: 0.05, contraction: 0.01, expansion: 0.03 },
    },
  ];
}

describe('the picture of revenue churn', () => {
  it.each([
    ['many points', 150, 0.06, 0.08, true],
    ['few points', 3, 0.06, 0.09, true],
    ['two points, one amount an account', 2, 0.5, 0.6, false],
    ['nothing lost at all', 30, 0, 0, false],
    ['everything lost', 30, 1, 1, true],
    ['one point far out', 40, 0.001, 0.9, true],
  ] as const)('%s: no two texts touch, none leaves the drawing', (_, points, level, far, apart) => {
    const [input, beside] = example(points, level, far, apart);
    expect(faults(revenueScene(input, beside))).toEqual([]);
    const text = revenueAlt(input, beside);
    expect(text.length).toBeLessThanOrEqual(1000);
    expect(text).not.toMatch(/NaN|Infinity|undefined/);
  });

  it('a range beyond its limit stands out, and is counted for those who cannot see it', () => {
    const [input, beside] = example(40, 0.06, 0.4, true);
    const marks = revenueScene(input, beside).marks.filter(
      ({ shape, fill }) => shape === 'diamond' && fill === '#b8410f',
    );
    expect(marks).toHaveLength(1);
    expect(revenueAlt(input, beside)).toContain('1 is larger');
  });
});
