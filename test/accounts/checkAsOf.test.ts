import { expect, it } from 'vitest';
import { checkAsOf } from '../../src/accounts/checkAsOf.ts';
import { readCautions } from '../../src/answers/readCautions.ts';
import { dayFromIso } from '../../src/days.ts';
import { REPORT } from '../store/support/samples.ts';

const day = (text: string): number => dayFromIso(text)!;

it('a data-through date years after anything in the file is refused, with the date the file suggests', () => {
  expect(() => checkAsOf(day('2030-01-01'), day('2026-06-30'))).toThrow(/nothing in it happens after 30 June 2026/);
  expect(() => checkAsOf(day('2026-12-31'), day('2026-06-30'))).not.toThrow();
  expect(() => checkAsOf(day('2020-01-01'), day('2026-06-30'))).not.toThrow();
});

it('one that is weeks later is believed, with the first caution of the reply', () => {
  const report = { ...REPORT, inferredAsOf: day('2026-06-30') };
  expect(readCautions(report, day('2026-07-31'))[0]).toMatch(/nothing in it happens after 30 June 2026/);
  expect(readCautions(report, day('2026-07-03')).join()).not.toMatch(/happens after/);
});
