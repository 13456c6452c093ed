import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { takeCensus } from '../../src/census/census.ts';
import { takeRevenue } from '../../src/census/revenue.ts';
import type { CensusRequest } from '../../src/census/types.ts';
import { isoDay } from '../../src/days.ts';
import { day, exportReader } from '../accounts/exportFile.ts';

const files = exportReader();

const request = (over: Partial<CensusRequest> = {}): CensusRequest => ({
  tenure: { count: 1, unit: 'month' },
  subgroupSize: 3,
  settleDays: 0,
  asOf: day('2024-06-30'),
  view: 'start',
  ...over,
});

describe('the census of revenue', () => {
  const text = [
    'id,start,end,plan,mrr',
    // lost by the end of its first month, on its last day
    'a,2024-01-01,2024-02-01,Orchard,10',
    // pays less from its second row on, which begins within the month
    'b,2024-01-02,2024-01-20,Orchard,20',
    'b,2024-01-20,,Orchard,15',
    // pays more, but only after the tenure point
    'c,2024-01-03,2024-02-04,Orchard,30',
    'c,2024-02-04,,Orchard,99',
    // pays more on the very day of the tenure point
    'd,2024-01-04,2024-02-04,Windowsill,40.25',
    'd,2024-02-04,,Windowsill,50.25',
    // went up, then lost within the month: its loss is what it paid at the start
    'e,2024-01-05,2024-01-10,Orchard,5',
    'e,2024-01-10,2024-01-31,Orchard,500',
    // nothing to pay, no amount, a negative one, one that cannot be read
    'f,2024-01-06,,Orchard,0',
    'g,2024-01-07,2024-01-20,Orchard,',
    'h,2024-01-08,,Orchard,-7',
    'i,2024-01-09,,Orchard,soon',
    // the unfinished subgroup
    'j,2024-01-10,,Orchard,8',
    // too young
    'k,2024-06-20,,Orchard,8',
    ...Array.from({ length: 12 }, (_, i) => `z${i},2024-06-2${i % 9},,Orchard,8`),
  ].join('\n');

  it('sums what was there at the start, what was lost, and what changed among those still there', async () => {
    await files.with(text, {}, async (table) => {
      const { subgroups } = await takeRevenue(table, request());
      expect(subgroups).toEqual([
        {
          index: 1,
          accounts: 3,
          lost: 1,
          firstStart: day('2024-01-01'),
          lastStart: day('2024-01-03'),
          asOf: day('2024-02-03'),
          revenue: 60,
          lostRevenue: 10,
          contraction: 5,
          expansion: 0,
          withoutAmount: 0,
          negative: 0,
          largest: 30,
          largestLost: 10,
        },
        expect.objectContaining({
          index: 2,
          lost: 1,
          revenue: 45.25,
          lostRevenue: 5,
          contraction: 0,
          expansion: 10,
          largest: 40.25,
          largestLost: 5,
        }),
        expect.objectContaining({
          index: 3,
          lost: 1,
          revenue: 0,
          lostRevenue: 0,
          withoutAmount: 2,
          negative: 1,
          largest: 0,
          largestLost: 0,
        }),
      ]);
    });
  });

  it('of one group alone', async () => {
    await files.with(text, {}, async (table) => {
      const { subgroups } = await takeRevenue(table, request({ segment: 'Windowsill', subgroupSize: 1 }));
      expect(subgroups.map(({ revenue, expansion }) => [revenue, expansion])).toEqual([[40.25, 10]]);
    });
  });

  it('counts the currencies of those who have had the time', async () => {
    const money =
      'id,start,end,mrr\na,2024-01-01,,€5\nb,2024-01-02,,£6\nc,2024-01-03,,€7\nd,2024-06-29,,£8\ne,2024-01-03,,9\n';
    await files.with(money, {}, async (table) => {
      expect((await takeRevenue(table, request())).currencies).toEqual([
        { currency: 'EUR', accounts: 2 },
        { currency: 'GBP', accounts: 1 },
        { currency: null, accounts: 1 },
      ]);
    });
  });

  it('is cut exactly as the census of accounts, whatever the data', async () => {
    const base = day('2024-01-01');
    const row = fc.record({
      start: fc.integer({ min: 0, max: 60 }),
      length: fc.option(fc.integer({ min: 1, max: 90 })),
      cents: fc.integer({ min: 0, max: 9999 }),
    });
    await fc.assert(
      fc.asyncProperty(
        fc.array(row, { minLength: 1, maxLength: 60 }),
        fc.integer({ min: 1, max: 9 }),
        fc.constantFrom(0, 7),
        async (rows, subgroupSize, settleDays) => {
          const content = `id,start,end,mrr\n${rows.map(({ start, length, cents }, i) => `k${i},${isoDay(base + start)},${length === null ? '' : isoDay(base + start + length)},${(cents / 100).toFixed(2)}`).join('\n')}\n`;
          await files.with(content, { asOf: base + 100 }, async (table) => {
            const asked = request({ subgroupSize, settleDays, asOf: base + 80 });
            const [census, revenue] = [await takeCensus(table, asked), await takeRevenue(table, asked)];
            const cut = ({
              index,
              accounts,
              lost,
              firstStart,
              lastStart,
              asOf,
            }: (typeof census.subgroups)[number]) => ({
              index,
              accounts,
              lost,
              firstStart,
              lastStart,
              asOf,
            });
            expect(revenue.subgroups.map(cut)).toEqual(census.subgroups.map(cut));
            for (const one of revenue.subgroups) {
              expect(one.lostRevenue).toBeLessThanOrEqual(one.revenue);
              expect(one.largest).toBeLessThanOrEqual(one.revenue);
            }
          });
        },
      ),
      { numRuns: 15, seed: 5 },
    );
  });
});
