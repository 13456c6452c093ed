import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { GroupCensus } from '../../../src/census/groupsCensus.ts';
import type { SegmentCounts } from '../../../src/census/types.ts';
import { changeOf, stretchesOf } from '../../../src/verdict/questions/where/change.ts';
import { changeWords } from '../../../src/verdict/questions/where/changeWords.ts';
import { judgeGroups } from '../../../src/verdict/questions/where/judgeGroups.ts';
import { type WhereContext, whereWords } from '../../../src/verdict/questions/where/whereWords.ts';
import { type GroupOf, group } from './groups.ts';

const steady = (value: string, seed: number, more: Partial<GroupOf> = {}): GroupCensus =>
  group({ value, seed, points: 40, size: 100, rate: 0.06, ...more });
const context: WhereContext = {
  column: 'plan',
  tenure: '3 months',
  overall: 'Churn is steady: the usual 6.0 % are lost within 3 months.',
  change: null,
  stretches: null,
  needed: 1_020,
  cautions: [],
};
const all = ({ headline, evidence, cautions, next }: ReturnType<typeof whereWords>): string =>
  [headline, ...evidence, ...cautions, ...next].join('\n');

describe('groups judged together', () => {
  test('a group that clearly moved is found among steady ones, comes first, and is dated and sized by its own chart', () => {
    const readings = judgeGroups(
      [steady('Windowsill', 1), steady('Orchard', 2, { moved: { at: 30, rate: 0.13 } }), steady('Allotment', 3)],
      'plan',
    );
    expect(readings.map(({ name, finding }) => [name, finding])).toEqual([
      ['Orchard', 'risen'],
      ['Windowsill', 'steady'],
      ['Allotment', 'steady'],
    ]);
    const [orchard] = readings;
    expect(orchard!.since!.point).toBeGreaterThanOrEqual(28);
    expect(orchard!.since!.point).toBeLessThanOrEqual(32);
    expect(orchard!.after!.rate).toBeGreaterThan(orchard!.before!.rate);
    expect(orchard!.adjusted).toBeLessThanOrEqual(0.05);
    expect(orchard!.adjusted).toBeGreaterThan(orchard!.chance!);
  });

  test('what stands out by itself need not among many: the same group moved alone, and only on its own beside eleven others', () => {
    // A p value between 0.05 / 12 and 0.05: a rise that its own chart reads as one.
    const borderline = steady('Borderline', 24, { moved: { at: 31, rate: 0.092 } });
    const [alone] = judgeGroups([borderline], 'plan');
    expect(alone!.finding).toBe('risen');
    expect(alone!.chance).toBeGreaterThan(0.05 / 12);
    const others = Array.from({ length: 11 }, (_, i) => steady(`Other ${i}`, 200 + i, { points: 24 }));
    const among = judgeGroups([borderline, ...others], 'plan').find(({ name }) => name === 'Borderline')!;
    expect(among.finding).toBe('alone');
    expect(among.direction).toBe('risen');
    expect(among.adjusted).toBeGreaterThan(0.05);
  });

  test('groups that cannot be judged are no part of the family, and say why', () => {
    const readings = judgeGroups(
      [
        steady('Orchard', 5),
        steady('Free', 6, { rate: 0 }),
        steady('Trial', 7, { rate: 1 }),
        steady('New', 8, { points: 4 }),
        { ...steady('Tiny', 9), accounts: 1, matured: 1, lost: 0, subgroups: [] },
      ],
      'plan',
    );
    const of = (name: string) => readings.find((one) => one.name === name)!;
    expect(of('Free').finding).toBe('no-level');
    expect(of('Trial').finding).toBe('no-level');
    expect(of('New').finding).toBe('too-few');
    expect(of('Tiny').finding).toBe('too-few');
    expect(readings.filter(({ chance }) => chance !== null).map(({ name }) => name)).toEqual(['Orchard']);
    expect(of('Orchard').adjusted).toBe(of('Orchard').chance);
    const text = all(whereWords(readings, context));
    expect(text).toContain('the one group of “plan” that could be judged');
    expect(text).toContain('Free could not be judged: nobody was lost within 3 months');
    expect(text).toContain('Trial could not be judged: everybody was lost');
    expect(text).toContain('New (403 of 1,200)');
    expect(text).toContain('Tiny (1 of 1,200)');
  });

  test('a baseline that was asked for, or a day, splits every group there', () => {
    const groups = [steady('Orchard', 5), steady('New', 8, { points: 13 })];
    const byPoints = judgeGroups(groups, 'plan', { baseline: 20 });
    expect(byPoints.find(({ name }) => name === 'Orchard')!.chart!.baseline.last).toBe(20);
    const day = groups[0]!.subgroups[16]!.firstStart;
    const byDay = judgeGroups(groups, 'plan', { since: day });
    expect(byDay.find(({ name }) => name === 'Orchard')!.chart!.baseline.last).toBe(16);
    expect(byDay.find(({ name }) => name === 'New')!.chart!.baseline.last).toBe(13);
  });

  // Of 15 exports at most 0.75 are expected to have any group called moved; five or more come up in about 1 of 1,000 such runs.
  test('with nothing changed in eight groups, an export in which one is called moved is rare', () => {
    let exports = 0;
    let byThemselves = 0;
    for (let seed = 0; seed < 15; seed++) {
      const readings = judgeGroups(
        Array.from({ length: 8 }, (_, i) =>
          group({
            value: `g${i}`,
            seed: 1_000 * seed + 31 * i,
            points: 18 + 3 * i,
            size: 60 + 20 * i,
            rate: 0.05 + 0.01 * i,
          }),
        ),
        'plan',
      );
      if (readings.some(({ finding }) => finding === 'risen' || finding === 'fallen')) exports++;
      byThemselves += readings.filter(({ direction }) => direction !== null).length;
    }
    expect(exports).toBeLessThan(5);
    // The control: taken one by one, about 4 in 100 of the 120 groups read as moved.
    expect(byThemselves).toBeGreaterThan(exports);
    expect(byThemselves).toBeLessThan(15);
  }, 60_000);

  test('of several that really moved in eight, most are found', () => {
    let found = 0;
    for (let seed = 0; seed < 6; seed++) {
      const readings = judgeGroups(
        Array.from({ length: 8 }, (_, i) =>
          steady(`g${i}`, 50_000 + 1_000 * seed + 31 * i, i < 2 ? { moved: { at: 29, rate: 0.12 } } : {}),
        ),
        'plan',
      );
      found += readings.filter(({ finding }) => finding === 'risen').length;
    }
    expect(found).toBeGreaterThanOrEqual(10);
  }, 60_000);
});

describe('where, in words', () => {
  test('tell how many groups were looked at, what moved with its denominators, and end on what the figure may be used for', () => {
    const words = whereWords(
      judgeGroups(
        [
          steady('Orchard', 2, { moved: { at: 30, rate: 0.13 } }),
          steady('Allotment', 3),
          steady('Windowsill', 4, { points: 3 }),
        ],
        'plan',
      ),
      context,
    );
    expect(words.headline).toMatch(
      /^Churn has moved in one of the two groups of “plan” that could be judged: Orchard has risen, from \d+\.\d % to about \d+\.\d %\.$/,
    );
    expect(words.evidence[0]).toMatch(
      /^Orchard has risen: .* of [\d,]+ accounts; 95 % interval .* against .* before\./,
    );
    const text = all(words);
    expect(text).toContain('3 groups were looked at, and 2 could be judged');
    expect(text).toContain('Benjamini-Hochberg');
    expect(text).toMatch(/Allotment is steady at .* would have stood out with 80 % chance/);
    expect(text).toContain('All accounts together: Churn is steady');
    expect(words.cautions.at(-1)).toMatch(/^For pay, forecasts/);
    expect(words.next[0]).toContain('“has churn moved for Orchard?”');
  });

  test('groups that all moved the same way point to a common cause', () => {
    const rise = { moved: { at: 28, rate: 0.15 } };
    const words = whereWords(judgeGroups([steady('A', 2, rise), steady('B', 3, rise)], 'plan'), context);
    expect(words.headline).toMatch(/^Churn has moved in all two groups of “plan”: /);
    expect(words.next[0]).toContain('All groups moved the same way');
  });

  test('many steady groups become one line, and the pooled rest is told with its values', () => {
    const groups = [
      ...Array.from({ length: 5 }, (_, i) => steady(`g${i}`, 300 + i, { points: 24 })),
      steady('', 400, { value: null, pooled: { values: 4_988, without: 12 }, points: 24 }),
    ];
    const words = whereWords(judgeGroups(groups, 'plan'), context);
    expect(words.evidence.filter((line) => line.startsWith('Steady, each with'))).toHaveLength(1);
    const text = all(words);
    expect(text).toContain('the rest (4,988 values)');
    expect(text).toContain('“plan” has 4,993 values');
    expect(text).toContain('12 accounts that have none');
  });

  test('nothing that can be judged is said so, with what it takes', () => {
    const words = whereWords(
      judgeGroups([steady('A', 2, { points: 2 }), steady('B', 3, { points: 1 })], 'plan'),
      context,
    );
    expect(words.headline).toBe(
      'Where churn moved cannot be said yet: of the two groups of “plan” none could be judged.',
    );
    expect(all(words)).not.toMatch(/NaN|Infinity|undefined|null/);
  });

  test('no figure is ever missing, whatever the groups', () => {
    const any = fc.record({
      points: fc.integer({ min: 0, max: 16 }),
      size: fc.constantFrom(1, 2, 30, 500),
      rate: fc.constantFrom(0, 0.01, 0.2, 0.95, 1),
      seed: fc.integer({ min: 1, max: 1_000 }),
      rest: fc.boolean(),
    });
    fc.assert(
      fc.property(fc.array(any, { minLength: 1, maxLength: 4 }), (list) => {
        const readings = judgeGroups(
          list.map(({ rest, ...one }, i) =>
            group({ ...one, value: rest ? null : `g${i}`, pooled: rest ? { values: i, without: 1 } : null }),
          ),
          'plan',
        );
        expect(readings).toHaveLength(list.length);
        expect(all(whereWords(readings, context))).not.toMatch(/NaN|Infinity|undefined|null|\[object/);
      }),
      { numRuns: 25 },
    );
  }, 60_000);
});

const counts = (segment: string, accounts: readonly number[], lost: readonly number[]): SegmentCounts => ({
  segment,
  accounts,
  lost,
});

describe('the change of all accounts, told apart', () => {
  test('compares before and since the move, else what set the level with the rest, else halves', () => {
    expect(stretchesOf(40, 25, 31)).toEqual({ basis: 'move', beforeLast: 25, first: 31, last: 40 });
    expect(stretchesOf(28, 28, 17)).toEqual({ basis: 'move', beforeLast: 16, first: 17, last: 28 });
    expect(stretchesOf(40, 25, null)).toEqual({ basis: 'level', beforeLast: 25, first: 26, last: 40 });
    expect(stretchesOf(21, 21, null)).toEqual({ basis: 'halves', beforeLast: 10, first: 11, last: 21 });
    expect(stretchesOf(1, 1, null)).toBeNull();
  });

  test('a mix that moved is told as one: the shares make the change, the rates nothing', () => {
    const segments = [
      counts('Windowsill', [20, 20, 80, 80], [2, 2, 8, 8]),
      counts(
        'Orchard',
        [80, 80, 20, 20],
        [2, 2, 0.5, 0.5].map((d) => d * 1),
      ),
    ];
    const change = changeOf(segments, stretchesOf(4, 4, 3))!;
    expect(change.ratePart).toBeCloseTo(0, 12);
    expect(change.mixPart).toBeCloseTo(0.045, 12);
    const [whole, share] = changeWords(change, { before: 'before', after: 'since' });
    expect(whole).toContain('from 4.00 % (before) to 8.50 % (since): +4.50 percentage points');
    expect(whole).toContain('Rates within the groups make 0.00 of it');
    expect(whole).toContain('+4.50.');
    expect(share).toMatch(/^The group whose share mattered most is /);
  });

  test('where nothing moved the parts are told as a description, and no group is singled out', () => {
    const segments = [counts('A', [50, 50], [2, 9]), counts('B', [50, 50], [9, 2])];
    const told = changeWords(changeOf(segments, stretchesOf(2, 2, null))!, { before: 'before', after: 'since' });
    expect(told).toHaveLength(2);
    expect(told[0]).toMatch(/^All accounts together show no move to compare before and after, so the first half/);
    expect(told[1]).toContain('no news');
  });

  test('the figures told add up as they are printed, whatever the counts', () => {
    const cell = fc.tuple(fc.integer({ min: 1, max: 900 }), fc.integer({ min: 0, max: 1_000 }));
    fc.assert(
      fc.property(fc.array(fc.tuple(cell, cell), { minLength: 2, maxLength: 8 }), (list) => {
        const segments = list.map(([a, b], i) =>
          counts(`g${i}`, [a[0], b[0]], [Math.min(a[0], a[1]), Math.min(b[0], b[1])]),
        );
        const change = changeOf(segments, stretchesOf(2, 1, null))!;
        expect(change.ratePart + change.mixPart).toBeCloseTo(change.after - change.before, 12);
        const told = changeWords(change, { before: 'before', after: 'since' })[0]!;
        const figures =
          /from ([\d.]+) % .* to ([\d.]+) % .*: (\S+) percentage points\. .* make (\S+) of it .*groups, (\S+)\.$/.exec(
            told,
          )!;
        const [from, to, total, rates, mix] = figures
          .slice(1)
          .map((text) => Math.round(100 * Number(text.replace('−', '-'))));
        expect(to! - from!).toBe(total);
        expect(rates! + mix!).toBe(total);
      }),
    );
  });

  test('fewer than two groups, or nothing on one side, leaves nothing to tell apart', () => {
    expect(changeOf([counts('A', [5, 5], [1, 1])], stretchesOf(2, 1, null))).toBeNull();
    expect(changeOf([counts('A', [5, 0], [1, 0]), counts('B', [5, 0], [1, 0])], stretchesOf(2, 1, null))).toBeNull();
    expect(changeOf([], null)).toBeNull();
  });
});
