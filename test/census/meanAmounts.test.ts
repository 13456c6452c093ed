import { describe, expect, it } from 'vitest';
import { amountPeriod } from '../../src/accounts/amountPeriod.ts';
import { meanAmounts } from '../../src/census/meanAmounts.ts';
import { day, exportReader } from '../accounts/exportFile.ts';

const files = exportReader();
const asOf = day('2024-06-30');
const csv = (amounts: readonly string[], header = 'amount'): string =>
  `id,start,end,plan,${header}\n${amounts.map((amount, i) => `k${i},2024-0${1 + (i % 5)}-10,,${i % 2 === 0 ? 'A' : 'B'},${amount}`).join('\n')}\n`;

describe('meanAmounts', () => {
  it('mean and standard error, with what was left out', async () => {
    await files.with(csv(['10', '12', '17', '-5', '', '0']), { asOf }, async (table) => {
      const found = await meanAmounts(table, asOf, {});
      expect(found).toMatchObject({ accounts: 6, averaged: 4, negative: 1, missing: 1, changed: 0 });
      expect(found.mean).toBeCloseTo(39 / 4, 10);
      const spread = [10, 12, 17, 0].reduce((sum, amount) => sum + (amount - 39 / 4) ** 2, 0) / 3;
      expect(found.standardError).toBeCloseTo(Math.sqrt(spread / 4), 10);
    });
  });

  it('in a group, and before or since a day', async () => {
    await files.with(csv(['1', '2', '3', '4', '5', '6']), { asOf }, async (table) => {
      expect((await meanAmounts(table, asOf, { segment: 'A' })).mean).toBe(3);
      expect((await meanAmounts(table, asOf, { startedFrom: day('2024-03-01') })).mean).toBe(4);
      expect((await meanAmounts(table, asOf, { startedBefore: day('2024-02-01') })).mean).toBe(3.5);
    });
  });

  it('nothing to average', async () => {
    await files.with(csv(['-1', '-2', '']), { asOf }, async (table) => {
      expect(await meanAmounts(table, asOf, {})).toMatchObject({
        mean: null,
        standardError: 0,
        negative: 2,
        missing: 1,
        currencies: [],
      });
    });
  });

  it('all the same: no error, never a negative variance', async () => {
    await files.with(csv(Array.from({ length: 50 }, () => '12.99')), { asOf }, async (table) => {
      const { mean, standardError } = await meanAmounts(table, asOf, {});
      expect(mean).toBeCloseTo(12.99, 10);
      expect(standardError).toBeLessThan(1e-6);
    });
  });

  it('currencies apart', async () => {
    await files.with(csv(['10 EUR', '12 EUR', '9 USD']), { asOf }, async (table) => {
      expect((await meanAmounts(table, asOf, {})).currencies).toEqual([
        { currency: 'EUR', accounts: 2 },
        { currency: 'USD', accounts: 1 },
      ]);
    });
  });
});

describe('amountPeriod', () => {
  it.each([
    ['annual_price', 12, true],
    ['ARR', 12, true],
    ['MRR', 1, true],
    ['pricePerMonth', 1, true],
    ['quarterly fee', 3, true],
    ['amount', 1, false],
    ['arrears', 1, false],
  ])('%s', (header, months, stated) => {
    expect(amountPeriod(header)).toEqual({ months, stated });
  });
});
