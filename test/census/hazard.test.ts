import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { departuresByGroup } from '../../src/census/departures.ts';
import { hazardByMonth } from '../../src/census/hazard.ts';
import { addMonths, type Day, isoDay } from '../../src/days.ts';
import { day, exportReader } from '../accounts/exportFile.ts';

const files = exportReader();

interface Life {
  readonly start: Day;
  readonly end: Day | null;
}

const first = day('2023-01-01');
const asOf = day('2024-05-31');
const life = fc
  .record({ start: fc.integer({ min: first, max: asOf }), days: fc.option(fc.integer({ min: 1, max: 700 })) })
  .map(({ start, days }) => ({ start, end: days === null || start + days > asOf ? null : start + days }));
const csv = (lives: readonly Life[], group = (_: number): string => 'all'): string =>
  `id,start,end,plan\n${lives.map(({ start, end }, i) => `k${i},${isoDay(start)},${end === null ? '' : isoDay(end)},${group(i)}`).join('\n')}\n`;

/** Month by month with the calendar itself: observed through month k when start + k months <= until, lost by then when end <= start + k months. */
function naive(lives: readonly Life[], until: Day, month: number): { atRisk: number; lost: number } {
  const observed = lives.filter(({ start }) => start <= until && addMonths(start, month) <= until);
  const goneBy = (k: number): Life[] => observed.filter(({ start, end }) => end !== null && end <= addMonths(start, k));
  const before = month === 1 ? 0 : goneBy(month - 1).length;
  return { atRisk: observed.length - before, lost: goneBy(month).length - before };
}

describe('hazardByMonth', () => {
  it('counts as the calendar does, for any starts, ends and days to settle', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.array(life, { minLength: 40, maxLength: 300 }),
        fc.integer({ min: 0, max: 40 }),
        async (lives, settle) => {
          await files.with(csv(lives), { asOf }, async (table) => {
            const { months } = await hazardByMonth(table, asOf, settle);
            for (const { month, atRisk, lost } of months)
              expect({ atRisk, lost }).toEqual(naive(lives, asOf - settle, month));
            expect(naive(lives, asOf - settle, months.length + 1).atRisk).toBe(0);
          });
        },
      ),
      { numRuns: 6 },
    );
  });

  it('the last day of a short month completes a month begun on the 31st', async () => {
    const lives = [
      { start: day('2024-01-31'), end: day('2024-02-29') },
      { start: day('2024-01-31'), end: day('2024-03-01') },
      { start: day('2023-06-01'), end: null },
    ];
    await files.with(csv(lives), { asOf }, async (table) => {
      const { months } = await hazardByMonth(table, asOf, 0);
      expect(months.slice(0, 2)).toEqual([
        { month: 1, atRisk: 3, lost: 1 },
        { month: 2, atRisk: 2, lost: 1 },
      ]);
    });
  });

  it('before and since a day are counted apart, and add up to the whole', async () => {
    const lives = Array.from({ length: 400 }, (_, i) => ({
      start: first + i,
      end: i % 3 === 0 ? first + i + 45 : null,
    }));
    const split = first + 200;
    await files.with(csv(lives), { asOf }, async (table) => {
      const [all, before, since] = await Promise.all([
        hazardByMonth(table, asOf, 0, { whole: true }),
        hazardByMonth(table, asOf, 0, { startedBefore: split }),
        hazardByMonth(table, asOf, 0, { startedFrom: split }),
      ]);
      expect(before.months[0]).toEqual({ month: 1, atRisk: 200, lost: 0 });
      expect(since.months[1]!.lost + before.months[1]!.lost).toBe(all.months[1]!.lost);
      expect(since.byTenure[1]!.matured + before.byTenure[1]!.matured).toBe(all.byTenure[1]!.matured);
    });
  });

  it('a data-through date before the first start leaves nothing', async () => {
    await files.with(
      csv([
        { start: asOf, end: null },
        { start: asOf, end: null },
      ]),
      { asOf },
      async (table) => {
        expect(await hazardByMonth(table, asOf, 30)).toEqual({ months: [], byTenure: [] });
      },
    );
  });
});

describe('departuresByGroup', () => {
  it('losses and accounts last seen, by days, adding up to each group', async () => {
    const lives = [
      { start: first, end: first + 10 },
      { start: first + 5, end: first + 15 },
      { start: asOf - 10, end: null },
      { start: first, end: null },
    ];
    await files.with(
      csv(lives, (i) => (i < 3 ? 'Orchard' : "O'Dell")),
      { asOf },
      async (table) => {
        expect(await departuresByGroup(table, asOf, 0)).toEqual([
          {
            segment: 'Orchard',
            accounts: 3,
            lost: 2,
            departures: [{ time: 10, lost: 2, censored: 1 }],
          },
          { segment: "O'Dell", accounts: 1, lost: 0, departures: [{ time: asOf - first, lost: 0, censored: 1 }] },
        ]);
      },
    );
  });

  it('a loss after the day that is settled is not known yet', async () => {
    await files.with(
      csv([
        { start: first, end: asOf - 3 },
        { start: first, end: null },
      ]),
      { asOf },
      async (table) => {
        expect(await departuresByGroup(table, asOf, 7)).toEqual([
          { segment: 'all', accounts: 2, lost: 0, departures: [{ time: asOf - 7 - first, lost: 0, censored: 2 }] },
        ]);
      },
    );
  });
});
