import { closeSync, openSync, truncateSync, writeSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { readExport } from '../../src/accounts/readExport.ts';
import { exportReader } from './exportFile.ts';

const files = exportReader();
const rows = (count: number, row: (at: number) => string): string =>
  Array.from({ length: count }, (_, at) => row(at)).join('\n');

describe('a file that cannot be used gets one clear error, and the next one is read', () => {
  it.each([
    ['an empty file', '', 'FILE_EMPTY', /holds nothing/],
    ['a file of blanks', ' \n\n  \n', 'FILE_EMPTY', /holds nothing/],
    ['a header without rows', 'account,start,end\n', 'ROWS_MISSING', /line 1/],
    ['a header without rows, and no line end', 'account,start,end', 'ROWS_MISSING', /no rows/],
    ['no header', 'a1,2024-01-02,2024-02-03\na2,2024-01-03,\na3,2024-01-04,', 'HEADER_MISSING', /line 1/],
    [
      'no start column',
      'account,colour,end\na,red,2024-01-02\nb,blue,\n',
      'COLUMN_START_MISSING',
      /account, colour, end/,
    ],
    [
      'no end column',
      'account,start\na,2024-01-02\nb,2024-01-03\n',
      'COLUMN_END_MISSING',
      /nobody can be seen leaving/,
    ],
    ['one column', 'account\na\nb\nc\n', 'COLUMN_SINGLE', /"account"/],
    [
      'dates that cannot be read',
      'account,start,end\na,soon,late\nb,spring,\n',
      'DATES_UNREADABLE',
      /line 2 says "soon"/,
    ],
    [
      'an end column without dates',
      'account,start,end\na,2024-01-02,gone\nb,2024-01-03,left\n',
      'DATES_UNREADABLE',
      /"end".*line 2 says "gone"/,
    ],
    [
      'no start date anywhere',
      'account,start,end\na,,2024-01-02\nb,,2024-01-03\n',
      'DATES_UNREADABLE',
      /"start" holds no date/,
    ],
    [
      'a web page',
      '<!DOCTYPE html>\n<html><body><form>Sign in: password</form></body></html>',
      'FILE_NOT_CSV',
      /login page/,
    ],
    ['JSON', '[{"id": 1, "start": "2024-01-02"}]', 'FILE_NOT_CSV', /JSON/],
    ['XML', '<?xml version="1.0"?><rows><row/></rows>', 'FILE_NOT_CSV', /XML/],
    [
      'ends before starts everywhere',
      'id,start,end\n1,2024-05-02,2023-01-01\n2,2024-05-03,2023-01-02\n',
      'ACCOUNTS_NONE',
      /before the start date/,
    ],
  ])('%s', async (_, content, code, words) => {
    const error = await files.refused(content);
    expect(error.code).toBe(code);
    expect(error.message).toMatch(words);
    expect(error.hint).not.toBe('');
    expect((await files.report('id,start,end\n1,2024-01-02,\n2,2024-01-03,2024-02-04\n')).accounts).toBe(2);
  });

  it.each([
    ['a PNG picture', [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13], 'a PNG picture'],
    ['a ZIP archive', [0x50, 0x4b, 3, 4, 20, 0, 0, 0], 'a ZIP archive'],
    [
      'an Excel file',
      [0x50, 0x4b, 3, 4, ...Buffer.from('....[Content_Types].xml')],
      'an Excel or other Office document (.xlsx)',
    ],
    ['a PDF', [...Buffer.from('%PDF-1.7\n')], 'a PDF document'],
    ['unknown bytes', [1, 2, 3, 255, 0, 7, 8, 9, 200, 0, 0, 1, 2, 3, 4, 5, 6], 'binary data'],
  ])('%s under the name .csv is called by its name', async (_, bytes, what) => {
    const error = await files.refused(Uint8Array.from(bytes));
    expect(error.code).toBe('FILE_BINARY');
    expect(error.detail.what).toBe(what);
  });

  it('a missing file and a folder', async () => {
    await expect(readExport(files.engine(), '/nowhere/export.csv', {})).rejects.toMatchObject({ code: 'FILE_MISSING' });
    await expect(readExport(files.engine(), '/tmp', {})).rejects.toMatchObject({ code: 'FILE_MISSING' });
  });

  it('a file over the size limit is refused before it is read', async () => {
    const error = await files.refused('id,start,end\n1,2024-01-02,\n', { maxBytes: 10 });
    expect(error.code).toBe('FILE_TOO_LARGE');
    expect(error.message).toContain('27 bytes');
  });

  it('200 MB of one line are refused at once, and only their beginning is read', async () => {
    const path = files.put('');
    const file = openSync(path, 'w');
    writeSync(file, 'x'.repeat(1 << 20));
    closeSync(file);
    truncateSync(path, 200_000_000);
    const start = files.put('');
    const second = openSync(start, 'w');
    writeSync(second, `id,start,end\n1,2024-01-02,\n"${'y'.repeat(1 << 20)}`);
    closeSync(second);
    const before = process.memoryUsage().rss;
    await expect(readExport(files.engine(), path, {})).rejects.toMatchObject({ code: 'FILE_LINE_TOO_LONG' });
    await expect(readExport(files.engine(), start, {})).rejects.toMatchObject({
      code: 'FILE_LINE_TOO_LONG',
      message: expect.stringMatching(/line 3/),
    });
    expect(process.memoryUsage().rss - before).toBeLessThan(60_000_000);
  });

  it('an endless line far down is listed, and the rows around it are read', async () => {
    const content = `id,start,end\n${rows(20_000, (at) => `${at},2024-01-02,`)}\n${'z'.repeat(300_000)},2024-01-02,\nlast,2024-01-03,\n`;
    const report = await files.report(content);
    expect(report.rejected).toMatchObject([{ code: 'ragged', rows: 1, firstLine: 20_002 }]);
    expect(report.accounts).toBe(20_001);
  });

  it('a quote that is never closed would swallow all rows after it: the file is refused with its line', async () => {
    for (const count of [3, 30_000]) {
      const error = await files.refused(
        `id,start,end\n1,2024-01-02,\n"2,2024-01-03,\n${rows(count, (at) => `${at + 3},2024-01-04,`)}\n`,
      );
      expect(error.code).toBe('FILE_NOT_CSV');
      expect(error.message).toContain('line 3');
    }
  });

  it('a quote in the wrong place breaks its own row only', async () => {
    const report = await files.report('id,start,end\n1,2024-01-02,\n"2"x,2024-01-03,\n3,2024-01-04,\n');
    expect(report.rejected).toMatchObject([{ code: 'ragged', rows: 1, firstLine: 3 }]);
    expect(report).toMatchObject({ rows: 3, accounts: 2 });
  });

  it('names with quotes and SQL in them stay text', async () => {
    const hostile = `"id'; DROP TABLE raw; --",start,end,"plan ""x"""\n"a'b",2024-01-02,,"Robert'); DROP TABLE accounts; --"\n"c""d",2024-01-03,2024-02-01,x\n`;
    const report = await files.report(hostile, { columns: { id: "id'; DROP TABLE raw; --", segment: 'plan "x"' } });
    expect(report.accounts).toBe(2);
    expect(report.segments.map(({ value }) => value)).toContain("Robert'); DROP TABLE accounts; --");
  });

  it('a column that is not there is answered with the nearest one', async () => {
    const error = await files.refused('account,start_date,end_date\na,2024-01-02,\n', {
      columns: { start: 'strat_date' },
    });
    expect(error.code).toBe('COLUMN_UNKNOWN');
    expect(error.message).toContain('account, start_date, end_date');
    expect(error.hint).toContain('"start_date"');
  });
});
