import { describe, expect, it } from 'vitest';
import { dayFromIso } from '../../../src/days.ts';
import { asker, expectSound, type Row } from './asked.ts';

const cli = asker();
const first = dayFromIso('2022-01-01')!;
const DAYS = 1000;

/** Accounts that start evenly over a thousand days; `life` gives the days each stays. */
const rows = (count: number, life: (i: number) => number | null, amount?: (i: number) => string): Row[] =>
  Array.from({ length: count }, (_, i) => {
    const start = first + Math.floor((i * DAYS) / count);
    const days = life(i);
    return {
      start,
      end: days !== null && start + days <= first + DAYS ? start + days : null,
      ...(amount ? { amount: amount(i) } : {}),
    };
  });

/** Lives at a constant chance of leaving, spread evenly over what chance would give: no luck, no seed. */
const constantLife =
  (perMonth: number) =>
  (i: number): number => {
    const u = ((i * 0.618033988749895) % 1) * 0.999 + 0.0005;
    return Math.max(1, Math.ceil((Math.log(u) / Math.log1p(-perMonth)) * 30.4375));
  };

describe('worth', { timeout: 180_000 }, () => {
  it('a constant hazard: both ways give 1/p', async () => {
    const told = await cli.ask(cli.file(rows(6000, constantLife(0.05), () => '10')), 'worth', '--as-of', '2024-09-27');
    expectSound(told);
    const { now, since, amount } = told.json.worth;
    expect(since).toBeNull();
    expect(now.constant.months.estimate).toBeGreaterThan(18.5);
    expect(now.constant.months.estimate).toBeLessThan(21.5);
    expect(now.measured.months.low).toBeLessThan(20);
    expect(now.measured.months.high).toBeGreaterThan(20);
    expect(now.values.perMonth).toBeCloseTo(10, 6);
    expect(now.values.measured.estimate).toBeCloseTo(10 * now.measured.months.estimate, 6);
    expect(now.restricted.months.estimate).toBeLessThan(now.measured.months.estimate);
    expect(amount).toMatchObject({ kind: 'amounts', periodStated: true, months: 1 });
    expect(told.json.answer.headline).toMatch(/if later months go on as months \d+ to \d+ did/);
  });

  it('after a move: now against before, over the months both were watched for and with a stated assumption', async () => {
    const told = await cli.ask('fixtures/exports/marrowby-recipe-cards.csv', 'worth');
    expectSound(told);
    const { now, before, common, since } = told.json.worth;
    const verdict = (await cli.ask('fixtures/exports/marrowby-recipe-cards.csv', 'ask')).json.verdict;
    expect(since).toBe(verdict.since.start);
    expect(now.counts).toEqual({ lost: verdict.after.lost, accounts: verdict.after.accounts });
    expect(before.counts).toEqual({ lost: verdict.before.lost, accounts: verdict.before.accounts });
    expect(common.difference.low).toBeGreaterThan(0);
    expect(common.now.estimate - common.before.estimate).toBeCloseTo(common.difference.estimate, 9);
    expect(now.measured.borrowed.from).toBe(common.months + 1);
    expect(told.json.answer.headline).toMatch(
      /stays about \d+ months, one from before \d+, if later months are as they were before/,
    );
    expect(told.json.answer.cautions.join(' ')).toContain('no column of amounts');
    expect(await cli.text('fixtures/exports/marrowby-recipe-cards.csv', 'worth')).toContain(told.json.answer.headline);
  });

  it('nothing moved: only now, and it says that early and late are taken together', async () => {
    const told = await cli.ask('fixtures/exports/marrowby-nothing-changed.csv', 'worth');
    expectSound(told);
    expect(told.json.worth).toMatchObject({ since: null, before: null, common: null });
    expect(told.json.answer.cautions.join(' ')).toContain('early and late accounts are taken together');
  });

  it.each([
    ['a year by its name', 'annual_price', /is taken to pay for a year/, 10],
    ['nothing by its name', 'price', /does not say which time an amount pays for/, 120],
  ])('an amount column that says %s', async (_, column, caution, perMonth) => {
    const told = await cli.ask(
      cli.file(
        rows(1500, constantLife(0.05), () => '120'),
        column,
      ),
      'worth',
    );
    expectSound(told);
    expect(told.json.worth.now.values.perMonth).toBeCloseTo(perMonth, 6);
    expect(told.json.answer.cautions.join(' ')).toMatch(caution);
  });

  it.each([
    [
      'some negative',
      (i: number) => (i % 10 === 0 ? '-5' : '10'),
      /Left out of the mean amount: 150 accounts with a negative amount/,
      10,
    ],
    ['some missing', (i: number) => (i % 10 === 0 ? '' : '10'), /150 accounts without one that can be read/, 10],
    ['all negative', () => '-5', /a negative one is no income, so there are lifetimes and no values/, null],
    ['all zero', () => '0', /is zero, so there are lifetimes and no values/, null],
    [
      'two currencies',
      (i: number) => (i % 2 === 0 ? '10 EUR' : '12 GBP'),
      /more than one currency \(EUR and GBP\)/,
      null,
    ],
  ])('amounts, %s: a sentence says so', async (_, amount, caution, perMonth) => {
    const told = await cli.ask(cli.file(rows(1500, constantLife(0.05), amount)), 'worth');
    expectSound(told);
    expect(told.json.answer.cautions.join(' ')).toMatch(caution);
    if (perMonth === null) expect(told.json.worth.now.values).toBeNull();
    else expect(told.json.worth.now.values.perMonth).toBeCloseTo(perMonth, 6);
  });

  it.each([
    [
      'everybody lost in the first month',
      rows(
        900,
        () => 10,
        () => '10',
      ),
      /^An account stays about 1.0 month /,
    ],
    [
      'nobody lost',
      rows(
        900,
        () => null,
        () => '10',
      ),
      /how long beyond cannot be said, since nobody left/,
    ],
    [
      'one account',
      rows(
        1,
        () => null,
        () => '10',
      ),
      /^Cannot say how long an account stays: 0 accounts have been watched/,
    ],
    [
      'twenty accounts',
      rows(20, constantLife(0.1), () => '10'),
      /^Cannot say how long an account stays: \d+ accounts? ha(s|ve) been watched through a first month, and it takes 30/,
    ],
  ])('%s: an answer or the reason for none', async (_, list, headline) => {
    const told = await cli.ask(cli.file(list), 'worth');
    expectSound(told);
    expect(told.json.answer.headline).toMatch(headline);
  });

  it('for one group', async () => {
    const told = await cli.ask('fixtures/exports/marrowby-recipe-cards.csv', 'worth', '--segment', 'plan=Orchard');
    expectSound(told);
    expect(told.json.worth.now.counts.accounts).toBeLessThan(3_000);
  });
});
