import { describe, expect, it } from 'vitest';
import { dayFromIso } from '../../../src/days.ts';
import { asker, expectSound, type Row } from './asked.ts';

const cli = asker();
const FIXTURE = 'fixtures/exports/marrowby-recipe-cards.csv';
const first = dayFromIso('2024-01-01')!;

/** Accounts that start one after the other, and what becomes of each. */
const rows = (
  count: number,
  days: number,
  end: (i: number, start: number) => number | null,
  more: (i: number) => Partial<Row> = () => ({}),
): Row[] =>
  Array.from({ length: count }, (_, i) => {
    const start = first + Math.floor((i * days) / count);
    const gone = end(i, start);
    return { start, end: gone !== null && gone <= first + days ? gone : null, ...more(i) };
  });

describe('plan', { timeout: 180_000 }, () => {
  it('recommends what “has churn moved?” uses, and says what it rests on and costs', async () => {
    const told = await cli.ask(FIXTURE, 'plan');
    expectSound(told);
    const { plan, answer } = told.json;
    const verdict = (await cli.ask(FIXTURE, 'ask')).json;
    expect(plan.subgroupSize).toBe(verdict.plan.subgroupSize);
    expect(plan.tenurePoint).toEqual(verdict.plan.tenure);
    expect(plan.tenureWhy).toBe(verdict.plan.tenureWhy);
    expect(plan.sizeWhy).toBe(verdict.plan.sizeWhy);
    expect(plan.matured).toBe(verdict.data.matured);
    expect(plan.offers.find((offer: { chosen: boolean }) => offer.chosen).pointsNow).toBe(verdict.chart.points.length);
    expect(plan.offers.flatMap((offer: { reasons: string[] }) => offer.reasons).sort()).toEqual([
      'five-losses',
      'positive-lower-limit',
      'sees-move',
    ]);
    expect(
      plan.offers.map((offer: { subgroupSize: number }) => offer.subgroupSize).sort((a: number, b: number) => a - b),
    ).toEqual(Object.values(verdict.plan.sizes as Record<string, number>).sort((a, b) => a - b));
    for (const offer of plan.offers) {
      expect(offer.delayWeeks).toBeCloseTo((offer.delayPoints * offer.subgroupSize) / plan.inflowPerWeek, 9);
      expect(offer.weeksUntilVerdict).toBe(0);
      expect(offer.falseAlarmEvery).toBeGreaterThan(20);
    }
    expect(
      plan.months.filter((month: { risky: boolean }) => month.risky).map((month: { month: number }) => month.month),
    ).toEqual([3, 12]);
    expect(answer.headline).toContain('Count churn at 3 months, in points of 135 accounts');
    expect(answer.evidence.join(' ')).toMatch(/Kaplan-Meier/);
    expect(answer.evidence.join(' ')).toMatch(/log-rank test/);
    const text = await cli.text(FIXTURE, 'plan');
    expect(text).toContain('how should we count churn?');
    for (const sentence of [answer.headline, ...answer.evidence, ...answer.next]) expect(text).toContain(sentence);
  });

  it('a move that is named gets its own size, and the recommendation stays', async () => {
    const told = await cli.ask(FIXTURE, 'plan', 'for a rise by 40 % within 8 points');
    expectSound(told);
    const { plan, answer } = told.json;
    expect(plan).toMatchObject({ move: 1.4, within: 8, moveAsked: true, subgroupSize: 135 });
    const offer = plan.offers.find((one: { reasons: string[] }) => one.reasons.includes('sees-move'));
    expect(offer.chanceWithin).toBeGreaterThanOrEqual(0.8);
    expect(answer.next.join(' ')).toContain(`in subgroups of ${plan.sizeForMove}`);
    expect(answer.evidence.join(' ')).toContain('a rise by 40 %');
  });

  it('a size and an age that are asked for are kept, with their cost', async () => {
    const told = await cli.ask(FIXTURE, 'plan', '--tenure', '6 weeks', '--subgroup-size', '400');
    expectSound(told);
    expect(told.json.plan.offers.find((one: { chosen: boolean }) => one.chosen)).toMatchObject({
      reasons: ['asked'],
      subgroupSize: 400,
    });
    expect(told.json.answer.next[0]).toContain('has churn at 6 weeks moved, in subgroups of 400?');
  });

  it('one group is planned for by itself, at the age of all', async () => {
    const told = await cli.ask(FIXTURE, 'plan', '--segment', 'plan=Orchard');
    expectSound(told);
    expect(told.json.plan.groups).toEqual([]);
    expect(told.json.plan.matured).toBeLessThan(5000);
    expect(told.json.answer.next[0]).toContain('Orchard');
  });

  it('groups that leave at different paces are told apart', async () => {
    const list = rows(
      3000,
      700,
      (i, start) =>
        i % 2 === 0 ? (i % 5 === 0 ? start + 20 + (i % 60) : null) : i % 3 === 0 ? start + 15 + (i % 70) : null,
      (i) => ({
        plan: i % 2 === 0 ? 'Windowsill' : 'Orchard',
      }),
    );
    const told = await cli.ask(cli.file(list), 'plan');
    expectSound(told);
    expect(told.json.plan.logRank.pValue).toBeLessThan(1e-4);
    expect(told.json.answer.evidence.at(-1)).toMatch(
      /leave at different paces .*less than once in 10,000 times.*Orchard lost/,
    );
    const observed = told.json.plan.groups.reduce((sum: number, group: { lost: number }) => sum + group.lost, 0);
    const expected = told.json.plan.groups.reduce(
      (sum: number, group: { expected: number }) => sum + group.expected,
      0,
    );
    expect(expected).toBeCloseTo(observed, 6);
  });

  it.each([
    ['nobody was lost', rows(400, 500, () => null), /None of \d+ accounts was lost/],
    ['everybody was lost at once', rows(400, 500, (_, start) => start + 1), /All of \d+ accounts were lost/],
    ['one account', rows(1, 500, () => null), /take a churn of 5.0 % for granted/],
    ['two accounts that just started', rows(2, 1, () => null), /take a churn of 5.0 % for granted/],
    [
      'a group of one account',
      rows(
        300,
        500,
        (i, start) => (i % 4 === 0 ? start + 40 : null),
        (i) => ({ plan: i === 7 ? 'Lonely' : 'Orchard' }),
      ),
      /./,
    ],
    [
      'every account in one day',
      rows(200, 1, (i, start) => (i % 4 === 0 ? start : null)).map((row) => ({
        ...row,
        end: row.end === null ? null : row.start + 30,
      })),
      /./,
    ],
  ])('%s: sentences, never NaN', async (_, list, caution) => {
    const asOf = list.length === 200 ? ['--as-of', '2024-06-30'] : [];
    const told = await cli.ask(cli.file(list), 'plan', ...asOf);
    expectSound(told);
    expect(told.json.answer.cautions.join(' ')).toMatch(caution);
  });

  it.each([
    ['for a tripling', rows(600, 600, (i, start) => (i % 2 === 0 ? start + 20 : null)), /would be more than everybody/],
    ['for a rise by 0.001 %', rows(600, 600, (i, start) => (i % 9 === 0 ? start + 20 : null)), /so small that no size/],
    [
      'for a fall by 5 % within 3 points',
      rows(600, 600, (i, start) => (i % 9 === 0 ? start + 20 : null)),
      /is larger than the/,
    ],
  ])('%s: says why it cannot be had', async (words, list, caution) => {
    const told = await cli.ask(cli.file(list), 'plan', words);
    expectSound(told);
    expect(told.json.answer.cautions.join(' ')).toMatch(caution);
  });
});
