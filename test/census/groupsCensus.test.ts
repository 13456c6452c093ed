import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { takeCensus } from '../../src/census/census.ts';
import type { GroupCensus, GroupsRequest } from '../../src/census/groupsCensus.ts';
import { sizeFor, takeGroupsCensus } from '../../src/census/groupsCensus.ts';
import { exportReader } from '../accounts/exportFile.ts';
import { csvOf, SOME_AS_OF, SOME_OPTIONS, someAccounts } from './someAccounts.ts';

const files = exportReader();

/** The groups of an export in column "plan", at one month. */
function groupsOf(content: string, more: Partial<GroupsRequest> = {}): Promise<GroupCensus[]> {
  return files.with(content, { columns: SOME_OPTIONS.columns }, (table) =>
    takeGroupsCensus(table, {
      tenure: { count: 1, unit: 'month' },
      settleDays: 0,
      asOf: table.report.asOf,
      ...more,
    }),
  );
}

describe('takeGroupsCensus', () => {
  it('gives every group the census it would get when it is asked about alone', async () => {
    await fc.assert(
      fc.asyncProperty(someAccounts, async ({ rows, size, tenure, settle }) => {
        await files.with(csvOf(rows), SOME_OPTIONS, async (table) => {
          const request = { tenure, settleDays: settle, asOf: SOME_AS_OF };
          const groups = await takeGroupsCensus(table, { ...request, subgroupSize: size });
          expect(groups.reduce((sum, group) => sum + group.accounts, 0)).toBe(table.report.accounts);
          for (const group of groups) {
            expect(group.subgroups.reduce((sum, one) => sum + one.accounts, 0)).toBe(
              group.matured - (group.matured % size),
            );
            if (group.value === null) continue;
            const alone = await takeCensus(table, {
              ...request,
              subgroupSize: size,
              view: 'start',
              segment: group.value,
            });
            expect(group.matured).toBe(alone.matured);
            expect(group.accounts).toBe(alone.matured + alone.immature);
            if (group.matured > 0) expect(group.subgroups).toEqual(alone.subgroups);
          }
        });
      }),
      { numRuns: 12 },
    );
  });

  it('pools what comes after the twelve largest values, and accounts without a value, and counts both', async () => {
    const row = (i: number, plan: string): string =>
      `${plan}-${i},2024-01-${String((i % 28) + 1).padStart(2, '0')},,${plan}`;
    const many = Array.from({ length: 15 }, (_, v) => Array.from({ length: 30 - v }, (_, i) => row(i, `v${v}`)));
    const none = Array.from({ length: 4 }, (_, i) => `none${i},2024-02-1${i},,`);
    const groups = await groupsOf(
      `id,start,end,plan\n${[...many.flat(), ...none].join('\n')}\ngone,2024-03-01,2024-06-01,v0\n`,
      { subgroupSize: 10 },
    );
    expect(groups).toHaveLength(13);
    expect(groups.map((group) => group.value).slice(0, 3)).toEqual(['v0', 'v1', 'v2']);
    expect(groups[12]).toMatchObject({ value: null, pooled: { values: 3, without: 4 }, accounts: 18 + 17 + 16 + 4 });
    expect(groups[12]!.subgroups).toHaveLength(5);
  });

  it('a rest of a single value is no rest and goes by its name', async () => {
    const rows = Array.from({ length: 13 }, (_, v) => `a${v},2024-01-0${(v % 9) + 1},,v${v}`);
    const groups = await groupsOf(`id,start,end,plan\n${rows.join('\n')}\ngone,2024-03-01,2024-06-01,v0\n`);
    expect(groups).toHaveLength(13);
    expect(groups.every((group) => group.pooled === null)).toBe(true);
  });

  it('values that look like SQL, or are called other, are values', async () => {
    const rows = ["o'; DROP TABLE accounts; --", 'other', 'Orchard'].flatMap((plan, v) =>
      Array.from({ length: 5 }, (_, i) => `a${v}${i},2024-01-0${i + 1},,"${plan}"`),
    );
    const groups = await groupsOf(`id,start,end,plan\n${rows.join('\n')}\ngone,2024-03-01,2024-06-01,other\n`, {
      subgroupSize: 2,
    });
    expect(Object.fromEntries(groups.map((group) => [group.value, group.accounts]))).toEqual({
      "o'; DROP TABLE accounts; --": 5,
      other: 6,
      Orchard: 5,
    });
  });
});

describe('the size for a group', () => {
  it('goes by its own rate, and by the rate of all where it lost nobody or everybody', () => {
    const all = { matured: 20_000, lost: 1_200 };
    expect(sizeFor({ matured: 4_000, lost: 400 }, all)).toBeLessThan(sizeFor({ matured: 4_000, lost: 200 }, all));
    const usual = sizeFor({ matured: 4_000, lost: 240 }, all);
    expect(sizeFor({ matured: 4_000, lost: 0 }, all)).toBe(usual);
    expect(sizeFor({ matured: 4_000, lost: 4_000 }, all)).toBe(usual);
    expect(Number.isFinite(sizeFor({ matured: 0, lost: 0 }, { matured: 0, lost: 0 }))).toBe(true);
  });
});
