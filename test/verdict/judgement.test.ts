import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { SegmentCounts } from '../../src/census/types.ts';
import { pChart } from '../../src/charts/kinds/pChart.ts';
import { exactRunLength } from '../../src/charts/runLength/exactRunLength.ts';
import { countZones } from '../../src/charts/runLength/zoneChances.ts';
import type { SubgroupCount } from '../../src/charts/types.ts';
import { chartAndJudge } from '../../src/verdict/chartAndJudge.ts';
import { type Finding, type Judgement, judge, LEAST_POINTS } from '../../src/verdict/judgement.ts';
import { calm, points } from './counts.ts';

/** Every number of a judgement, with its place. */
function numbers(value: unknown, place = ''): [string, number][] {
  if (typeof value === 'number') return [[place, value]];
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, one]) => numbers(one, `${place}.${key}`));
}

function expectFinite(judgement: Judgement): void {
  for (const [place, value] of numbers(judgement)) expect(Number.isFinite(value), `${place} is ${value}`).toBe(true);
}

const judged = (counts: readonly SubgroupCount[], segments?: readonly SegmentCounts[], baselineLast?: number) =>
  judge(pChart(counts, baselineLast === undefined ? {} : { baselineLast }), segments ? { segments } : {});

/** Accounts and losses per point of two plans, as segments and as the sums that are charted. */
function twoPlans(length: number, at: (point: number) => [[number, number], [number, number]]) {
  const rows = Array.from({ length }, (_, i) => at(i + 1));
  const plan = (segment: string, k: 0 | 1): SegmentCounts => ({
    segment,
    accounts: rows.map((row) => row[k][0]),
    lost: rows.map((row) => row[k][1]),
  });
  return {
    segments: [plan('Windowsill', 0), plan('Orchard', 1)],
    counts: rows.map(([a, b]) => ({ accounts: a[0] + b[0], lost: a[1] + b[1] })),
  };
}

describe('each finding', () => {
  test('too few points: eleven, whatever they say', () => {
    for (const lost of [calm(LEAST_POINTS - 1), [...calm(6), 40, 40, 40, 40, 40], [0], [0, 0, 0]]) {
      const found = judged(points(100, lost));
      expect(found.finding).toBe('too-few-points');
      expect(found.trust.falseVerdictChance).toBeNull();
      expectFinite(found);
    }
    expect(judged(points(100, calm(LEAST_POINTS))).finding).not.toBe('too-few-points');
  });

  test('no level: nobody lost, or everybody, in the baseline', () => {
    expect(judged(points(50, calm(20, [0]))).finding).toBe('no-level');
    expect(judged(points(50, calm(20, [50]))).finding).toBe('no-level');
    expect(judged(points(50, [...calm(25, [0]), ...calm(10, [9])])).finding).toBe('no-level');
  });

  test('unsteady baseline: the level moved while it was being set', () => {
    const found = judged(points(100, [...calm(10), ...calm(15, [16, 18, 15, 17]), ...calm(10, [16, 18, 15, 17])]));
    expect(found.finding).toBe('unsteady-baseline');
    expect(found.steadiness).toMatchObject({ splitAfter: 10 });
    expect(found.steadiness!.pValue).toBeLessThan(0.01);
    expect(found.signals.every(({ state }) => state !== 'standing')).toBe(true);
  });

  test('risen and fallen: the last stretch stands out, and is dated', () => {
    const risen = judged(points(100, [...calm(30), ...calm(10, [13, 15, 12, 14])]));
    expect(risen.finding).toBe('risen');
    expect(risen.start).toMatchObject({ first: 31 });
    expect(risen.signals.some(({ state, side }) => state === 'standing' && side === 'above')).toBe(true);
    const fallen = judged(points(100, [...calm(30, [12, 10, 14, 12, 11]), ...calm(12, [4, 5, 3])]));
    expect(fallen.finding).toBe('fallen');
    expect(fallen.start).toMatchObject({ first: 31 });
    expect(fallen.signals.some(({ state, side }) => state === 'standing' && side === 'below')).toBe(true);
  });

  test('risen on trial limits, where the baseline is every point there is', () => {
    const found = judged(points(100, [...calm(16), ...calm(8, [15, 17, 14])]));
    expect(found.finding).toBe('risen');
    expect(found.start).toMatchObject({ first: 17 });
    // The points before the move are what must be steady, not all of them.
    expect(found.steadiness!.pValue).toBeGreaterThan(0.01);
    expect(found.dispersion!.pValue).toBeGreaterThan(0.01);
  });

  test('steady: nothing stands, and what could have been missed is said', () => {
    const found = judged(points(100, calm(40)));
    expect(found.finding).toBe('steady');
    expect(found.start).toBeNull();
    const { wouldSee, falseVerdictChance, falseAlarmEvery } = found.trust;
    expect(wouldSee!.rise).toBeGreaterThan(0.06);
    expect(wouldSee!.fall).toBeLessThan(0.06);
    expect(wouldSee!.chance).toBe(0.8);
    expect(falseVerdictChance).toBeLessThanOrEqual(0.05);
    expect(falseAlarmEvery).toBeGreaterThan(20);
    expect(found.wouldSeeFrom).toBe(26);
  });

  test('mix change: two steady plans, of which the one that loses more grows', () => {
    const { counts, segments } = twoPlans(40, (point) =>
      point <= 28
        ? [
            [80, 3 + (point % 2)],
            [20, 4],
          ]
        : [
            [20, 1],
            [80, 15 + 2 * (point % 2)],
          ],
    );
    const found = judged(counts, segments);
    expect(found.finding).toBe('mix-change');
    expect(found.mix).toMatchObject({
      explains: 'all',
      largest: { before: expect.closeTo(0.8), after: expect.closeTo(0.2) },
    });
    expect(found.segmentsDiffer!.pValue).toBeLessThan(0.001);
    // Its flags are explained: neither standing nor to be watched.
    expect(found.signals.length).toBeGreaterThan(0);
    expect(found.signals.filter(({ speaks }) => speaks === 'shift').every(({ state }) => state === 'passed')).toBe(
      true,
    );
    // The same counts without their plans would have read as a rise.
    expect(judged(counts).finding).toBe('risen');
  });

  test('risen, not a mix change, when both plans lose more and their shares stay', () => {
    const { counts, segments } = twoPlans(40, (point) =>
      point <= 28
        ? [
            [60, 2 + (point % 2)],
            [40, 4 + ((point + 1) % 2)],
          ]
        : [
            [60, 6 + (point % 2)],
            [40, 10],
          ],
    );
    const found = judged(counts, segments);
    expect(found.finding).toBe('risen');
    expect(found.mix!.explains).toBe('none');
  });

  test('mix unclear: part of the move is left within the plans, too little to stand by itself', () => {
    const { counts, segments } = twoPlans(40, (point) =>
      point <= 28
        ? [
            [80, 3 + (point % 2)],
            [20, 4],
          ]
        : [
            [65, 4 + (point % 2)],
            [35, 8 + (point % 3 === 0 ? 1 : 0)],
          ],
    );
    const found = judged(counts, segments);
    expect(found.mix!.explains).toBe('unclear');
    expect(found.finding).toBe('mix-unclear');
  });

  test('a baseline that moved only with the mix is judged on, and the mix is told', () => {
    const { counts, segments } = twoPlans(40, (point) =>
      point <= 12
        ? [
            [90, 4 + (point % 2)],
            [10, 2],
          ]
        : [
            [40, 2],
            [60, 12 + (point % 2)],
          ],
    );
    const found = judged(counts, segments);
    expect(found.steadiness!.pValue).toBeLessThan(0.01);
    expect(found.finding).not.toBe('unsteady-baseline');
    expect(found.mix!.explains).toBe('all');
  });

  test('points that vary far more than the binomial allows raise the bar', () => {
    const wild = [20, 2, 18, 1, 22, 3, 17, 2, 19, 1, 21, 4];
    const found = judged(points(100, [...calm(25, wild), ...calm(6, [20, 8, 22, 9])]));
    expect(found.dispersion!.pValue).toBeLessThan(0.01);
    expect(found.finding).toBe('steady');
  });
});

describe('points left out by decision', () => {
  test('do not make a trial level unsteady, and the split keeps its number on the chart', () => {
    const lost = [...calm(16), ...calm(8, [15, 17, 14])];
    lost[3] = 60;
    const chart = pChart(points(100, lost), { excluded: [4] });
    expect(judge(chart).finding).toBe('risen');
    // With it the points before the move are no level.
    expect(judge(pChart(points(100, lost))).finding).not.toBe('risen');

    const split = [...calm(12), ...calm(13, [16, 18, 15, 17])];
    split[3] = 60;
    const found = judge(pChart(points(100, [...split, ...calm(10, [16])]), { baselineLast: 25, excluded: [4] }));
    expect(found.finding).toBe('unsteady-baseline');
    expect(found.steadiness!.splitAfter).toBe(12);
  });
});

describe('degenerate counts get a typed answer', () => {
  const cases: [string, readonly SubgroupCount[], Finding[]][] = [
    ['one point', points(100, [3]), ['too-few-points']],
    [
      'one account a point, one lost now and then',
      points(1, calm(57, [0, 0, 1, 0, 0])),
      ['steady', 'unsteady-baseline'],
    ],
    ['one account a point, none lost', points(1, calm(57, [0])), ['no-level']],
    ['one account a point, all lost', points(1, calm(57, [1])), ['no-level']],
    ['a single loss in all', points(30, [...calm(20, [0]), 1, ...calm(20, [0])]), ['steady', 'unsteady-baseline']],
    ['all but one lost', points(30, [...calm(20, [30]), 29, ...calm(20, [30])]), ['steady', 'unsteady-baseline']],
    ['all lost after a usual baseline', points(100, [...calm(25), ...calm(10, [100])]), ['risen']],
    ['none lost after a usual baseline', points(100, [...calm(25, [12, 14, 13]), ...calm(10, [0])]), ['fallen']],
    ['ten million accounts a point', points(1e7, calm(40, [6e5, 6e5 + 700, 6e5 - 600])), ['steady']],
    ['a huge point among small ones', [...points(50, calm(25, [3, 4, 2])), { accounts: 1e7, lost: 6e5 }], ['steady']],
    ['exactly half lost, always', points(2, calm(40, [1])), ['steady']],
  ];
  test.each(cases)('%s', (_, counts, findings) => {
    const { judgement } = chartAndJudge({ counts });
    expect(findings).toContain(judgement.finding);
    expectFinite(judgement);
  });

  test('a baseline of one point, and of all but one, are judged', () => {
    const counts = points(100, calm(30));
    for (const baselineLast of [1, 2, 29, 30, 400]) {
      const { judgement } = chartAndJudge({ counts, baselineLast });
      expect(judgement.finding).toBe('steady');
      expectFinite(judgement);
    }
  });

  test('any counts at all are judged without an exception, and every number is finite', () => {
    const size = fc.oneof(fc.constant(1), fc.integer({ min: 1, max: 40 }), fc.integer({ min: 1, max: 5_000 }));
    const count = size.chain((accounts) =>
      fc.record({
        accounts: fc.constant(accounts),
        lost: fc.oneof(fc.constant(0), fc.constant(accounts), fc.integer({ min: 0, max: accounts })),
      }),
    );
    fc.assert(
      fc.property(fc.array(count.map(Object.freeze), { minLength: 1, maxLength: 36 }), (counts) => {
        const { judgement, chart } = chartAndJudge({ counts: Object.freeze(counts) as readonly SubgroupCount[] });
        expectFinite(judgement);
        if (chart.points.length < LEAST_POINTS) expect(judgement.finding).toBe('too-few-points');
        const standing = judgement.signals.filter(({ state }) => state === 'standing');
        if (judgement.finding !== 'risen' && judgement.finding !== 'fallen') expect(standing).toEqual([]);
        else expect(standing.length).toBeGreaterThan(0);
      }),
      { numRuns: 25 },
    );
  });
});

describe('counting those who stayed', () => {
  test('turns risen into fallen and leaves everything else', () => {
    const counts = points(100, [...calm(30), ...calm(10, [13, 15, 12, 14])]);
    const kept = counts.map(({ accounts, lost }) => ({ accounts, lost: accounts - lost }));
    expect(judged(counts).finding).toBe('risen');
    const mirror = judged(kept);
    expect(mirror.finding).toBe('fallen');
    expect(mirror.start!.first).toBe(judged(counts).start!.first);
  });
});

describe('a move that began inside the usual baseline', () => {
  const counts = points(100, [...calm(16), ...calm(30, [15, 17, 14, 16])]);

  test('is found against the points before it', () => {
    const { chart, judgement } = chartAndJudge({ counts });
    expect(judgement.finding).toBe('risen');
    expect(chart.baseline).toMatchObject({ last: 16, provisional: true });
    expect(judgement.start!.first).toBe(17);
  });

  test('but a baseline that the asker fixed is not touched', () => {
    const { chart, judgement } = chartAndJudge({ counts, baselineLast: 25 });
    expect(chart.baseline.last).toBe(25);
    expect(judgement.finding).toBe('unsteady-baseline');
  });

  test('nor is one shortened below the fewest points that say anything', () => {
    const early = points(100, [...calm(8), ...calm(38, [15, 17, 14, 16])]);
    const { chart, judgement } = chartAndJudge({ counts: early });
    expect(chart.baseline.last).toBe(25);
    expect(judgement.finding).toBe('unsteady-baseline');
  });
});

describe('which tests decide', () => {
  const stepped = points(100, [...calm(25), ...calm(12, [11, 12, 11, 12])]);

  const shifts = ({ signals }: Judgement) =>
    new Set(signals.filter(({ speaks }) => speaks === 'shift').map((signal) => signal.test));

  test('only the chosen ones raise flags, and the others of their kind are not shown', () => {
    const all = chartAndJudge({ counts: stepped }).judgement;
    expect(shifts(all)).toEqual(new Set([2, 5, 6]));
    const few = chartAndJudge({ counts: stepped, tests: [2] }).judgement;
    expect(few.finding).toBe('risen');
    expect(shifts(few)).toEqual(new Set([2]));
    const none = chartAndJudge({ counts: stepped, tests: [1] }).judgement;
    expect(shifts(none)).toEqual(new Set());
    expect(none.finding).toBe('steady');
  });

  test('all five named are the same as none named', () => {
    expect(chartAndJudge({ counts: stepped, tests: [1, 2, 3, 5, 6] })).toEqual(chartAndJudge({ counts: stepped }));
  });

  test('threshold, what could have been missed and the figures of trust are those of the chosen tests', () => {
    const { trust: all } = chartAndJudge({ counts: points(100, calm(50)) }).judgement;
    const { trust: one } = chartAndJudge({ counts: points(100, calm(50)), tests: [1] }).judgement;
    expect(one.settings).toMatchObject({ n: 100, tests: [1], sigmaZ: 1 });
    expect(one.falseAlarmEvery!).toBeGreaterThan(2 * all.falseAlarmEvery!);
    expect(one.delay!.rise!.points!).toBeGreaterThan(all.delay!.rise!.points!);
    // One test alone flags fewer of the blocks that would stand: a larger move is needed.
    expect(one.wouldSee!.rise!).toBeGreaterThan(all.wouldSee!.rise!);
    expect(one.falseVerdictChance!).toBeLessThanOrEqual(0.05);
  });

  test('without the trend test the figures are exact and have no standard error', () => {
    const counts = points(100, calm(50));
    const { trust } = chartAndJudge({ counts, tests: [1, 2, 5, 6] }).judgement;
    expect(trust).toMatchObject({ method: 'exact', standardError: null });
    const { chart } = chartAndJudge({ counts });
    const design = { size: 100, center: chart.center, rate: chart.center, sigmaZ: 1, correlation: 0 };
    const exact = exactRunLength(countZones(design), [1, 2, 5, 6]);
    expect(trust.falseAlarmEvery).toBe(exact.mean);
    expect(trust.runLength).toEqual({ mean: exact.mean, median: exact.median, p10: exact.p10, p90: exact.p90 });
    const simulated = chartAndJudge({ counts }).judgement.trust;
    expect(simulated.method).toBe('simulated');
    expect(simulated.standardError).toBeGreaterThan(0);
    // Points of two sizes are too many for the chain.
    const two = points(100, calm(50)).map((point, i) => (i === 3 ? { accounts: 101, lost: 6 } : point));
    expect(chartAndJudge({ counts: two, tests: [1, 2, 5, 6] }).judgement.trust).toMatchObject({
      method: 'simulated',
      settings: { n: null },
    });
  });
});

describe('how soon a move is flagged', () => {
  test('in points, accounts and weeks that agree, for a rise by half and a halving', () => {
    const { chart, judgement } = chartAndJudge({
      counts: points(100, calm(50)),
      tests: [1, 2, 5, 6],
      accountsPerWeek: 80,
    });
    const { rise, fall } = judgement.trust.delay!;
    expect(rise!.rate).toBeCloseTo(1.5 * chart.center, 12);
    expect(fall!.rate).toBeCloseTo(0.5 * chart.center, 12);
    for (const one of [rise!, fall!]) {
      expect(one.points!).toBeGreaterThan(1);
      expect(one.points!).toBeLessThan(judgement.trust.falseAlarmEvery! / 4);
      expect(one.accounts!).toBeCloseTo(100 * one.points!, 9);
      expect(one.weeks!).toBeCloseTo(one.accounts! / 80, 9);
    }
  });

  test('without a known pace there are no weeks; a rate that would pass 1 has no rise by half', () => {
    expect(chartAndJudge({ counts: points(100, calm(50)) }).judgement.trust.delay!.rise!.weeks).toBeNull();
    const most = chartAndJudge({ counts: points(100, calm(50, [80, 82, 79, 81])) }).judgement;
    expect(most.trust.delay!.rise).toBeNull();
    expect(most.trust.delay!.fall!.points).toBeCloseTo(1, 2);
    expectFinite(most);
  });

  test('a usual level from fewer points makes the range of the false-alarm figure wider, down most of all', () => {
    const of = (baselineLast: number) =>
      chartAndJudge({ counts: points(100, calm(60)), baselineLast, tests: [1, 2, 5, 6] }).judgement.trust.estimated!;
    const few = of(12);
    const many = of(50);
    expect([few.points, many.points]).toEqual([12, 50]);
    expect(few.low).toBeLessThan(many.low);
    for (const { low, high, falseAlarmEvery } of [few, many]) {
      expect(low).toBeLessThan(falseAlarmEvery!);
      expect(falseAlarmEvery!).toBeLessThan(high!);
    }
  });
});
