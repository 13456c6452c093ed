import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { gapsDrawn } from '../../src/answers/gapsDrawn.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { geometricGaps } from '../../src/charts/series/geometric.ts';
import { altText } from '../../src/picture/altText.ts';
import { layout } from '../../src/picture/layout.ts';
import { drawPicture } from '../../src/picture/picture.ts';
import { writeGapVerdict } from '../../src/verdict/gaps/gapVerdict.ts';
import { judgeGaps } from '../../src/verdict/gaps/judgeGaps.ts';
import type { PictureInput } from '../../src/verdict/types.ts';
import { judgeValues } from '../../src/verdict/values/judgeValues.ts';
import { writeValuesVerdict } from '../../src/verdict/values/valuesVerdict.ts';
import { faults } from './faults.ts';
import { day } from './inputs.ts';
import { normalised } from './normalised.ts';

/** The whole way from gaps to what the picture is given, in days for a t chart. */
function gapsInput(kind: 'g' | 't', gaps: readonly number[], open: number): PictureInput {
  const judgement = judgeGaps({ kind, gaps, open });
  const start = day('2019-01-07');
  const dates = [...gaps, open].map((_, i) => ({
    firstStart: start + i * 40,
    lastStart: start + i * 40 + 39,
    asOf: start + i * 40 + 130,
  }));
  const asOf = start + gaps.length * 40 + 180;
  const accounts = kind === 'g' ? gaps.reduce((sum, gap) => sum + gap + 1, open) : null;
  const context = {
    kind,
    tenure: '3 months',
    dates,
    losses: gaps.length,
    open,
    accounts,
    watched: kind === 't' ? { from: start, to: asOf } : null,
    immature: 205,
    inflowPerWeek: 12,
    asOf,
    asOfInferred: true,
    segment: null,
    whyThisChart: [],
    howChosen: [],
    readCautions: [],
  };
  return {
    ...gapsDrawn(judgement, context, {
      measure: `${kind === 'g' ? 'accounts kept' : 'days'} from one loss to the next (lost within 3 months of starting)`,
      subject: 'Marrowby Seed Club export',
    }),
    chart: judgement.chart,
    dates,
    signals: judgement.signals,
    verdict: writeGapVerdict(judgement, context),
  };
}

function numbersInput(values: readonly number[]): PictureInput {
  const judgement = judgeValues({ values });
  return {
    chart: judgement.chart,
    dates: values.map(() => ({ firstStart: null, lastStart: null, asOf: null })),
    signals: judgement.signals,
    verdict: writeValuesVerdict(judgement),
    waiting: null,
    immature: 0,
    measure: 'values one by one',
    subject: 'ready values',
    asOf: null,
    wouldSee: judgement.trust.wouldSee,
    ...(judgement.before && judgement.after
      ? { levels: { before: judgement.before.estimate, after: judgement.after.estimate } }
      : {}),
  };
}

function draws(means: readonly number[], seed: number): number[] {
  const uniform = seededUniform(seed);
  return means.map((mean) => geometricGaps.sampler({ mean, sigma: mean })(uniform));
}

const steadyThen = (count: number, mean: number, more: number, after: number): number[] => [
  ...new Array<number>(count).fill(mean),
  ...new Array<number>(more).fill(after),
];

const KEPT: Record<string, () => PictureInput> = {
  'gaps-risen': () => gapsInput('g', draws(steadyThen(30, 180, 16, 40), 3), 23),
  'gaps-silent': () => gapsInput('t', draws(steadyThen(34, 20, 0, 0), 5), 60),
  numbers: () => numbersInput(Array.from({ length: 40 }, (_, i) => (i < 30 ? 12 : 9) + ((i * 37) % 17) / 10)),
};

describe('a picture of gaps, or of ready values', () => {
  test.each(Object.keys(KEPT))('%s: draws as it did when somebody last looked at it', async (name) => {
    const { svg } = await drawPicture(KEPT[name]!());
    await expect(normalised(svg)).toMatchFileSnapshot(`../pictures/${name}.svg`);
  });

  test('says what its axis is, which side is better, and that the last point can only grow', () => {
    const texts = layout(KEPT['gaps-silent']!())
      .texts.map(({ text }) => text)
      .join(' ')
      .replaceAll('\u00a0', ' ');
    expect(texts).toContain('each point: one loss');
    expect(texts).toContain('higher is better');
    expect(texts).toContain('unfinished: 60 days so far');
    expect(texts).not.toContain('too young');
    expect(texts).not.toMatch(/NaN|undefined/);
    const alt = altText(KEPT['gaps-risen']!());
    expect(alt).toMatch(/The usual gap is \d+.accounts/);
    expect(alt).toContain('Churn has risen');
  });

  test('shows more of the short gaps than of the long ones, and every point within the plot', () => {
    const input = KEPT['gaps-risen']!();
    const { points, frame } = layout(input);
    const [low, high] = frame.yDomain;
    for (const { value } of points) {
      expect(value).toBeGreaterThan(low);
      expect(value).toBeLessThan(high);
    }
    const order = (values: readonly number[]): number[] =>
      values.map((_, i) => i).sort((a, b) => values[a]! - values[b]! || a - b);
    expect(order(points.map(({ value }) => value))).toEqual(order(input.chart!.points.map(({ value }) => value)));
    expect(points.filter(({ value }) => value > (low + high) / 2).length).toBeGreaterThan(points.length / 5);
  });

  test('no two texts touch, whatever the gaps and values', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('g' as const, 't' as const),
        fc.array(fc.oneof(fc.integer({ min: 0, max: 40 }), fc.integer({ min: 0, max: 90_000 })), {
          minLength: 1,
          maxLength: 11,
        }),
        fc.integer({ min: 0, max: 100_000 }),
        (kind, gaps, open) => {
          expect(faults(layout(gapsInput(kind, gaps, open)))).toEqual([]);
        },
      ),
      { numRuns: 60 },
    );
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 11 }),
        fc.constantFrom(1, 1e-6, 1e5),
        (values, unit) => {
          expect(faults(layout(numbersInput(values.map((value) => value * unit))))).toEqual([]);
        },
      ),
      { numRuns: 60 },
    );
  });
});
