import { describe, expect, it } from 'vitest';
import { compareExports } from '../../src/accounts/compareExports.ts';
import { writeAccounts } from '../../src/accounts/parquet.ts';
import type { ExportChange } from '../../src/accounts/types.ts';
import { dayFromIso } from '../../src/days.ts';
import { changeText } from '../../src/verdict/words/changeText.ts';
import { exportReader } from './exportFile.ts';

const reader = exportReader();
const head = 'account_id,start_date,end_date\n';
const FIRST = `${head}a,2025-01-01,\nb,2025-01-10,2025-03-01\nc,2025-02-01,\nd,2025-02-03,\ne,2025-03-01,2025-04-01\n`;

async function changed(earlier: string, later: string): Promise<ExportChange | null> {
  const asOf = dayFromIso('2025-05-01')!;
  const before = await reader.with(earlier, { asOf }, async (table) => ({
    parquet: await writeAccounts(reader.engine(), table),
    report: table.report,
  }));
  return reader.with(later, { asOf: dayFromIso('2025-06-01')! }, (table) =>
    compareExports(reader.engine(), table, before.parquet, before.report),
  );
}

describe('a newer export against the one before it', () => {
  it('says the same when only the time since then was added', async () => {
    const later = `${FIRST.replace('c,2025-02-01,', 'c,2025-02-01,2025-05-20')}f,2025-05-10,\n`;
    const change = await changed(FIRST, later);
    expect(change).toMatchObject({
      before: 5,
      inBoth: 5,
      gone: 0,
      backDated: 0,
      startMoved: 0,
      lateLosses: 0,
      takenBack: 0,
    });
    expect(changeText(change!, 'May.csv')).toEqual([
      'Up to 1 May 2025 it says the same as May.csv, about all 5 accounts.',
    ]);
  });

  it('counts what is gone, back-dated, booked late and taken back, each once', async () => {
    const later = `${head}a,2025-01-01,2025-04-20\nb,2025-01-10,\nc,2025-02-02,\ne,2025-03-01,2025-04-01\ng,2025-03-15,\nh,2025-05-15,\n`;
    const change = await changed(FIRST, later);
    expect(change).toMatchObject({
      before: 5,
      inBoth: 4,
      gone: 1,
      backDated: 1,
      startMoved: 1,
      lateLosses: 1,
      takenBack: 1,
    });
    const [told, large] = changeText(change!, 'May.csv');
    expect(told).toBe(
      'Against May.csv, about the time up to 1 May 2025: 1 account no longer in it, 1 account added that started before then, 1 start date changed, 1 loss booked late and 1 loss taken back.',
    );
    expect(large).toMatch(/large change/);
  });

  it('does not compare two lists of other accounts, nor lists without ids', async () => {
    const other = await changed(FIRST, `${head}x,2025-01-01,\ny,2025-01-10,2025-02-01\n`);
    expect(changeText(other!, 'May.csv')[0]).toMatch(/shares no account with May.csv/);
    expect(await changed('start_date,end_date\n2025-01-01,\n2025-01-02,2025-02-01\n', FIRST)).toBeNull();
  });
});
