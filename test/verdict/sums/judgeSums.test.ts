import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { bernoulliCusum } from '../../../src/charts/sums/bernoulliCusum.ts';
import { chartAndJudge } from '../../../src/verdict/chartAndJudge.ts';
import { judgeSums } from '../../../src/verdict/sums/judgeSums.ts';
import { sumChart } from '../../../src/verdict/sums/sumChart.ts';
import { watchedExample } from '../../picture/questions/earlyExample.ts';

const SIZE = 100;
const level = Array.from({ length: 25 }, (_, i) => ({ accounts: SIZE, lost: [6, 5, 7, 8, 4][i % 5]! }));
const ofShares = chartAndJudge({ counts: level, runLength: false }).judgement;

const asked = (accounts: number, rate: (i: number) => number, seed = 8) => ({
  watched: { ...watchedExample(accounts, rate, 0.06, seed), subgroupSize: SIZE, baseline: level },
  ofShares,
  segments: [],
  correlation: null,
  inflowPerWeek: 21,
});

describe('the chart of the account-by-account sums', () => {
  it('has every account in one point, a point after every subgroup, and the values of the sums there', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 1_500 }),
        fc.double({ min: 0, max: 0.4, noNaN: true }),
        fc.integer({ min: 0, max: 500 }),
        fc.array(fc.integer({ min: 0, max: 2_000 }), { maxLength: 3 }),
        (accounts, rate, seed, more) => {
          const { watched } = asked(accounts, () => rate, seed);
          const alarms = [...watched.rise.alarms, ...watched.fall.alarms];
          const { chart, ends } = sumChart(watched, alarms, more);
          expect(chart.points.map(({ index }) => index)).toEqual(chart.points.map((_, i) => i + 1));
          const since = chart.points.slice(25);
          expect(since.reduce((sum, point) => sum + point.accounts, 0)).toBe(accounts);
          expect(since.reduce((sum, point) => sum + point.lost, 0)).toBe(watched.losses.length);
          for (let end = SIZE; end <= accounts; end += SIZE) expect(ends).toContain(end);
          for (const { at } of alarms) expect(ends).toContain(at);
          since.forEach((point, i) => {
            const end = ends[25 + i]!;
            const until = watched.losses.filter((loss) => loss <= end);
            const rise = bernoulliCusum(watched.watch.rise, until, end).value / watched.watch.rise.limit;
            const fall = bernoulliCusum(watched.watch.fall, until, end).value / watched.watch.fall.limit;
            expect(point.value).toBeCloseTo(fall > rise ? fall * point.lower : rise * point.upper, 9);
            expect(point.accounts).toBeGreaterThan(0);
          });
        },
      ),
      { numRuns: 60 },
    );
  });
});

describe('the verdict of the sums', () => {
  it('is the rise that began after the sum was last at zero', () => {
    const { chart, ends, judgement } = judgeSums(asked(1_900, (i) => (i < 1_000 ? 0.06 : 0.12), 9));
    expect(judgement.finding).toBe('risen');
    const { first, candidates } = judgement.start!;
    const zero = ends[first - 2]!;
    expect(Math.abs(zero - 1_000)).toBeLessThan(200);
    expect(candidates[0]).toBeLessThanOrEqual(first);
    expect(candidates[1]).toBeGreaterThanOrEqual(first);
    const [signal] = judgement.signals.filter(({ state }) => state === 'standing');
    expect(signal).toMatchObject({ side: 'above', members: [first, expect.any(Number)], until: chart.points.length });
    expect(chart.points[signal!.point - 1]!.value).toBeGreaterThanOrEqual(chart.points[0]!.upper);
  });

  it('is the fall on the other side', () => {
    const { judgement } = judgeSums(asked(2_400, (i) => (i < 1_000 ? 0.06 : 0.015)));
    expect(judgement.finding).toBe('fallen');
    expect(judgement.signals.at(-1)).toMatchObject({ side: 'below', state: 'standing' });
  });

  it('is steady over most fresh histories in which nothing changed, as it promises', () => {
    let moved = 0;
    const HISTORIES = 60;
    for (let seed = 100; seed < 100 + HISTORIES; seed++) {
      const { finding } = judgeSums(asked(1_200, () => 0.06, seed)).judgement;
      if (finding !== 'steady') moved++;
    }
    // The level is right here, so fewer than 5 in 100 are to be expected: more than 8 of 60 would happen once in 10,000.
    expect(moved).toBeLessThanOrEqual(8);
  });

  it('tells an excursion that went back as passed, and keeps the same figures every time', () => {
    const question = asked(3_000, (i) => (i >= 500 && i < 900 ? 0.15 : 0.05));
    const { judgement } = judgeSums(question);
    expect(judgement.finding).toBe('steady');
    expect(judgement.signals.map(({ state }) => state)).toContain('passed');
    expect(judgeSums(question).judgement).toEqual(judgement);
  });

  it('asks for more where points vary more than chance makes them', () => {
    const question = asked(1_200, () => 0.06);
    const plain = judgeSums(question).judgement.trust.wouldSee!;
    const spread = judgeSums({ ...question, correlation: 0.02 }).judgement.trust.wouldSee!;
    expect(spread.rise!).toBeGreaterThan(plain.rise!);
  });

  it('takes a move that only the mix made for what it is', () => {
    const question = asked(1_900, (i) => (i < 1_000 ? 0.06 : 0.12));
    const points = 25 + 19;
    const late = (i: number) => i >= 35;
    const segments = [
      {
        segment: 'Windowsill',
        accounts: Array.from({ length: points }, (_, i) => (late(i) ? 80 : 20)),
        lost: Array.from({ length: points }, (_, i) => (late(i) ? 12 : 3)),
      },
      {
        segment: 'Orchard',
        accounts: Array.from({ length: points }, (_, i) => (late(i) ? 20 : 80)),
        lost: Array.from({ length: points }, (_, i) => (late(i) ? 1 : 4)),
      },
    ];
    const { judgement } = judgeSums({ ...question, segments });
    expect(judgement.finding).toBe('mix-change');
    expect(judgement.mix?.largest.segment).toBe('Windowsill');
  });
});
