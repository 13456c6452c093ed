import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { takeMonths } from '../../src/census/calendarCensus.ts';
import { takeCensus } from '../../src/census/census.ts';
import type { CensusRequest } from '../../src/census/types.ts';
import { addMonths, isoDay } from '../../src/days.ts';
import { type Account, accountsOf, day, exportReader } from '../accounts/exportFile.ts';
import { BASE, csvOf, SOME_AS_OF, SOME_OPTIONS, shuffled, someAccounts } from './someAccounts.ts';

const files = exportReader();

const request = (over: Partial<CensusRequest> = {}): CensusRequest => ({
  tenure: { count: 1, unit: 'month' },
  subgroupSize: 1,
  settleDays: 0,
  asOf: SOME_AS_OF,
  view: 'calendar',
  ...over,
});

/** The months by hand: go through the calendar and ask every account. */
function naive(accounts: readonly Account[], { settleDays, asOf }: Pick<CensusRequest, 'settleDays' | 'asOf'>) {
  const months = [];
  let passed = 0;
  for (let first = day('2023-12-01'); addMonths(first, 1) - 1 + settleDays <= asOf; first = addMonths(first, 1)) {
    const next = addMonths(first, 1);
    const customers = accounts.filter(({ start, end }) => start < first && (end === null || end >= first));
    const lost = customers.filter(({ end }) => end !== null && end < next);
    passed += accounts.filter(({ start, end }) => start >= first && end !== null && end < next).length;
    if (customers.length > 0)
      months.push({ firstStart: first, lastStart: next - 1, accounts: customers.length, lost: lost.length });
  }
  return { months, passed };
}

describe('the calendar view', () => {
  it('counts the customers each month began with, and how many of them left in it', async () => {
    const content = `id,start,end\n${[
      'a,2024-01-10,',
      'b,2024-01-31,2024-02-01', // at risk in February, lost on its first day
      'c,2024-02-01,2024-02-29', // came and went within February
      'd,2024-02-10,2024-03-31', // lost on the last day of March
      'e,2024-03-05,2024-04-10', // at risk in April, which is under way
    ].join('\n')}\n`;
    const census = await files.with(content, { asOf: day('2024-04-20') }, (table) =>
      takeMonths(table, request({ asOf: day('2024-04-20') })),
    );
    expect(
      census.subgroups.map(({ firstStart, lastStart, asOf, accounts, lost }) => [
        isoDay(firstStart),
        isoDay(lastStart),
        isoDay(asOf),
        accounts,
        lost,
      ]),
    ).toEqual([
      ['2024-02-01', '2024-02-29', '2024-02-29', 2, 1],
      ['2024-03-01', '2024-03-31', '2024-03-31', 2, 1],
    ]);
    expect(census).toMatchObject({
      passed: 1,
      matured: 4,
      waiting: 2,
      withheld: { first: day('2024-04-01'), last: day('2024-04-30'), customers: 2 },
      nextPointOn: day('2024-04-30'),
    });
  });

  it('a month is complete on its last day, and waits settleDays longer', async () => {
    const content = 'id,start,end\na,2024-01-10,\nb,2024-01-11,2024-05-20\n';
    const months = (asOf: string, settleDays = 0) =>
      files.with(content, { asOf: day('2024-05-31') }, async (table) => {
        const { subgroups, withheld } = await takeMonths(table, request({ asOf: day(asOf), settleDays }));
        return [isoDay(subgroups.at(-1)!.lastStart), withheld && isoDay(withheld.first)];
      });
    expect(await months('2024-05-31')).toEqual(['2024-05-31', null]);
    expect(await months('2024-05-30')).toEqual(['2024-04-30', '2024-05-01']);
    expect(await months('2024-05-31', 1)).toEqual(['2024-04-30', '2024-05-01']);
  });

  it('agrees with asking every account in every month, segments included', async () => {
    await fc.assert(
      fc.asyncProperty(someAccounts, async ({ rows, settle }) => {
        await files.with(csvOf(rows), SOME_OPTIONS, async (table) => {
          const asked = request({ settleDays: settle });
          const census = await takeMonths(table, asked);
          const wanted = naive(await accountsOf(table), asked);
          expect(census.subgroups).toMatchObject(wanted.months);
          expect(census.passed).toBe(wanted.passed);
          for (const [at, { accounts, lost }] of census.segments.length === 0 ? [] : census.subgroups.entries()) {
            expect(census.segments.reduce((sum, one) => sum + (one.accounts[at] ?? 0), 0)).toBe(accounts);
            expect(census.segments.reduce((sum, one) => sum + (one.lost[at] ?? 0), 0)).toBe(lost);
          }
        });
      }),
      { numRuns: 30, seed: 31 },
    );
  });

  it('does not depend on the order of the rows', async () => {
    await fc.assert(
      fc.asyncProperty(shuffled, async ({ some: { rows }, order }) => {
        const take = (content: string) => files.with(content, SOME_OPTIONS, (table) => takeCensus(table, request()));
        expect(await take(csvOf(rows, order))).toEqual(await take(csvOf(rows)));
      }),
      { numRuns: 10, seed: 33 },
    );
  });

  it('leaves out months without customers, so that no point is a share of nothing', async () => {
    const rows = [
      { start: 0, life: 40, plan: 'Orchard' },
      { start: 200, life: 100, plan: 'Orchard' },
    ];
    const census = await files.with(csvOf(rows), SOME_OPTIONS, (table) => takeMonths(table, request()));
    expect(census.subgroups.map(({ firstStart }) => isoDay(firstStart).slice(0, 7))).toEqual([
      '2024-01',
      '2024-07',
      '2024-08',
      '2024-09',
    ]);
    expect(census.subgroups.map(({ index }) => index)).toEqual([1, 2, 3, 4]);
    expect(census).toMatchObject({ withheld: null, nextPointOn: null });
  });

  it('counts one segment alone, and refuses one that no account has', async () => {
    const rows = [
      { start: 0, life: null, plan: 'Orchard' },
      { start: 1, life: 40, plan: 'Allotment' },
    ];
    await files.with(csvOf(rows), SOME_OPTIONS, async (table) => {
      const census = await takeMonths(table, request({ segment: 'Allotment' }));
      expect(census.subgroups.map(({ accounts, lost }) => [accounts, lost])).toEqual([[1, 1]]);
      await expect(takeMonths(table, request({ segment: 'Meadow' }))).rejects.toMatchObject({
        code: 'SEGMENT_UNKNOWN',
      });
    });
  });

  it('with everyone started in the month under way there is no point yet', async () => {
    const rows = [{ start: SOME_AS_OF - BASE - 1, life: null, plan: '' }];
    const census = await files.with(csvOf(rows), SOME_OPTIONS, (table) => takeMonths(table, request()));
    expect(census).toMatchObject({ subgroups: [], matured: 0, waiting: 0, withheld: null, segments: [] });
  });
});
