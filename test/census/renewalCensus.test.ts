import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { takeCensus } from '../../src/census/census.ts';
import { countRenewals } from '../../src/census/renewalCensus.ts';
import type { CensusRequest } from '../../src/census/types.ts';
import { addMonths, isoDay } from '../../src/days.ts';
import { type Account, accountsOf, day, exportReader } from '../accounts/exportFile.ts';
import { csvOf, SOME_AS_OF, SOME_OPTIONS, shuffled, someAccounts } from './someAccounts.ts';

const files = exportReader();

const request = (over: Partial<CensusRequest> = {}): CensusRequest => ({
  tenure: { count: 1, unit: 'month' },
  subgroupSize: 2,
  settleDays: 0,
  asOf: day('2024-06-30'),
  view: 'renewal',
  ...over,
});

/** The renewals by hand: walk every account from renewal to renewal, sort, cut, count. */
function naive(accounts: readonly Account[], { tenure, subgroupSize, settleDays, asOf }: CensusRequest) {
  const date = (start: number, k: number): number =>
    tenure.unit === 'month'
      ? addMonths(start, k * tenure.count)
      : start + k * tenure.count * (tenure.unit === 'week' ? 7 : 1);
  const events: { due: number; key: bigint; lost: boolean; k: number }[] = [];
  let immature = 0;
  for (const { start, end, key } of accounts) {
    for (let k = 1; ; k++) {
      if (end !== null && end <= date(start, k - 1)) break;
      const due = date(start, k);
      if (due + settleDays > asOf) {
        immature++;
        break;
      }
      events.push({ due, key, lost: end !== null && end <= due, k });
    }
  }
  events.sort((a, b) => a.due - b.due || (a.key < b.key ? -1 : 1));
  const subgroups = [];
  for (let from = 0; from + subgroupSize <= events.length; from += subgroupSize) {
    const members = events.slice(from, from + subgroupSize);
    subgroups.push({
      index: subgroups.length + 1,
      accounts: subgroupSize,
      lost: members.filter(({ lost }) => lost).length,
      firstStart: members[0]!.due,
      lastStart: members.at(-1)!.due,
      asOf: members.at(-1)!.due + settleDays,
      firsts: members.filter(({ k }) => k === 1).length,
      laters: members.filter(({ k, lost }) => k >= 4 && lost).length,
    });
  }
  return { subgroups, matured: events.length, lost: events.filter(({ lost }) => lost).length, immature };
}

describe('the renewal view', () => {
  it('counts every renewal an account comes up for, until it is lost, in order of their date', async () => {
    const content = `id,start,end\n${[
      'a,2024-01-31,', // 29 Feb, 31 Mar, 30 Apr, 31 May
      'b,2024-02-15,2024-04-15', // renewed on 15 Mar, lost at the renewal of 15 Apr
      'c,2024-02-20,2024-04-25', // renewed twice, left in the middle of the third: lost on 20 May
      'd,2024-06-10,', // its first is still to come
    ].join('\n')}\n`;
    const census = await files.with(content, { asOf: day('2024-06-15') }, (table) =>
      takeCensus(table, request({ asOf: day('2024-06-15') })),
    );
    expect(
      census.subgroups.map(({ firstStart, lastStart, lost }) => [isoDay(firstStart), isoDay(lastStart), lost]),
    ).toEqual([
      ['2024-02-29', '2024-03-15', 0],
      ['2024-03-20', '2024-03-31', 0],
      ['2024-04-15', '2024-04-20', 1],
      ['2024-04-30', '2024-05-20', 1],
    ]);
    expect(census).toMatchObject({ matured: 9, waiting: 1, immature: 2, nextPointOn: day('2024-06-30') });
    expect(census.segments).toEqual([
      { segment: 'first renewals', accounts: [2, 1, 0, 0], lost: [0, 0, 0, 0] },
      { segment: 'second renewals', accounts: [0, 1, 2, 0], lost: [0, 0, 1, 0] },
      { segment: 'third renewals', accounts: [0, 0, 0, 2], lost: [0, 0, 0, 1] },
    ]);
  });

  it('agrees with walking every account from renewal to renewal', async () => {
    await fc.assert(
      fc.asyncProperty(someAccounts, async ({ rows, size, tenure, settle }) => {
        await files.with(csvOf(rows), SOME_OPTIONS, async (table) => {
          const asked = request({ tenure, subgroupSize: size, settleDays: settle, asOf: SOME_AS_OF });
          const census = await takeCensus(table, asked);
          const wanted = naive(await accountsOf(table), asked);
          expect(census.subgroups).toEqual(wanted.subgroups.map(({ firsts: _1, laters: _2, ...subgroup }) => subgroup));
          expect(census).toMatchObject({
            matured: wanted.matured,
            immature: wanted.immature,
            waiting: wanted.matured % size,
          });
          expect(census.maturing.reduce((sum, { accounts }) => sum + accounts, 0)).toBe(wanted.immature);
          expect(await countRenewals(table, asked)).toMatchObject({ accounts: wanted.matured, lost: wanted.lost });
          const [first, later] = ['first renewals', 'later renewals'].map((name) =>
            census.segments.find(({ segment }) => segment === name),
          );
          if (first) expect(first.accounts).toEqual(wanted.subgroups.map(({ firsts }) => firsts));
          if (later) expect(later.lost).toEqual(wanted.subgroups.map(({ laters }) => laters));
        });
      }),
      { numRuns: 30, seed: 21 },
    );
  });

  it('with first renewals only it is the start view', async () => {
    await fc.assert(
      fc.asyncProperty(someAccounts, async ({ rows, size }) => {
        const tenure = { count: 12, unit: 'month' } as const;
        await files.with(csvOf(rows), SOME_OPTIONS, async (table) => {
          const asked = request({ tenure, subgroupSize: size, asOf: SOME_AS_OF });
          const [renewals, starts] = [
            await takeCensus(table, asked),
            await takeCensus(table, { ...asked, view: 'start' }),
          ];
          expect(renewals.subgroups.map(({ lost }) => lost)).toEqual(starts.subgroups.map(({ lost }) => lost));
          expect(renewals.matured).toBe(starts.matured);
        });
      }),
      { numRuns: 10, seed: 22 },
    );
  });

  it('does not depend on the order of the rows', async () => {
    await fc.assert(
      fc.asyncProperty(shuffled, async ({ some: { rows, size, tenure }, order }) => {
        const take = (content: string) =>
          files.with(content, SOME_OPTIONS, (table) =>
            takeCensus(table, request({ tenure, subgroupSize: size, asOf: SOME_AS_OF })),
          );
        expect(await take(csvOf(rows, order))).toEqual(await take(csvOf(rows)));
      }),
      { numRuns: 10, seed: 23 },
    );
  });

  it('counts one segment alone, and refuses one that no account has', async () => {
    const rows = [
      { start: 0, life: null, plan: 'Orchard' },
      { start: 1, life: 40, plan: 'Allotment' },
    ];
    await files.with(csvOf(rows), SOME_OPTIONS, async (table) => {
      const census = await takeCensus(table, request({ subgroupSize: 1, segment: 'Allotment', asOf: SOME_AS_OF }));
      expect(census.subgroups.map(({ lost }) => lost)).toEqual([0, 1]);
      await expect(takeCensus(table, request({ segment: 'Meadow', asOf: SOME_AS_OF }))).rejects.toMatchObject({
        code: 'SEGMENT_UNKNOWN',
      });
    });
  });

  it('a size larger than the data, all lost and none lost give counts and no more', async () => {
    const rows = (life: number | null) => Array.from({ length: 5 }, (_, at) => ({ start: at, life, plan: '' }));
    for (const [life, lost] of [
      [10, 5],
      [null, 0],
    ] as const) {
      await files.with(csvOf(rows(life)), SOME_OPTIONS, async (table) => {
        const large = await takeCensus(table, request({ subgroupSize: 1_000_000, asOf: SOME_AS_OF }));
        expect(large.subgroups).toEqual([]);
        expect(large.waiting).toBe(large.matured);
        expect(await countRenewals(table, request({ asOf: SOME_AS_OF }))).toMatchObject({ lost });
      });
    }
  });

  it('refuses renewals more often than weekly, and more points than a chart can show', async () => {
    const rows = Array.from({ length: 60 }, (_, at) => ({ start: at * 7, life: null, plan: '' }));
    await files.with(csvOf(rows), SOME_OPTIONS, async (table) => {
      await expect(
        takeCensus(table, request({ tenure: { count: 6, unit: 'day' }, asOf: SOME_AS_OF })),
      ).rejects.toMatchObject({ code: 'OPTION_INVALID' });
    });
    const many = Array.from({ length: 1_000 }, (_, at) => ({ start: at % 400, life: null, plan: '' }));
    await files.with(csvOf(many), SOME_OPTIONS, async (table) => {
      await expect(
        takeCensus(table, request({ tenure: { count: 1, unit: 'week' }, subgroupSize: 1, asOf: SOME_AS_OF })),
      ).rejects.toMatchObject({ code: 'OPTION_INVALID', hint: expect.stringContaining('at least 2 renewals') });
    });
  });

  it('before the first renewal there is nothing to count, and it says what comes when', async () => {
    const rows = [{ start: 400, life: null, plan: '' }];
    const census = await files.with(csvOf(rows), SOME_OPTIONS, (table) =>
      takeCensus(table, request({ subgroupSize: 1, asOf: SOME_AS_OF })),
    );
    expect(census).toMatchObject({
      subgroups: [],
      matured: 0,
      waiting: 0,
      immature: 2,
      inflowPerWeek: 0,
      segments: [],
    });
    expect(census.nextPointOn).toBe(addMonths(day('2023-12-01') + 400, 1));
  });
});
