import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type FlowCell, flow } from '../../src/charts/reconcile/flows.ts';
import { matchFigures, reportedFigure } from '../../src/charts/reconcile/match.ts';
import { periodsOf, type WayKind, waysOf } from '../../src/charts/reconcile/ways.ts';

/** Three months of a small club, worked out by hand: 100 at the start of month 0. */
const CLUB: readonly FlowCell[] = [
  { started: -1, lost: null, accounts: 85 },
  { started: -1, lost: 0, accounts: 5 },
  { started: -1, lost: 1, accounts: 10 },
  { started: 0, lost: null, accounts: 15 },
  { started: 0, lost: 0, accounts: 5 },
  { started: 2, lost: null, accounts: 20 },
];

const figures = (first: number, last: number, kind: 'month' | 'quarter' = 'month') =>
  Object.fromEntries(waysOf(CLUB, { kind, first, last }).map(({ way, value }) => [way, value])) as Partial<
    Record<WayKind, number>
  >;

describe('customers over months', () => {
  it('start, joined, lost and end, those who joined and left in between counted on both sides', () => {
    expect(flow(CLUB, 0, 0)).toEqual({ first: 0, last: 0, start: 100, added: 20, lost: 10, lostOfStart: 5, end: 110 });
    expect(flow(CLUB, 1, 1)).toEqual({ first: 1, last: 1, start: 110, added: 0, lost: 10, lostOfStart: 10, end: 100 });
    expect(flow(CLUB, 0, 2)).toEqual({ first: 0, last: 2, start: 100, added: 40, lost: 20, lostOfStart: 15, end: 120 });
  });

  const cells = fc.array(
    fc
      .record({
        started: fc.integer({ min: -1, max: 9 }),
        stayed: fc.option(fc.integer({ min: 0, max: 12 })),
        accounts: fc.integer({ min: 0, max: 50 }),
      })
      .map(({ started, stayed, accounts }) => ({ started, lost: stayed === null ? null : started + stayed, accounts })),
    { maxLength: 30 },
  );
  it('what one month ends with, the next one starts with', () => {
    fc.assert(
      fc.property(cells, fc.integer({ min: 0, max: 8 }), (all, month) => {
        expect(flow(all, month, month).end).toBe(flow(all, month + 1, month + 1).start);
      }),
    );
  });

  it('months add up to the period', () => {
    fc.assert(
      fc.property(cells, fc.integer({ min: 0, max: 4 }), fc.integer({ min: 0, max: 4 }), (all, first, more) => {
        const last = first + more;
        const months = Array.from({ length: more + 1 }, (_, i) => flow(all, first + i, first + i));
        const whole = flow(all, first, last);
        expect(whole.lost).toBe(months.reduce((sum, { lost }) => sum + lost, 0));
        expect(whole.added).toBe(months.reduce((sum, { added }) => sum + added, 0));
        expect(whole.end).toBe(months.at(-1)!.end);
        expect(whole.lostOfStart).toBeLessThanOrEqual(Math.min(whole.lost, whole.start));
      }),
    );
  });
});

describe('the common ways of getting a churn figure', () => {
  it('of a month', () => {
    const month = figures(0, 0);
    expect(month['over-start']).toBeCloseTo(0.1, 12);
    expect(month['of-start']).toBeCloseTo(0.05, 12);
    expect(month['over-average']).toBeCloseTo(10 / 105, 12);
    expect(month['over-start-plus-new']).toBeCloseTo(10 / 120, 12);
    expect(month['times-to-year']).toBeCloseTo(1.2, 12);
    expect(month['compounded-to-year']).toBeCloseTo(1 - 0.9 ** 12, 12);
    expect(month['mean-of-months']).toBeUndefined();
  });

  it('of several months', () => {
    const quarter = figures(0, 2, 'quarter');
    expect(quarter['over-start']).toBeCloseTo(0.2, 12);
    expect(quarter['of-start']).toBeCloseTo(0.15, 12);
    expect(quarter['over-average']).toBeCloseTo(20 / 110, 12);
    expect(quarter['over-start-plus-new']).toBeCloseTo(20 / 140, 12);
    expect(quarter['mean-of-months']).toBeCloseTo((10 / 100 + 10 / 110 + 0) / 3, 12);
    expect(quarter['pooled-months']).toBeCloseTo(20 / 310, 12);
  });

  it('nobody at the start gives no rate over the start, and never a value that is no number', () => {
    const none = waysOf([{ started: 0, lost: 0, accounts: 4 }], { kind: 'month', first: 0, last: 0 });
    expect(none.map(({ way, value }) => [way, value])).toEqual([['over-start-plus-new', 1]]);
    expect(waysOf([], { kind: 'month', first: 0, last: 0 })).toEqual([]);
  });

  it('everybody lost is 100 % a month, 1,200 % when multiplied up and 100 % when compounded', () => {
    const all = waysOf([{ started: -1, lost: 0, accounts: 4 }], { kind: 'month', first: 0, last: 0 });
    const value = (kind: WayKind) => all.find(({ way }) => way === kind)?.value;
    expect([value('over-start'), value('times-to-year'), value('compounded-to-year')]).toEqual([1, 12, 1]);
  });
});

describe('the periods a figure may be about', () => {
  it('the last complete month, quarter and twelve months, all of them, and each of the last twelve', () => {
    // Months from January 2023 = 0; complete to May 2025 = 28.
    const periods = periodsOf(0, 28);
    expect(periods.slice(0, 4)).toEqual([
      { kind: 'month', first: 28, last: 28 },
      { kind: 'quarter', first: 24, last: 26 },
      { kind: 'year', first: 17, last: 28 },
      { kind: 'all', first: 0, last: 28 },
    ]);
    expect(periods.slice(4).map(({ first }) => first)).toEqual([27, 26, 25, 24, 23, 22, 21, 20, 19, 18, 17]);
  });

  it('a named month comes first, with its quarter and the twelve months to its end', () => {
    expect(periodsOf(0, 28, 14).slice(0, 4)).toEqual([
      { kind: 'month', first: 14, last: 14 },
      { kind: 'quarter', first: 12, last: 14 },
      { kind: 'year', first: 3, last: 14 },
      { kind: 'month', first: 28, last: 28 },
    ]);
    expect(periodsOf(0, 28, 40)).toEqual(periodsOf(0, 28));
  });

  it('a short history has only what it holds, and none twice', () => {
    expect(periodsOf(5, 5)).toEqual([{ kind: 'month', first: 5, last: 5 }]);
    expect(periodsOf(5, 4)).toEqual([]);
    expect(periodsOf(3, 5)).toEqual([
      { kind: 'month', first: 5, last: 5 },
      { kind: 'quarter', first: 3, last: 5 },
      { kind: 'month', first: 4, last: 4 },
      { kind: 'month', first: 3, last: 3 },
    ]);
  });
});

describe('a reported figure', () => {
  it('stands for all that rounds to it', () => {
    const figure = reportedFigure(0.142, 1);
    expect(figure.low).toBeCloseTo(0.1415, 12);
    expect(figure.high).toBeCloseTo(0.1425, 12);
    expect(reportedFigure(0.14, 0).high).toBeCloseTo(0.145, 12);
  });

  it('is told from those that come near', () => {
    const tried = [0.1425, 0.14251, 0.1415, 0.1, 0.15].map((value, i) => ({ value, i }));
    const { giving, nearest } = matchFigures(tried, reportedFigure(0.142, 1));
    expect(giving.map(({ i }) => i)).toEqual([0, 2]);
    expect(nearest.map(({ i }) => i)).toEqual([1, 4, 3]);
  });

  it('that fits by coincidence is reckoned with when many figures lie close to it', () => {
    const many = Array.from({ length: 101 }, (_, i) => ({ value: 0.08 + i * 0.0004 }));
    // 101 figures over 0.04: a whole percent holds about 25 of them.
    expect(matchFigures(many, reportedFigure(0.1, 0)).byChance).toBeGreaterThan(15);
    expect(matchFigures(many, reportedFigure(0.1, 2)).byChance).toBeLessThan(0.5);
    expect(matchFigures([{ value: 0.3 }], reportedFigure(0.1, 0)).byChance).toBe(0);
    expect(matchFigures(many, reportedFigure(0, 0)).byChance).toBe(0);
  });
});
