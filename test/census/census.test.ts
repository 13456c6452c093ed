import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { AccountTable } from '../../src/accounts/types.ts';
import { takeCensus } from '../../src/census/census.ts';
import { tenurePoint } from '../../src/census/tenure.ts';
import type { Census, CensusRequest, Tenure } from '../../src/census/types.ts';
import { type Day, isoDay } from '../../src/days.ts';
import { type Account, accountsOf, day, exportReader } from '../accounts/exportFile.ts';

const files = exportReader();

const request = (over: Partial<CensusRequest> = {}): CensusRequest => ({
  tenure: { count: 1, unit: 'month' },
  subgroupSize: 2,
  settleDays: 0,
  asOf: day('2024-06-30'),
  view: 'start',
  ...over,
});

const csv = (rows: readonly (readonly [string, string, string?])[]): string =>
  `id,start,end,plan\n${rows.map(([start, end, plan], at) => `k${at},${start},${end},${plan ?? 'Orchard'}`).join('\n')}\n`;

/** The census by hand: sort, cut, count. */
function naive(accounts: readonly Account[], { tenure, subgroupSize, settleDays, asOf }: CensusRequest) {
  const matured = accounts
    .filter(({ start }) => tenurePoint(start, tenure) + settleDays <= asOf)
    .sort((a, b) => a.start - b.start || (a.key < b.key ? -1 : 1));
  const subgroups = [];
  for (let from = 0; from + subgroupSize <= matured.length; from += subgroupSize) {
    const members = matured.slice(from, from + subgroupSize);
    const last = members.at(-1)?.start ?? 0;
    subgroups.push({
      index: subgroups.length + 1,
      accounts: members.length,
      lost: members.filter(({ start, end }) => end !== null && end <= tenurePoint(start, tenure)).length,
      firstStart: members[0]?.start,
      lastStart: last,
      asOf: tenurePoint(last, tenure) + settleDays,
    });
  }
  return {
    subgroups,
    matured: matured.length,
    waiting: matured.length % subgroupSize,
    immature: accounts.length - matured.length,
  };
}

const someAccounts = fc.record({
  rows: fc.array(
    fc.record({
      start: fc.integer({ min: 0, max: 200 }),
      life: fc.option(fc.integer({ min: 1, max: 150 })),
      plan: fc.constantFrom('Windowsill', 'Allotment', 'Orchard', ''),
    }),
    { minLength: 1, maxLength: 60 },
  ),
  size: fc.integer({ min: 1, max: 12 }),
  tenure: fc.constantFrom<Tenure>(
    { count: 1, unit: 'month' },
    { count: 3, unit: 'month' },
    { count: 2, unit: 'week' },
    { count: 10, unit: 'day' },
  ),
  settle: fc.constantFrom(0, 7),
});
const base = day('2023-12-01');
const toCsv = (
  rows: readonly { start: number; life: number | null; plan: string }[],
  order?: readonly number[],
): string =>
  `id,start,end,plan\n${(order ?? rows.map((_, at) => at))
    .map((at) => {
      const row = rows[at];
      if (!row) throw new Error('no such row');
      return `k${at},${isoDay(base + row.start)},${row.life === null ? '' : isoDay(base + row.start + row.life)},${row.plan}`;
    })
    .join('\n')}\n`;
const named = { columns: { id: 'id', start: 'start', end: 'end', segment: 'plan' }, asOf: base + 220 };

describe('takeCensus', () => {
  it('cuts matured accounts into subgroups of exactly n and withholds the unfinished one', async () => {
    const content = csv([
      ['2024-01-01', '2024-01-20'],
      ['2024-01-05', ''],
      ['2024-02-01', '2024-03-01'], // lost exactly at its tenure point
      ['2024-02-02', '2024-03-03'], // one day past it
      ['2024-05-30', ''], // reaches 1 month on 30 June
      ['2024-06-01', '2024-06-02'], // too young, though it has left
      ['2024-06-10', ''],
    ]);
    const census = await files.with(content, { asOf: day('2024-06-30') }, (table) => takeCensus(table, request()));
    expect(census.subgroups).toEqual([
      {
        index: 1,
        accounts: 2,
        lost: 1,
        firstStart: day('2024-01-01'),
        lastStart: day('2024-01-05'),
        asOf: day('2024-02-05'),
      },
      {
        index: 2,
        accounts: 2,
        lost: 1,
        firstStart: day('2024-02-01'),
        lastStart: day('2024-02-02'),
        asOf: day('2024-03-02'),
      },
    ]);
    expect(census).toMatchObject({ matured: 5, waiting: 1, immature: 2, nextPointOn: day('2024-07-01') });
  });

  it('clamps calendar months: 31 January reaches one month on 29 February 2024', async () => {
    const content = csv([
      ['2024-01-29', '2024-02-29'],
      ['2024-01-30', '2024-02-29'],
      ['2024-01-31', '2024-02-29'],
      ['2024-01-31', '2024-03-01'],
    ]);
    const census = await files.with(content, { asOf: day('2024-06-30') }, (table) =>
      takeCensus(table, request({ subgroupSize: 4, asOf: day('2024-02-29') })),
    );
    expect(census).toMatchObject({ matured: 4, subgroups: [{ lost: 3, asOf: day('2024-02-29') }] });
  });

  it('waits settleDays longer, and does not count an end after the data-through date', async () => {
    const content = csv([
      ['2024-05-29', ''],
      ['2024-05-30', ''],
      ['2024-05-01', '2024-08-01'],
    ]);
    const census = await files.with(content, { asOf: day('2024-06-30') }, (table) =>
      takeCensus(table, request({ subgroupSize: 1, settleDays: 1 })),
    );
    expect(census.subgroups.map(({ lost, firstStart }) => [isoDay(firstStart), lost])).toEqual([
      ['2024-05-01', 0],
      ['2024-05-29', 0],
    ]);
    expect(census.immature).toBe(1);
  });

  it('agrees with a plain second implementation, segments included', async () => {
    await fc.assert(
      fc.asyncProperty(someAccounts, async ({ rows, size, tenure, settle }) => {
        await files.with(toCsv(rows), named, async (table) => {
          const asked = request({ tenure, subgroupSize: size, settleDays: settle, asOf: base + 220 });
          const census = await takeCensus(table, asked);
          expect(census).toMatchObject(naive(await accountsOf(table), asked));
          expect(census.matured + census.immature).toBe(rows.length);
          expect(census.subgroups.reduce((sum, { accounts }) => sum + accounts, 0) + census.waiting).toBe(
            census.matured,
          );
          for (const [at, subgroup] of census.segments.length === 0 ? [] : census.subgroups.entries()) {
            expect(census.segments.reduce((sum, one) => sum + (one.accounts[at] ?? 0), 0)).toBe(subgroup.accounts);
            expect(census.segments.reduce((sum, one) => sum + (one.lost[at] ?? 0), 0)).toBe(subgroup.lost);
          }
        });
      }),
      { numRuns: 40, seed: 11 },
    );
  });

  it('gives the same subgroups whatever the order of the rows, ties included', async () => {
    const shuffled = someAccounts.chain((some) =>
      fc.record({
        some: fc.constant({ ...some, rows: some.rows.map((row) => ({ ...row, start: row.start % 5 })) }),
        order: fc.shuffledSubarray(
          some.rows.map((_, at) => at),
          { minLength: some.rows.length },
        ),
      }),
    );
    const take = (content: string, size: number): Promise<Census> =>
      files.with(content, named, (table: AccountTable) =>
        takeCensus(table, request({ subgroupSize: size, asOf: base + 220 })),
      );
    await fc.assert(
      fc.asyncProperty(shuffled, async ({ some, order }) => {
        const [one, other] = [await take(toCsv(some.rows), some.size), await take(toCsv(some.rows, order), some.size)];
        expect(other).toEqual(one);
      }),
      { numRuns: 20, seed: 12 },
    );
  });

  it('a tail of accounts too young to have left changes nothing', async () => {
    const rows = Array.from({ length: 40 }, (_, at): [string, string] => [
      isoDay(base + at * 3),
      at % 4 === 0 ? isoDay(base + at * 3 + 5) : '',
    ]);
    const asOf: Day = base + 160;
    const young = Array.from({ length: 30 }, (_, at): [string, string] => [
      isoDay(asOf - 20),
      at % 2 === 0 ? isoDay(asOf - 10) : '',
    ]);
    const take = (content: string) =>
      files.with(content, { asOf }, (table) => takeCensus(table, request({ subgroupSize: 5, asOf })));
    const [without, withYoung] = [await take(csv(rows)), await take(csv([...rows, ...young]))];
    expect(withYoung.subgroups).toEqual(without.subgroups);
    expect(withYoung.immature).toBe(without.immature + 30);
  });

  it('counts one segment alone, and refuses one that no account has', async () => {
    const content = csv([
      ['2024-01-01', '', 'Orchard'],
      ['2024-01-02', '2024-01-09', "Wren's"],
      ['2024-01-03', '', "Wren's"],
    ]);
    await files.with(content, { columns: { segment: 'plan' }, asOf: day('2024-06-30') }, async (table) => {
      expect(await takeCensus(table, request({ segment: "Wren's" }))).toMatchObject({
        matured: 2,
        subgroups: [{ lost: 1 }],
        segments: [],
      });
      await expect(takeCensus(table, request({ segment: 'Meadow' }))).rejects.toMatchObject({
        code: 'SEGMENT_UNKNOWN',
        hint: expect.stringContaining('Orchard'),
      });
      await expect(takeCensus(table, request({ subgroupSize: 0 }))).rejects.toMatchObject({ code: 'OPTION_INVALID' });
      await expect(takeCensus(table, request({ tenure: { count: 0.5, unit: 'month' } }))).rejects.toMatchObject({
        code: 'OPTION_INVALID',
      });
    });
  });

  it('pools all segments beyond the twelve largest', async () => {
    const rows = Array.from({ length: 200 }, (_, at): [string, string, string] => [
      isoDay(base + (at % 50)),
      '',
      `plan ${(at * at) % 17}`,
    ]);
    const census = await files.with(csv(rows), { columns: { segment: 'plan' }, asOf: day('2024-06-30') }, (table) =>
      takeCensus(table, request({ subgroupSize: 20 })),
    );
    expect(census.segments.length).toBeLessThanOrEqual(13);
    expect(
      census.subgroups.map((_, at) => census.segments.reduce((sum, { accounts }) => sum + (accounts[at] ?? 0), 0)),
    ).toEqual(census.subgroups.map(() => 20));
  });

  it('the inflow is the matured accounts a week over the last quarter of a year', async () => {
    const rows = Array.from({ length: 200 }, (_, at): [string, string] => [isoDay(base + at), '']);
    const census = await files.with(csv(rows), { asOf: base + 199 }, (table) =>
      takeCensus(table, request({ asOf: base + 199, subgroupSize: 10 })),
    );
    expect(census.inflowPerWeek).toBe(7);
  });
});
