import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { seededUniform } from '../../../src/charts/random/uniform.ts';
import { dayFromIso, isoDay } from '../../../src/days.ts';
import { asker, expectSound } from './asked.ts';

const cli = asker();
let folder: string;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'ebbline-revenue-'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const first = dayFromIso('2023-01-02')!;
let files = 0;

interface Made {
  readonly accounts?: number;
  /** chance of a loss within three months for the i-th account paying this much */
  readonly rate?: (i: number, amount: number) => number;
  /** as written in the file */
  readonly amount?: (i: number, amount: number) => string;
  /** an account that stays has a second row at this factor */
  readonly change?: (i: number) => number | null;
  readonly currency?: (i: number) => string;
  readonly plan?: (i: number) => string;
  readonly header?: string;
}

/** An export: two accounts a day, each paying 6.50, 12 or 24; losses fall in the first three months. */
function made({ accounts = 1600, rate = () => 0.1, header = 'mrr', ...how }: Made = {}): string {
  const uniform = seededUniform(7);
  const lines = [`id,plan,start,end,${header}${how.currency ? ',currency' : ''}`];
  for (let i = 0; i < accounts; i++) {
    const start = first + Math.floor(i / 2);
    const amount = [6.5, 12, 24][Math.floor(uniform() * 3)]!;
    const lost = uniform() < rate(i, amount);
    const end = lost ? isoDay(start + 5 + Math.floor(uniform() * 80)) : '';
    const factor = lost ? null : (how.change?.(i) ?? null);
    const row = (from: number, to: string, paid: number): void => {
      const tail = how.currency ? `,${how.currency(i)}` : '';
      lines.push(
        `k${i},${how.plan?.(i) ?? 'Orchard'},${isoDay(from)},${to},${how.amount?.(i, paid) ?? paid.toFixed(2)}${tail}`,
      );
    };
    if (factor === null) row(start, end, amount);
    else {
      row(start, isoDay(start + 30), amount);
      row(start + 30, end, amount * factor);
    }
  }
  const path = join(folder, `export-${files++}.csv`);
  writeFileSync(path, `${lines.join('\n')}\n`);
  return path;
}

const AT = ['--tenure', '3 months', '--subgroup-size', '40'];

describe('revenue', () => {
  it('a steady business: the usual level, what could have been missed, and the same answer from the chart that is asked for', async () => {
    const path = made();
    const told = await cli.ask(path, 'revenue', ...AT);
    expectSound(told);
    const { revenue, answer } = told.json;
    expect(answer.headline).toMatch(
      /^Revenue churn is steady: the usual \d+\.\d % of the revenue is lost within 3 months/,
    );
    expect(answer.evidence.join(' ')).toMatch(/would by now have been reported with 80 % chance/);
    expect(answer.evidence.join(' ')).toMatch(/one amount for each account/);
    expect(answer.evidence.at(-1)).toMatch(/^For comparison, by accounts: Churn is steady/);
    const { chart, totals } = revenue;
    // The centre line is the mean of the baseline's shares, each the lost revenue over that at the start.
    const values = chart.points.map(
      (point: { lostRevenue: number; revenue: number }) => point.lostRevenue / point.revenue,
    );
    expect(chart.points.map(({ value }: { value: number }) => value)).toEqual(values);
    const used: number[] = values.slice(0, chart.baseline.last);
    expect(chart.center).toBeCloseTo(used.reduce((sum, value) => sum + value, 0) / used.length, 12);
    expect(chart.points[0].upper).toBeCloseTo(chart.center + 2.66 * chart.averageMovingRange, 12);
    expect(totals).toMatchObject({ contraction: 0, expansion: 0 });

    const asked = await cli.ask(path, 'ask', '--chart', 'individuals', ...AT);
    expect(asked.code).toBe(0);
    expect(asked.json.chart.kind).toBe('individuals');
    expect(asked.json.chart.points.map(({ value }: { value: number }) => value)).toEqual(values);
    expect(asked.json.chart.center).toBe(chart.center);
    expect(asked.json.verdict).toMatchObject({ outcome: 'steady', headline: answer.headline });
    expect(asked.json.trust.wouldSee.rise).toBeGreaterThan(chart.center);
  });

  it('those who pay most begin to leave: revenue churn rises more than churn does', async () => {
    const told = await cli.ask(
      made({ rate: (i, amount) => (i > 1000 && amount === 24 ? 0.6 : 0.1) }),
      'revenue',
      ...AT,
    );
    expectSound(told);
    const { revenue, answer } = told.json;
    expect(revenue.outcome).toBe('risen');
    expect(answer.headline).toMatch(
      /^Revenue churn has risen: about [2-4]\d\.\d % of the revenue is lost within 3 months among accounts that started from about/,
    );
    expect(Math.abs(dayFromIso(revenue.since.start)! - (first + 500))).toBeLessThan(45);
    expect(revenue.after.rate).toBeGreaterThan(2 * revenue.before.rate);
    expect(revenue.difference.low).toBeGreaterThan(0);
    expect(revenue.after.lostRevenue / revenue.after.revenue).toBeCloseTo(revenue.after.rate, 2);
    expect(answer.evidence.join(' ')).toMatch(/Those who leave pay more than the average account/);
  });

  it('contraction and expansion are told apart from loss, each over the revenue at the start', async () => {
    const path = made({ change: (i) => (i % 5 === 0 ? 0.5 : i % 5 === 1 ? 2 : null), rate: () => 0.08 });
    const told = await cli.ask(path, 'revenue', ...AT);
    expectSound(told);
    const { revenue, answer } = told.json;
    const stayed = 1 - revenue.totals.lost;
    // A fifth of those who stay pay half, a fifth pay double.
    expect(revenue.totals.contraction).toBeCloseTo((stayed / 5) * 0.5, 1);
    expect(revenue.totals.expansion).toBeCloseTo(stayed / 5, 1);
    expect(answer.evidence.join(' ')).toMatch(/\(contraction\).*\(expansion\)\. Neither is part of revenue churn/);
  });

  it('currencies that differ are refused with their counts, and the verdict on accounts still comes', async () => {
    const path = made({
      currency: (i) => (i % 4 === 0 ? 'GBP' : 'EUR'),
      plan: (i) => (i % 4 === 0 ? 'Orchard' : 'Allotment'),
    });
    const told = await cli.ask(path, 'revenue', ...AT);
    expectSound(told);
    expect(told.json.answer.headline).toMatch(
      /^Cannot say whether revenue churn has moved: the amounts are in more than one currency/,
    );
    expect(told.json.answer.evidence.join(' ')).toMatch(/EUR: [\d,]+ accounts and GBP: \d+ accounts/);
    expect(told.json.revenue).toMatchObject({ outcome: 'cannot-say', refused: { kind: 'currencies' }, chart: null });
    expect((await cli.ask(path, 'ask', ...AT)).json.verdict.outcome).toBe('steady');
    // One group with one currency can be asked about.
    const group = await cli.ask(
      path,
      'revenue',
      '--segment',
      'plan=Orchard',
      '--tenure',
      '3 months',
      '--subgroup-size',
      '20',
    );
    expectSound(group);
    expect(group.json.revenue).toMatchObject({ refused: null, currency: 'GBP' });
  });

  const BAD: readonly (readonly [string, Made, RegExp])[] = [
    [
      'no column of amounts',
      { header: 'note', amount: () => 'x' },
      /^Cannot say .*: no column of the export holds amounts\.$/,
    ],
    ['amounts that are all zero', { amount: () => '0' }, /every amount in column “mrr” is zero/],
    ['amounts that are all negative', { amount: () => '-5' }, /no amount in column “mrr” is above zero/],
    [
      'too few accounts',
      { accounts: 500 },
      /^Too early to say whether revenue churn has moved: \d+ points, and at least 12/,
    ],
    ['one point', { accounts: 250 }, /^Too early to say whether revenue churn has moved: one point/],
    ['no point', { accounts: 210 }, /^Too early .*: not one full point of 40 accounts has had 3 months/],
    ['nobody lost', { rate: () => 0 }, /^Cannot say .*: no revenue was lost within 3 months in every point/],
    ['everybody lost', { rate: () => 1 }, /^Cannot say .*: all revenue was lost within 3 months in every point/],
  ];
  it.each(BAD)('%s: a sentence, a picture, and nothing that is no number', async (_, how, headline) => {
    const complete = ['--as-of', isoDay(first + (how.accounts ?? 1600) / 2)];
    const told = await cli.ask(made(how), 'revenue', ...AT, ...complete);
    expectSound(told);
    expect(told.json.answer.headline).toMatch(headline);
    const asked = await cli.ask(made(how), 'ask', '--chart', 'individuals', ...AT, ...complete);
    expect(asked.code).toBe(0);
    expect(asked.json.verdict.headline).toMatch(headline);
  });

  it('amounts that cannot be read, are missing or negative are counted and said, and so are groups without revenue', async () => {
    const told = await cli.ask(
      made({
        amount: (i, amount) =>
          i === 90 ? 'ask Wren' : i === 91 ? '' : i === 92 ? '-4' : i < 40 ? '0' : amount.toFixed(2),
      }),
      'revenue',
      ...AT,
    );
    expectSound(told);
    const cautions = told.json.answer.cautions.join(' ');
    expect(cautions).toMatch(
      /2 accounts of [\d,]+ accounts have no amount that can be read \(line 92 says “ask Wren”\)/,
    );
    expect(cautions).toMatch(/1 account of [\d,]+ accounts starts with a negative amount/);
    expect(cautions).toMatch(/1 group of accounts had no revenue at the start/);
    expect(told.json.revenue.chart.points[0].subgroup).toBe(2);
    const text = await cli.text(made({ amount: (i) => (i === 90 ? 'ask Wren' : '"€ 12,50"') }), 'revenue', ...AT);
    expect(text).toContain('a comma is the decimal sign');
    expect(text).toContain('Currency of the amounts: EUR');
  });

  it('an account that carries a tenth of the revenue is named as what it is: one departure', async () => {
    const told = await cli.ask(
      made({ amount: (i, amount) => (i % 40 === 7 ? '300' : amount.toFixed(2)) }),
      'revenue',
      ...AT,
    );
    expectSound(told);
    expect(told.json.answer.cautions.join(' ')).toMatch(
      /In every point one account carries more than a tenth of the revenue \(\d\d\.\d % in point \d+\).*common practice, no source/,
    );
  });
});
