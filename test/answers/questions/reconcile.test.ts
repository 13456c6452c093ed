import { describe, expect, it } from 'vitest';
import { addMonths, type Day, dayFromIso } from '../../../src/days.ts';
import { asker, expectSound, type Row } from './asked.ts';

const cli = asker();
const first = dayFromIso('2023-01-01')!;
const monthStart = (month: number): Day => addMonths(first, month);

/**
 * 1,000 customers from before the months that count, 100 more on the 10th of each month, and 30, 40 or 50 leaving in turn on the 20th,
 * always of the oldest; to the end of December 2024.
 */
function club(): Row[] {
  const rows: { start: Day; end: Day | null }[] = Array.from({ length: 1000 }, () => ({
    start: first - 40,
    end: null,
  }));
  for (let month = 0; month < 24; month++) {
    for (let i = 0; i < 100; i++) rows.push({ start: monthStart(month) + 9, end: null });
    const leaving = [30, 40, 50][month % 3]!;
    for (const row of rows.filter(({ end }) => end === null).slice(0, leaving)) row.end = monthStart(month) + 19;
  }
  return rows;
}

const TO = ['--as-of', '2024-12-31', '--tenure', '3 months'];

describe('reconcile', () => {
  it('names the one calculation that gives the figure, with the two numbers that are divided', async () => {
    // 22 months before November 2024: 1,000 + 22 x 100 - (7 x 120 + 30) customers at its start; 40 leave in it.
    const start = 1000 + 2200 - 870;
    const figure = (100 * 40) / start;
    const told = await cli.ask(cli.file(club()), 'reconcile', `${figure.toFixed(3)}%`, 'for November 2024', ...TO);
    expectSound(told);
    const { reconcile, answer } = told.json;
    expect(reconcile.month).toEqual({ first: '2024-11-01', covered: true });
    const giving = reconcile.giving.filter(({ period }: { period: { from: string } }) => period.from === '2024-11-01');
    // Nobody joined and left within the month: both ways over the start are the same number.
    expect(giving.map(({ way }: { way: string }) => way)).toEqual(['over-start', 'of-start']);
    expect(giving[0]).toMatchObject({ lost: 40, over: start, period: { kind: 'month', to: '2024-11-30' } });
    expect(answer.headline).toMatch(
      /^1\.717 % is what 2 of \d+ figures come to for November 2024, so it alone does not tell/,
    );
    expect(answer.headline).toContain('lost in November 2024, over the customers at its start (40 of 2,330 accounts)');
    expect(answer.cautions.at(-1)).toMatch(/written definition/);
  });

  it('every way is what it says: of the last complete quarter, by hand', async () => {
    const told = await cli.ask(cli.file(club()), 'reconcile', '99%', ...TO);
    expectSound(told);
    const { ways, census, giving } = told.json.reconcile;
    expect(giving).toEqual([]);
    const quarter = Object.fromEntries(
      ways
        .filter(({ period }: { period: { kind: string } | null }) => period?.kind === 'quarter')
        .map(({ way, value }: { way: string; value: number }) => [way, value]),
    );
    // October to December 2024: 21 months before it.
    const start = 1000 + 2100 - 840;
    const starts = [start, start + 70, start + 130];
    const monthly = [30, 40, 50].map((lost, i) => lost / starts[i]!);
    const mean = monthly.reduce((sum, rate) => sum + rate, 0) / 3;
    expect(quarter['over-start']).toBeCloseTo(120 / start, 12);
    expect(quarter['of-start']).toBeCloseTo(120 / start, 12);
    expect(quarter['over-average']).toBeCloseTo(120 / (start + 90), 12);
    expect(quarter['over-start-plus-new']).toBeCloseTo(120 / (start + 300), 12);
    expect(quarter['mean-of-months']).toBeCloseTo(mean, 12);
    expect(quarter['pooled-months']).toBeCloseTo(120 / (starts[0]! + starts[1]! + starts[2]!), 12);
    expect(quarter['times-to-year']).toBeCloseTo(12 * mean, 12);
    expect(quarter['compounded-to-year']).toBeCloseTo(1 - (1 - mean) ** 12, 12);
    const verdict = (await cli.ask(cli.file(club()), 'ask', ...TO)).json;
    expect(census.over).toBe(verdict.data.matured);
    expect(told.json.answer.evidence.join(' ')).toContain(
      `(${census.lost.toLocaleString('en-US')} of ${census.over.toLocaleString('en-US')} accounts that have had that long)`,
    );
    for (const { value, fromCensus, fromReported } of ways) {
      expect(fromCensus).toBeCloseTo(value - census.value, 12);
      expect(fromReported).toBeCloseTo(value - 0.99, 12);
    }
  });

  it('a figure of few decimals fits several calculations, and it says that some would by coincidence', async () => {
    const told = await cli.ask(cli.file(club()), 'reconcile', '2%', ...TO);
    expectSound(told);
    expect(told.json.reconcile.giving.length).toBeGreaterThan(10);
    expect(told.json.answer.headline).toMatch(
      /^2 % is what \d+ of \d+ figures come to, so it alone does not tell which was meant/,
    );
    expect(told.json.answer.evidence.join(' ')).toMatch(/\d+ further figures of those tried round to it/);
  });

  it.each([
    ['100%', /^None of \d+ figures gives 100 %; the nearest is/],
    ['250%', /^None of \d+ figures gives 250 %; the nearest is/],
    ['14.23456789%', /^None of \d+ figures gives 14\.234568 %; the nearest is/],
  ])('%s: none gives it, and the nearest are told', async (figure, headline) => {
    const told = await cli.ask(cli.file(club()), 'reconcile', figure, ...TO);
    expectSound(told);
    expect(told.json.answer.headline).toMatch(headline);
    expect(told.json.answer.evidence.filter((line: string) => line.startsWith('Near it: '))).toHaveLength(3);
    expect(told.json.answer.cautions.some((line: string) => line.startsWith('More than 100 %'))).toBe(
      figure === '250%',
    );
  });

  it('0 % is what the census gives at an age at which nobody has left yet', async () => {
    const told = await cli.ask(cli.file(club()), 'reconcile', '0%', ...TO);
    expectSound(told);
    expect(told.json.reconcile.giving).toMatchObject([{ way: 'census', tenure: '1 month', lost: 0 }]);
    expect(told.json.answer.headline).toMatch(
      /^0 % is what one of \d+ figures that were tried comes to: the equal-tenure census at 1 month, those lost by then over all accounts/,
    );
  });

  it('a month the data does not hold is said, and the others are looked at', async () => {
    const path = cli.file(club());
    const late = await cli.ask(path, 'reconcile', '3%', 'for March 2026', ...TO);
    expectSound(late);
    expect(late.json.answer.cautions.join(' ')).toMatch(
      /The data does not cover March 2026 to its end, so the months to December 2024/,
    );
    const early = await cli.ask(path, 'reconcile', '3%', 'for March 2021', ...TO);
    expectSound(early);
    expect(early.json.answer.cautions.join(' ')).toMatch(/Nobody was a customer in March 2021/);
    const other = await cli.ask(path, 'reconcile', '1.717%', 'for December 2024', ...TO);
    expectSound(other);
    expect(other.json.answer.headline).toMatch(
      /^No common calculation gives 1\.717 % for December 2024; it is what another time gives: lost in November 2024/,
    );
  });

  it('a month that is not over is not complete', async () => {
    const told = await cli.ask(cli.file(club()), 'reconcile', '3%', '--as-of', '2024-12-30', '--tenure', '3 months');
    expectSound(told);
    expect(told.json.reconcile.months.to).toBe('2024-11-30');
  });

  it('less than a month of data: a sentence; one account: no number that is none', async () => {
    const day = dayFromIso('2024-03-05')!;
    const short = await cli.ask(
      cli.file(Array.from({ length: 30 }, (_, i) => ({ start: day + (i % 9), end: i % 4 === 0 ? day + 12 : null }))),
      'reconcile',
      '5%',
      '--as-of',
      '2024-03-20',
      '--tenure',
      '1 week',
    );
    expectSound(short);
    expect(short.json.reconcile.months).toBeNull();
    expect(short.json.answer.headline).toMatch(/^None of 1 figure gives 5 %; the nearest is/);
    const one = await cli.ask(cli.file([{ start: day, end: null }]), 'reconcile', '5%', '--as-of', '2024-03-06');
    expectSound(one);
    expect(one.json.answer.headline).toMatch(
      /^Cannot say where 5 % comes from: the data holds no whole calendar month/,
    );
    expect(one.json.reconcile).toMatchObject({ tried: 0, census: null, ways: [] });
  });

  it('of one group alone', async () => {
    const rows = club().map((row, i) => ({ ...row, plan: i % 2 ? 'Orchard' : 'Allotment' }));
    const told = await cli.ask(cli.file(rows), 'reconcile', '1.7%', 'for Orchard', ...TO);
    expectSound(told);
    expect(told.json.answer.headline).toContain('for Orchard');
    const [all, group] = [
      (await cli.ask(cli.file(rows), 'reconcile', '1.7%', ...TO)).json.reconcile,
      told.json.reconcile,
    ];
    expect(group.ways[0].over).toBeLessThan(0.6 * all.ways[0].over);
  });
});
