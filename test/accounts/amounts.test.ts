import { writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { currencyBeside, currencyNamed } from '../../src/accounts/currency.ts';
import { loadAccounts, writeAccounts } from '../../src/accounts/parquet.ts';
import type { AccountTable } from '../../src/accounts/types.ts';
import { day, exportReader } from './exportFile.ts';

const files = exportReader();

const csv = (amounts: readonly string[], extra = ''): string =>
  `id,start,end,mrr${extra && ',currency'}\n${amounts.map((amount, i) => `k${i},2024-01-0${1 + (i % 9)},,${/[,"]/.test(amount) ? `"${amount}"` : amount}${extra && `,${extra.split('|')[i] ?? ''}`}`).join('\n')}\n`;

async function rows(table: AccountTable) {
  const reader = await table.connection.runAndReadAll(
    `SELECT start_day, amount, currency, later_amounts FROM ${table.table} ORDER BY start_day, amount`,
  );
  return reader.getRowObjectsJS();
}

describe('what an amount column holds is counted and said', () => {
  it('without an amount column there is nothing to say', async () => {
    expect((await files.report('id,start,end\n1,2024-01-02,\n')).amounts).toBeUndefined();
  });

  it('a column of zeros is one of amounts, and so is one of zeros and blanks', async () => {
    expect((await files.report(csv(['0', '0', '0']))).amounts).toMatchObject({ zero: 3, missing: 0 });
    expect((await files.report(csv(['0', '', '0.00']))).amounts).toMatchObject({ zero: 2, missing: 1 });
  });

  it('missing, unreadable, negative and zero amounts are told apart, the first unreadable one with its line', async () => {
    const { amounts } = await files.report(
      csv([
        '12',
        '12',
        '',
        'n/a',
        'ask Wren',
        'lots',
        '-3',
        '0',
        '12',
        '12',
        '(4)',
        '12',
        '12',
        '12',
        '12',
        '12',
        '12',
        '12',
        '12',
        '12',
        '12',
        '12',
        '12',
        '12',
        '12',
      ]),
    );
    expect(amounts).toMatchObject({
      missing: 2,
      unreadable: 2,
      firstUnreadable: { line: 6, value: 'ask Wren' },
      negative: 2,
      zero: 1,
      decimalComma: false,
      thousands: 0,
      currencies: [],
    });
  });

  it('"nan" and "inf" are no amounts', async () => {
    const { amounts } = await files.report(
      csv(['12', '12', '12', '12', '12', '12', '12', '12', 'nan', 'inf', '12', '12']),
    );
    expect(amounts).toMatchObject({ missing: 1, unreadable: 1, firstUnreadable: { line: 11, value: 'inf' } });
  });

  it('thousands are counted, with a comma or, beside decimal commas, with a point', async () => {
    expect((await files.report(csv(['1,200', '1,200.50', '12', '13']))).amounts).toMatchObject({
      decimalComma: false,
      thousands: 2,
    });
    await files.with(csv(['1.200', '1.200,50', '12,5', '13', '1300.5']), {}, async (table) => {
      expect(table.report.amounts).toMatchObject({ decimalComma: true, thousands: 2 });
      // 1300.5 can't be thousands, whatever the others are.
      expect((await rows(table)).map(({ amount }) => amount)).toEqual([1200, 1200.5, 12.5, 13, 1300.5]);
    });
  });

  it.each([
    ['€', 'EUR'],
    ['EUR', 'EUR'],
    ['eur', 'EUR'],
    ['EUR/month', 'EUR'],
    ['US$', 'USD'],
    ['$', '$'],
    ['$CAD', 'CAD'],
    ['kr', 'kr'],
    ['zł', 'PLN'],
    ['kraft', undefined],
    ['all', 'ALL'],
    ['all-in', undefined],
    ['permonth', undefined],
    ['', undefined],
  ])('beside an amount, "%s" is the currency %s', (around, currency) => {
    expect(currencyBeside(around)).toBe(currency);
  });

  it('a currency column is read whatever its capitals, and keeps a name that is no code', () => {
    expect([' gbp', 'GBP', '£', 'beans'].map(currencyNamed)).toEqual(['GBP', 'GBP', 'GBP', 'BEANS']);
  });

  it('currencies come from a column of their own', async () => {
    const report = await files.report(csv(['12', '13', '14', '15'], 'eur|EUR|GBP|'));
    expect(report.columns).toMatchObject({ amount: 'mrr', currency: 'currency' });
    expect(report.amounts?.currencies).toEqual([
      { currency: 'EUR', accounts: 2 },
      { currency: 'GBP', accounts: 1 },
      { currency: null, accounts: 1 },
    ]);
  });

  it('or from signs and codes beside the amounts', async () => {
    const report = await files.report(csv(['€12', '12 EUR', '£9', '12']));
    expect(report.amounts?.currencies).toEqual([
      { currency: 'EUR', accounts: 2 },
      { currency: 'GBP', accounts: 1 },
      { currency: null, accounts: 1 },
    ]);
    expect((await files.report(csv(['12', '13']))).amounts?.currencies).toEqual([]);
  });

  it('a column named as the currency wins over its name', async () => {
    const report = await files.report('id,start,end,mrr,paid_in\n1,2024-01-02,,5,EUR\n2,2024-01-03,,6,EUR\n', {
      columns: { currency: 'paid_in' },
    });
    expect(report.amounts?.currencies).toEqual([{ currency: 'EUR', accounts: 2 }]);
  });
});

describe('an account keeps every amount its rows give it', () => {
  const steps = [
    'id,start,end,mrr',
    // up, down, back to the first; then a second spell that no longer counts
    'a,2024-01-01,2024-02-01,10',
    'a,2024-02-01,2024-03-01,15',
    'a,2024-03-01,2024-04-01,8',
    'a,2024-04-01,2024-05-01,10',
    'a,2024-09-01,,99',
    // the same amount again is no change
    'b,2024-01-02,2024-02-02,20',
    'b,2024-02-02,,20',
    // a second row while the first still runs
    'c,2024-01-03,,30',
    'c,2024-02-03,,5',
    'd,2024-01-04,,40',
    // a row without an amount says nothing about it
    'e,2024-01-05,2024-02-05,50',
    'e,2024-02-05,2024-03-05,',
    'e,2024-03-05,,60',
    'f,2024-08-01,,1',
  ].join('\n');

  it('the first one, and each change within its first spell', async () => {
    await files.with(steps, {}, async (table) => {
      const found = await rows(table);
      expect(found.map(({ amount }) => amount)).toEqual([10, 20, 30, 40, 50, 1]);
      const change = (iso: string, amount: number) => ({ day: day(iso), amount });
      expect(found.map(({ later_amounts }) => later_amounts)).toEqual([
        [change('2024-02-01', 15), change('2024-03-01', 8), change('2024-04-01', 10)],
        null,
        [change('2024-02-03', 5)],
        null,
        [change('2024-03-05', 60)],
        null,
      ]);
      expect(table.report.amounts).toMatchObject({ severalAtOnce: 1, missing: 1, unreadable: 0 });
    });
  });

  it('an account whose rows are in two currencies has both', async () => {
    const text = 'id,start,end,mrr,ccy\na,2024-01-01,2024-02-01,10,EUR\na,2024-02-01,,11,GBP\nb,2024-01-02,,5,EUR\n';
    await files.with(text, {}, async (table) => {
      expect((await rows(table)).map(({ currency }) => currency)).toEqual(['EUR and GBP', 'EUR']);
    });
  });

  it('all of it survives being stored', async () => {
    await files.with(steps.replaceAll(/,(\d+)$/gm, ',€$1'), {}, async (table) => {
      const stored = await loadAccounts(files.engine(), await writeAccounts(files.engine(), table), table.report);
      expect(await rows(stored)).toEqual(await rows(table));
      expect((await rows(stored))[0]).toMatchObject({ currency: 'EUR' });
      files.engine().release(stored.connection);
    });
  });

  it('what an earlier version stored, without currencies and later amounts, still loads', async () => {
    await files.with(steps, {}, async (table) => {
      const file = join(files.engine().folder, 'old.parquet');
      await table.connection.run(
        `COPY (SELECT key, start_day, end_day, segment, amount, returned FROM ${table.table}) TO '${file}' (FORMAT parquet)`,
      );
      const reader = await table.connection.runAndReadAll(`SELECT content FROM read_blob('${file}')`);
      const parquet = (reader.getRowObjectsJS()[0] as { content: Uint8Array }).content;
      await writeFile(file, '');
      const stored = await loadAccounts(files.engine(), parquet, table.report);
      const found = await rows(stored);
      expect(found.map(({ amount }) => amount)).toEqual([10, 20, 30, 40, 50, 1]);
      expect(found.every(({ currency, later_amounts }) => currency === null && later_amounts === null)).toBe(true);
      files.engine().release(stored.connection);
    });
  });
});
