import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { blockProfile } from '../../../src/charts/standing/blockProfile.ts';
import type { SubgroupCount } from '../../../src/charts/types.ts';
import { drawPlate } from '../../../src/picture/picture.ts';
import { type ExplainPictureInput, explainAltText, explainScene } from '../../../src/picture/questions/explain.ts';
import { spreadAltText, spreadScene } from '../../../src/picture/questions/spread.ts';
import { targetAltText, targetScene } from '../../../src/picture/questions/target.ts';
import type { Scene } from '../../../src/picture/scene.ts';
import { chartAndJudge } from '../../../src/verdict/chartAndJudge.ts';
import { readSpread } from '../../../src/verdict/questions/spread/reading.ts';
import { readTarget } from '../../../src/verdict/questions/target/reading.ts';
import type { Verdict } from '../../../src/verdict/types.ts';
import { drawn } from '../../verdict/counts.ts';
import { faults } from '../faults.ts';
import { day } from '../inputs.ts';
import { normalised } from '../normalised.ts';

const about = {
  measure: 'lost within 3 months of starting',
  subject: 'Marrowby Seed Club export, all plans',
  one: 'account',
  asOf: day('2026-06-30'),
};

/** The three pictures of one run of counts. */
function pictures(counts: readonly SubgroupCount[], target: number, dated: boolean): Record<string, Scene | null> {
  const { chart, judgement } = chartAndJudge({ counts, runLength: false });
  const dates = counts.map((_, i) => {
    const start = dated ? day('2023-03-01') + i * 19 : null;
    return { firstStart: start, lastStart: start === null ? null : start + 18, asOf: start };
  });
  const spread = readSpread(chart, judgement);
  const explained: ExplainPictureInput = { ...explainInput(), ...about };
  return {
    target: targetScene({
      reading: readTarget(chart, judgement, target, chart.subgroupSize ?? 50),
      chart,
      dates,
      headline: `The target of ${target * 100} % is met, beyond chance: so many are lost within 3 months, and the true level lies between two figures.`,
      ...about,
    }),
    spread: spreadScene({
      reading: spread,
      headline: 'The points vary as much as chance alone would have them.',
      ...about,
    }),
    explain: explainScene(explained),
  };

  function explainInput(): Omit<ExplainPictureInput, keyof typeof about> {
    const moved = judgement.finding === 'risen' || judgement.finding === 'fallen';
    const verdict: Verdict = {
      outcome: moved ? (judgement.finding as 'risen' | 'fallen') : 'steady',
      headline: 'Churn is what the chart shows: about as many as before are lost within 3 months of starting.',
      evidence: [],
      cautions: [],
      next: [],
      since: judgement.start && { point: judgement.start.first, start: null, candidates: judgement.start.candidates },
      before: null,
      after: null,
      difference: null,
    };
    const reading = judgement.lastBlock;
    const design = {
      accounts: counts.map(({ accounts }) => accounts),
      baselineLast: chart.baseline.last,
      excluded: chart.baseline.excluded,
    };
    const profile = blockProfile(
      design,
      counts.map(({ lost }) => lost),
    ).filter(({ ratio }) => Number.isFinite(ratio));
    return {
      chart,
      dates,
      signals: judgement.signals,
      verdict,
      blocks: reading && profile.length > 0 ? { profile, reading } : null,
    };
  }
}

const run = (seed: number, length: number, accounts: number, rate: number, then = rate): SubgroupCount[] =>
  [...drawn(seed, length, accounts, rate), ...drawn(seed + 1, length, accounts, then)].map((lost) => ({
    accounts,
    lost,
  }));

const CASES: Readonly<Record<string, readonly SubgroupCount[]>> = {
  risen: run(3, 26, 120, 0.05, 0.1),
  steady: run(4, 26, 120, 0.05),
  'very long': run(5, 210, 60, 0.08),
  'two points': run(6, 1, 80, 0.1),
  'one point': [{ accounts: 50, lost: 3 }],
  'nobody lost': run(7, 8, 50, 0),
  'everybody lost': run(8, 8, 50, 1),
  'large points': run(9, 13, 4_000, 0.31),
  'unequal points': run(10, 13, 90, 0.07).map(({ lost }, i) => ({ accounts: 60 + ((i * 37) % 80), lost })),
};

describe('pictures of target, spread and explain', () => {
  test.each(Object.keys(CASES))('%s: no two texts touch, none leaves the drawing, nothing is drawn nowhere', (name) => {
    for (const target of [0, 0.02, 0.05, 0.5, 1])
      for (const scene of Object.values(pictures(CASES[name]!, target, true)))
        if (scene) expect(faults(scene)).toEqual([]);
  });

  test('whatever the counts', () => {
    const making = fc.record({
      seed: fc.integer({ min: 1, max: 1e6 }),
      points: fc.integer({ min: 1, max: 60 }),
      size: fc.integer({ min: 1, max: 900 }),
      rate: fc.oneof(fc.constantFrom(0, 0.004, 0.06, 0.5, 1), fc.double({ min: 0, max: 1, noNaN: true })),
      after: fc.double({ min: 0, max: 1, noNaN: true }),
      target: fc.double({ min: 0, max: 1, noNaN: true }),
      dated: fc.boolean(),
    });
    fc.assert(
      fc.property(making, ({ seed, points, size, rate, after, target, dated }) => {
        for (const scene of Object.values(pictures(run(seed, points, size, rate, after), target, dated)))
          if (scene) expect(faults(scene)).toEqual([]);
      }),
      { numRuns: 40 },
    );
  });

  test.each(['target', 'spread', 'explain'])(
    '%s: draws as it did when somebody last looked at it',
    async (question) => {
      const scene = pictures(CASES['risen']!, 0.06, true)[question]!;
      const { svg } = await drawPlate(scene, '');
      await expect(normalised(svg)).toMatchFileSnapshot(`../../pictures/question-${question}.svg`);
    },
  );

  test('their words for those who cannot see them state the finding', () => {
    const { chart, judgement } = chartAndJudge({ counts: CASES['risen']!, runLength: false });
    const headline = 'The target of 5 % is missed, beyond chance: 9.7 % are lost.';
    const reading = readTarget(chart, judgement, 0.05, 120);
    expect(targetAltText({ reading, chart, dates: [], headline, ...about })).toContain(headline);
    expect(spreadAltText({ reading: readSpread(chart, judgement), headline: 'They vary.', ...about })).toMatch(
      /times as much/,
    );
    const verdict = { outcome: 'risen', headline: 'Churn has risen.' } as Verdict;
    const blocks = { profile: [], reading: judgement.lastBlock! };
    expect(explainAltText({ chart, dates: [], signals: [], verdict, blocks, ...about })).toMatch(
      /Churn has risen.*is needed/,
    );
  });
});
