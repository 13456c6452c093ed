import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { pChart } from '../../src/charts/kinds/pChart.ts';
import { pPrimeChart } from '../../src/charts/kinds/pPrimeChart.ts';
import { shownExactLimits } from '../../src/picture/exactLimits.ts';
import { layout } from '../../src/picture/layout.ts';
import { yAt } from '../../src/picture/scene.ts';
import { faults } from './faults.ts';
import { makeInput } from './inputs.ts';

const DASH = [1.6, 5];
const points = (accounts: number, lost: readonly number[]) => lost.map((one) => ({ accounts, lost: one }));
const few = [1, 0, 2, 1, 1, 0, 1, 2, 1, 1, 0, 3, 1, 0, 1, 2];

function drawn(chart: ReturnType<typeof pChart>) {
  const input = {
    ...makeInput({ points: chart.points.length, rate: 0.05, outcome: 'steady', headline: 'Steady: so.' }),
    chart,
  };
  return layout(input);
}

describe('the exact limits on the picture', () => {
  it('are a dotted line at their height, inside the plot, and a note that gives their figure', () => {
    const chart = pChart(points(20, few));
    const scene = drawn(chart);
    const dotted = scene.over.filter(({ dash }) => dash?.join() === DASH.join());
    expect(dotted).toHaveLength(1);
    expect(dotted[0]!.y).toBeCloseTo(yAt(scene.frame, chart.points[0]!.exactUpper!), 9);
    expect(dotted[0]!.y).toBeGreaterThan(scene.frame.top);
    expect(scene.texts.map(({ text }) => text).join(' ')).toMatch(
      /dotted: what chance allows .* exactly, 25\.0\u00a0%/,
    );
    expect(faults(scene)).toEqual([]);
  });

  it.each([
    ['many are to be expected', pChart(points(200, [20, 22, 19, 18, 21]))],
    ['the points differ in size', pChart(few.map((lost, i) => ({ accounts: 20 + i, lost })))],
    ['the points vary more than the binomial', pPrimeChart(points(20, few))],
    ['nobody is lost', pChart(points(20, [0, 0, 0, 0]))],
  ])('are left out where %s', (_, chart) => {
    expect(shownExactLimits(chart)).toEqual([]);
    expect(drawn(chart).over.filter(({ dash }) => dash?.join() === DASH.join())).toEqual([]);
  });

  it('whatever the counts, nothing touches and nothing is cut', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 2, max: 60 }),
        fc.array(fc.integer({ min: 0, max: 6 }), { minLength: 2, maxLength: 40 }),
        (n, lost) => {
          expect(
            faults(
              drawn(
                pChart(
                  points(
                    n,
                    lost.map((one) => Math.min(one, n)),
                  ),
                ),
              ),
            ),
          ).toEqual([]);
        },
      ),
      { numRuns: 40 },
    );
  });
});
