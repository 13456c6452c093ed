import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { takeCensus } from '../../src/census/census.ts';
import { lossPlaces } from '../../src/census/lossPlaces.ts';
import { day, exportReader } from '../accounts/exportFile.ts';
import { csvOf, SOME_AS_OF, SOME_OPTIONS, shuffled, someAccounts } from './someAccounts.ts';

const files = exportReader();
const view = 'start' as const;

describe('the places of lost accounts in the order of start', () => {
  it('give the counts of the census when they are cut into its subgroups, from any place on', async () => {
    await fc.assert(
      fc.asyncProperty(someAccounts, fc.integer({ min: 0, max: 30 }), async ({ rows, size, tenure, settle }, from) => {
        const request = { tenure, subgroupSize: size, settleDays: settle, asOf: SOME_AS_OF, view };
        await files.with(csvOf(rows), SOME_OPTIONS, async (table) => {
          const census = await takeCensus(table, request);
          const all = await lossPlaces(table, request, 0);
          expect(all.accounts).toBe(census.matured);
          for (const { index, lost, firstStart, lastStart } of census.subgroups) {
            const inside = all.places.filter((place) => Math.ceil(place / size) === index);
            expect(inside.length).toBe(lost);
            expect(all.startOf((index - 1) * size + 1)).toBe(firstStart);
            expect(all.startOf(index * size)).toBe(lastStart);
          }
          const later = await lossPlaces(table, request, from);
          expect([...later.places]).toEqual([...all.places].filter((place) => place > from));
          expect(later.accounts).toBe(all.accounts);
        });
      }),
      { numRuns: 25 },
    );
  });

  it('do not depend on the order of rows', async () => {
    await fc.assert(
      fc.asyncProperty(shuffled, async ({ some, order }) => {
        const request = { tenure: some.tenure, settleDays: some.settle, asOf: SOME_AS_OF };
        const read = (content: string) =>
          files.with(content, SOME_OPTIONS, async (table) => [...(await lossPlaces(table, request, 0)).places]);
        expect(await read(csvOf(some.rows, order))).toEqual(await read(csvOf(some.rows)));
      }),
      { numRuns: 15 },
    );
  });

  it('leave out accounts that have left but are too young to be counted, and those of other groups', async () => {
    const content = [
      'id,start,end,plan',
      'a,2024-01-01,2024-01-20,Orchard',
      'b,2024-01-05,,Orchard',
      'c,2024-02-01,2024-02-20,Windowsill',
      'd,2024-06-10,2024-06-11,Orchard',
      'e,2024-06-20,,Orchard',
    ].join('\n');
    const request = { tenure: { count: 1, unit: 'month' }, settleDays: 0, asOf: day('2024-06-30') } as const;
    const options = { columns: { segment: 'plan' }, asOf: request.asOf };
    const of = (segment?: string) =>
      files.with(content, options, (table) => lossPlaces(table, { ...request, ...(segment ? { segment } : {}) }, 0));
    expect(await of()).toMatchObject({ accounts: 3, places: Int32Array.of(1, 3) });
    expect(await of('Orchard')).toMatchObject({ accounts: 2, places: Int32Array.of(1) });
  });
});
