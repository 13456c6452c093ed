import { describe, expect, it } from 'vitest';
import { firstDayOfMonth, monthOf, takeMonthFlows } from '../../src/census/monthFlows.ts';
import { flow } from '../../src/charts/reconcile/flows.ts';
import { isoDay } from '../../src/days.ts';
import { accountsOf, day, exportReader } from '../accounts/exportFile.ts';

const files = exportReader();

describe('customers by calendar month', () => {
  it('months are numbered so that years begin at multiples of twelve', () => {
    expect(monthOf(day('2025-01-31')) % 12).toBe(0);
    expect(monthOf(day('2025-12-01')) - monthOf(day('2025-01-01'))).toBe(11);
    expect(isoDay(firstDayOfMonth(monthOf(day('2024-02-29'))))).toBe('2024-02-01');
  });

  it('an end counts in the month of its date, one after the data-through date not at all', async () => {
    const text =
      'id,start,end\na,2024-01-31,2024-02-01\nb,2024-01-15,2024-03-31\nc,2024-02-01,2024-06-01\nd,2024-02-10,\n';
    await files.with(text, { asOf: day('2024-04-29') }, async (table) => {
      const { cells, firstMonth, lastMonth } = await takeMonthFlows(table, { asOf: day('2024-04-29') });
      const january = monthOf(day('2024-01-01'));
      expect(cells).toEqual([
        { started: january, lost: january + 1, accounts: 1 },
        { started: january, lost: january + 2, accounts: 1 },
        { started: january + 1, lost: null, accounts: 2 },
      ]);
      // April is not over.
      expect([firstMonth, lastMonth]).toEqual([january, january + 2]);
      expect((await takeMonthFlows(table, { asOf: day('2024-04-30') })).lastMonth).toBe(january + 3);
    });
  });

  it('agree with counting customers day by day', async () => {
    const rows = Array.from({ length: 200 }, (_, i) => {
      const start = day('2023-11-20') + ((i * 37) % 300);
      return `k${i},${isoDay(start)},${i % 3 === 0 ? '' : isoDay(start + 1 + ((i * 53) % 150))},${i % 2 ? 'Orchard' : 'Allotment'}`;
    });
    const asOf = day('2024-09-30');
    await files.with(`id,start,end,plan\n${rows.join('\n')}\n`, { asOf }, async (table) => {
      const accounts = (await accountsOf(table)).filter(({ segment }) => segment === 'Orchard');
      const { cells, firstMonth, lastMonth } = await takeMonthFlows(table, { asOf, segment: 'Orchard' });
      expect(lastMonth - firstMonth).toBe(10);
      for (let month = firstMonth; month <= lastMonth; month++) {
        const [from, next] = [firstDayOfMonth(month), firstDayOfMonth(month + 1)];
        const { start, added, lost, end } = flow(cells, month, month);
        // On the first day of a month, before anybody joins or leaves on it: who was there the day before.
        const there = (on: number): number =>
          accounts.filter((one) => one.start < on && (one.end === null || one.end >= on)).length;
        expect([start, end]).toEqual([there(from), there(next)]);
        expect(added).toBe(accounts.filter((one) => one.start >= from && one.start < next).length);
        expect(lost).toBe(accounts.filter(({ end: gone }) => gone !== null && gone >= from && gone < next).length);
      }
    });
  });
});
