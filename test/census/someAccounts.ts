import fc from 'fast-check';
import type { Tenure } from '../../src/census/types.ts';
import { isoDay } from '../../src/days.ts';
import { day } from '../accounts/exportFile.ts';

/** Day on which the accounts of the property tests begin to start; the data is complete through `SOME_AS_OF`. */
export const BASE = day('2023-12-01');
export const SOME_AS_OF = BASE + 420;

export interface SomeRow {
  readonly start: number;
  readonly life: number | null;
  readonly plan: string;
}

/** Accounts with many ties and many ends on month ends, a size, an age and days to settle. */
export const someAccounts = fc.record({
  rows: fc.array(
    fc.record({
      start: fc.oneof(fc.integer({ min: 0, max: 400 }), fc.constantFrom(0, 30, 31, 60, 61, 90, 91)),
      life: fc.option(fc.oneof(fc.integer({ min: 1, max: 300 }), fc.constantFrom(28, 29, 30, 31, 59, 60, 61))),
      plan: fc.constantFrom('Windowsill', 'Allotment', 'Orchard', ''),
    }),
    { minLength: 1, maxLength: 60 },
  ),
  size: fc.integer({ min: 1, max: 12 }),
  tenure: fc.constantFrom<Tenure>(
    { count: 1, unit: 'month' },
    { count: 3, unit: 'month' },
    { count: 12, unit: 'month' },
    { count: 2, unit: 'week' },
    { count: 10, unit: 'day' },
  ),
  settle: fc.constantFrom(0, 7),
});

/** The rows, and one account that started just before the data ends: an export in which nothing happens for months is refused. */
export const csvOf = (rows: readonly SomeRow[], order: readonly number[] = rows.map((_, at) => at)): string =>
  `id,start,end,plan\n${order
    .map((at) => {
      const { start, life, plan } = rows[at]!;
      return `k${at},${isoDay(BASE + start)},${life === null ? '' : isoDay(BASE + start + life)},${plan}`;
    })
    .join('\n')}\nyoung,${isoDay(SOME_AS_OF - 3)},,\n`;

export const SOME_OPTIONS = {
  columns: { id: 'id', start: 'start', end: 'end', segment: 'plan' },
  asOf: SOME_AS_OF,
} as const;

/** The rows in another order. */
export const shuffled = someAccounts.chain((some) =>
  fc.record({
    some: fc.constant(some),
    order: fc.shuffledSubarray(
      some.rows.map((_, at) => at),
      { minLength: some.rows.length },
    ),
  }),
);
