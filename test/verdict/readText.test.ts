import { expect, it } from 'vitest';
import type { ReadReport } from '../../src/accounts/types.ts';
import { dayFromIso } from '../../src/days.ts';
import { readText } from '../../src/verdict/words/readText.ts';

const report: ReadReport = {
  rows: 1500,
  accounts: 1488,
  returned: 0,
  mergedRows: 0,
  asOf: dayFromIso('2026-06-30')!,
  inferredAsOf: dayFromIso('2026-06-30')!,
  asOfSource: 'latest-date',
  futureEnds: 0,
  firstStart: dayFromIso('2024-01-01')!,
  lastStart: dayFromIso('2026-06-30')!,
  columns: { start: 'from', end: 'to' },
  headers: ['from', 'to'],
  dates: 'iso',
  datesSource: 'iso',
  encoding: 'utf-8',
  delimiter: ',',
  rejected: [
    { code: 'zero-length', reason: 'the account ended on the day it started', rows: 11, firstLine: 1487, examples: [] },
    { code: 'start-missing', reason: 'there is no start date', rows: 1, firstLine: 1320, examples: [] },
  ],
  segments: [],
};

it('gives each reason after its number of rows, and lines as an editor numbers them', () => {
  expect(readText(report, 'x.csv')).toEqual(
    expect.arrayContaining([
      'Not used, 11 rows: the account ended on the day it started (first on line 1487).',
      'Not used, 1 row: there is no start date (line 1320).',
    ]),
  );
});

it('says where the data-through date comes from: the last start, an end after it, or a person', () => {
  const through = (change: Partial<ReadReport>): string =>
    readText({ ...report, ...change }, 'x.csv').find((line) => line.startsWith('Data complete'))!;
  expect(through({})).toBe('Data complete through 30 June 2026 (worked out from the file: its last start).');
  expect(through({ lastStart: report.asOf - 3 })).toMatch(/\(worked out from the file: its last start or end\)/);
  expect(through({ asOfSource: 'given' })).toMatch(/\(as you said\)/);
});

it('says what in the amounts decides a sum of revenue', () => {
  const amounts = {
    missing: 3,
    unreadable: 1,
    firstUnreadable: { line: 88, value: 'ask Wren' },
    negative: 2,
    zero: 5,
    decimalComma: true,
    thousands: 4,
    severalAtOnce: 0,
    currencies: [
      { currency: 'EUR', accounts: 900 },
      { currency: null, accounts: 588 },
    ],
  };
  expect(readText({ ...report, amounts }, 'x.csv').filter((line) => /amount|currenc/i.test(line))).toEqual([
    'Amounts: a comma is the decimal sign, as some of them can only be read so.',
    'Amounts: 4 rows with a point between thousands.',
    'Currencies of the amounts: EUR (900 accounts) and none stated (588 accounts).',
    'Amounts that cannot be read, 1 row: line 88 says “ask Wren”. The accounts count; no sum of revenue holds them.',
    '3 rows without an amount.',
    '2 rows with a negative amount, which no sum of revenue holds.',
  ]);
  const plain = { ...amounts, missing: 0, unreadable: 0, firstUnreadable: null, negative: 0, thousands: 0 };
  expect(readText({ ...report, amounts: { ...plain, decimalComma: false, currencies: [] } }, 'x.csv')).toEqual(
    readText(report, 'x.csv'),
  );
});
