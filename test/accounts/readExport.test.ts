import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { day, exportReader, used } from './exportFile.ts';

const files = exportReader();

describe('readExport: what a file may look like', () => {
  const table = (delimiter: string): string =>
    ['account,start,end,plan', 'a,2024-01-02,2024-03-04,Orchard', 'b,2024-01-03,,Windowsill']
      .join('\n')
      .replaceAll(',', delimiter);
  const text = 'account,start,end,plan\na,2024-01-02,2024-03-04,Verger d’été\nb,2024-01-03,,Windowsill\n';
  const utf16 = (bom: boolean, big: boolean): Buffer => {
    const bytes = Buffer.from(`${bom ? '\ufeff' : ''}${text}`, 'utf16le');
    return big ? bytes.swap16() : bytes;
  };
  const windows1252 = Buffer.from(text.replace('’', '\u0092'), 'latin1');

  it.each([
    ['commas', table(',')],
    ['semicolons', table(';')],
    ['tabs', table('\t')],
    ['bars', table('|')],
    ['Windows line ends', table(',').replaceAll('\n', '\r\n')],
    ['returns only', table(',').replaceAll('\n', '\r')],
    ['mixed line ends', table(',').replace('\n', '\r\n')],
    ['a byte order mark', `\ufeff${table(',')}\n`],
    ['blank lines', `\n${table(',').replaceAll('\n', '\n\n  \n')}\n\n`],
    ['quotes round everything', table(',').replaceAll(/[^,\n]+/g, '"$&"')],
    ['a separator at the end of every line', `${table(',').replaceAll('\n', ',\n')},`],
    ['a line above the header', `Subscriptions of the Marrowby Seed Club\n\n${table(',')}`],
    ['Excel’s sep line', `sep=;\n${table(';')}`],
  ])('%s', async (_, content) => {
    const accounts = await files.accounts(content);
    expect(accounts.map(({ start, end, segment }) => [start, end, segment])).toEqual([
      [day('2024-01-02'), day('2024-03-04'), 'Orchard'],
      [day('2024-01-03'), null, 'Windowsill'],
    ]);
    const report = await files.report(content);
    expect(report).toMatchObject({ rows: 2, accounts: 2, rejected: [], dates: 'iso' });
    expect(report.columns).toMatchObject({ id: 'account', start: 'start', end: 'end', segment: 'plan' });
  });

  it.each([
    ['utf-8', Buffer.from(text)],
    ['utf-16le', utf16(true, false)],
    ['utf-16le', utf16(false, false)],
    ['utf-16be', utf16(true, true)],
    ['windows-1252', windows1252],
    // the first letter outside ASCII stands far behind the beginning that is sniffed
    [
      'windows-1252',
      Buffer.concat([
        Buffer.from(`account,start,end,plan\n${'x,2024-01-01,,Orchard\n'.repeat(20_000)}`),
        windows1252.subarray(23),
      ]),
    ],
  ])('encoding %s', async (encoding, bytes) => {
    const report = await files.report(bytes);
    expect(report.encoding).toBe(encoding);
    expect(report.segments.map(({ value }) => value)).toContain('Verger d’été');
  });

  it.each([
    ['2024-03-01T10:00:00Z', '2024-03-01'],
    ['2024-03-01 23:59', '2024-03-01'],
    ['2024-03-01T23:30:00-05:00', '2024-03-01'],
    ['2024-3-1', '2024-03-01'],
    ['2024/03/01', '2024-03-01'],
    ['2024.03.01', '2024-03-01'],
    ['20240301', '2024-03-01'],
    ['3 Mar 2024', '2024-03-03'],
    ['"Mar 3, 2024"', '2024-03-03'],
    ['"March 3rd, 2024 10:15 PM"', '2024-03-03'],
    ['03-Mar-24', '2024-03-03'],
    ['"Fri, 01 Mar 2024 10:00:00 GMT"', '2024-03-01'],
    ['1709287200', '2024-03-01'],
    ['1709287200000', '2024-03-01'],
  ])('the start %s is %s', async (written, iso) => {
    const [account] = await files.accounts(`id,start,end\n1,${written},\n2,${written},\n`);
    expect(account?.start).toBe(day(iso));
  });

  it.each(['', 'NULL', 'n/a', '-', 'never', 'active', '9999-12-31', '2999-01-01', '0000-00-00', '1970-01-01', '" "'])(
    'the end "%s" means that it is still a customer',
    async (end) => {
      const accounts = await files.accounts(`id,start,end\n1,2024-01-02,${end}\n2,2024-01-03,2024-02-04\n`);
      expect(accounts.map((account) => account.end)).toEqual([null, day('2024-02-04')]);
    },
  );

  it.each([
    ['1200', 1200],
    ['$1,200.50', 1200.5],
    ['"€ 12,50"', 12.5],
    ['"1.200,50"', 1200.5],
    ['12.50 EUR', 12.5],
    ['(5.00)', -5],
    ['free', null],
  ])('the amount %s is %s', async (written, amount) => {
    const quoted = written.includes(',') && !written.startsWith('"') ? `"${written}"` : written;
    const [account] = await files.accounts(
      `id,start,end,mrr\n1,2024-01-02,,${quoted}\n2,2024-01-03,,20\n3,2024-01-04,,30\n4,2024-01-05,,4\n5,2024-01-05,,5\n`,
    );
    expect(account?.amount).toBe(amount);
  });

  it('an export without ids takes every row for an account', async () => {
    const report = await files.report('start,end,plan\n2024-01-02,,x\n2024-01-02,,x\n2024-01-03,2024-02-01,y\n');
    expect(report).toMatchObject({ rows: 3, accounts: 3, mergedRows: 0, rejected: [] });
    expect(report.columns.id).toBeUndefined();
  });
});

describe('readExport: date order', () => {
  it('one value that reads only day-first settles it for both columns', async () => {
    const accounts = await files.accounts('id,start,end\n1,02/01/2024,05/03/2024\n2,03/01/2024,31/01/2024\n');
    expect(accounts.map(({ start, end }) => [start, end])).toEqual([
      [day('2024-01-02'), day('2024-03-05')],
      [day('2024-01-03'), day('2024-01-31')],
    ]);
    expect(await files.report('id,start,end\n1,02/01/2024,31/03/2024\n')).toMatchObject({
      dates: 'dmy',
      datesSource: 'values',
    });
  });

  it('one value that reads only month-first settles it', async () => {
    expect(await files.report('id,start,end\n1,01/02/2024,\n2,01/31/2024,\n')).toMatchObject({
      dates: 'mdy',
      datesSource: 'values',
      firstStart: day('2024-01-02'),
    });
  });

  it('dates that read both ways are asked about, with both readings, and never guessed', async () => {
    const error = await files.refused('id,start,end\n1,05/05/2024,\n\n2,02/03/2024,04/05/2024\n');
    expect(error.code).toBe('DATES_AMBIGUOUS');
    expect(error.detail).toEqual({
      line: 4,
      column: 'start',
      text: '02/03/2024',
      dmy: '2024-03-02',
      mdy: '2024-02-03',
    });
  });

  it('impossible histories under one order are no reason to take the other', async () => {
    // day-first every end would lie before its start
    expect((await files.refused('id,start,end\n1,02/03/2024,01/04/2024\n2,03/05/2024,02/06/2024\n')).code).toBe(
      'DATES_AMBIGUOUS',
    );
  });

  it('the order that was named is taken', async () => {
    const content = 'id,start,end\n1,02/03/2024,04/05/2024\n';
    expect(await files.report(content, { dates: 'dmy' })).toMatchObject({
      dates: 'dmy',
      datesSource: 'given',
      firstStart: day('2024-03-02'),
    });
    expect(await files.report(content, { dates: 'mdy' })).toMatchObject({
      dates: 'mdy',
      firstStart: day('2024-02-03'),
    });
  });

  it('both kinds in one file are refused, and with a named order the others are listed', async () => {
    const content = 'id,start,end\n1,31/01/2024,\n2,01/31/2024,\n3,03/02/2024,\n';
    const error = await files.refused(content);
    expect(error.code).toBe('DATES_MIXED');
    expect(error.message).toContain('line 2');
    expect(error.message).toContain('line 3');
    expect(await files.report(content, { dates: 'dmy' })).toMatchObject({
      accounts: 2,
      rejected: [{ code: 'start-unreadable', rows: 1, firstLine: 3, examples: [{ line: 3, value: '01/31/2024' }] }],
    });
  });

  it('a two-digit year is read only when it cannot stand in front', async () => {
    expect((await files.refused('id,start,end\n1,14/03/24,\n2,31/01/25,\n')).code).toBe('DATES_AMBIGUOUS');
    expect(await files.report('id,start,end\n1,3/14/24,\n2,1/31/25,\n')).toMatchObject({
      dates: 'mdy',
      firstStart: day('2024-03-14'),
    });
  });
});

describe('readExport: rows that are left out', () => {
  it('each has its reason, its line and an example', async () => {
    const report = await files.report(
      [
        'customer_id,plan,status,signup_date,cancelled_at,mrr', // line 1
        'c1,Orchard,active,2024-01-02,,20',
        'c2,"Orch',
        'ard",cancelled,2024-01-03,2024-02-01,20',
        ',Orchard,active,2024-01-04,,20', // 5
        'c4,Orchard,active,,,20',
        'c5,Orchard,active,2024-02-30,,20',
        'c6,Orchard,cancelled,2024-01-05,soon,20',
        'c7,Orchard,cancelled,2024-01-06,2024-01-01,20',
        'c8,Orchard,cancelled,2024-01-06,2024-01-06,20', // 10
        'c9,Free Trial,trialing,2024-01-07,,0',
        'c10,Trial Garden,active,2024-01-07,,20',
        'test-1,Orchard,active,2024-01-07,,20',
        'c11,Orchard,active',
        'c12,Orchard,active,2024-01-08,,20,extra', // 15
        'c13,Orchard,cancelled,2024-01-08,,20',
        'c1,Orchard,active,2024-01-02,,20',
        'c14,Orchard,active,2024-01-09,,20',
        'Total,,,,,400',
      ].join('\n'),
    );
    expect(Object.fromEntries(report.rejected.map(({ code, rows, firstLine }) => [code, [rows, firstLine]]))).toEqual({
      ragged: [2, 14],
      'id-missing': [1, 5],
      'start-missing': [1, 6],
      'start-unreadable': [1, 7],
      'end-unreadable': [1, 8],
      'end-before-start': [1, 9],
      'zero-length': [1, 10],
      trial: [1, 11],
      internal: [1, 13],
      'end-missing': [1, 16],
      duplicate: [1, 17],
      'total-line': [1, 19],
    });
    expect(report.rejected.find(({ code }) => code === 'end-before-start')?.examples).toEqual([
      { line: 9, value: '2024-01-06 to 2024-01-01' },
    ]);
    expect(report).toMatchObject({ rows: 17, accounts: 4, mergedRows: 0 });
    expect(used(report)).toBe(report.rows);
  });

  it('ids that all look like tests are customers after all', async () => {
    expect(await files.report('id,start,end\ntest-1,2024-01-02,\ntest-2,2024-01-03,\n')).toMatchObject({
      accounts: 2,
      rejected: [],
    });
  });

  it('starts after the data-through date are listed', async () => {
    const report = await files.report('id,start,end\n1,2024-01-02,2024-05-01\n2,2024-06-03,\n', {
      asOf: day('2024-03-31'),
    });
    expect(report).toMatchObject({
      accounts: 1,
      asOf: day('2024-03-31'),
      asOfSource: 'given',
      futureEnds: 1,
      rejected: [{ code: 'future-start', firstLine: 3 }],
    });
  });

  it('every row is used, merged or listed, and every listed line is the right one', async () => {
    const field = fc.constantFrom('2024-01-02', '2024-02-03', '2024-12-31', '', 'rubbish', '2023-01-01');
    const id = fc.constantFrom('a', 'b', 'c', '', '"q\nq"', '"x""y"', '" lead"', 'test-9');
    const row = fc.oneof(
      { weight: 8, arbitrary: fc.tuple(id, field, field).map((fields) => fields.join(',')) },
      {
        weight: 1,
        arbitrary: fc.constantFrom('', '   ', 'one', 'a,2024-01-02', 'a,2024-01-02,,,x', '"multi\nline",2024-01-05'),
      },
    );
    await fc.assert(
      fc.asyncProperty(fc.array(row, { minLength: 1, maxLength: 40 }), async (rows) => {
        const content = `id,start,end\n0,2024-01-01,\n${rows.join('\n')}\n`;
        const report = await files.report(content, { columns: { id: 'id', start: 'start', end: 'end' } });
        const filled = rows.filter((one) => one.trim() !== '').length + 1;
        expect(report.rows).toBe(filled);
        expect(used(report)).toBe(filled);
        const lines = content.split('\n');
        for (const { code, examples } of report.rejected) {
          for (const { line, value } of examples) {
            // The record begins on that line: its first field is an id of ours, and what is shown stands in it or right after.
            const record = lines.slice(line - 1, line + 2).join('\n');
            if (code === 'start-unreadable' || code === 'end-unreadable') expect(record).toContain(value);
            if (code === 'id-missing') expect(lines[line - 1]).toMatch(/^,/);
            if (code === 'internal') expect(lines[line - 1]).toMatch(/^test-9,/);
            if (code === 'ragged') expect(lines[line - 1]).toMatch(/^(one|a,|"multi)/);
          }
        }
      }),
      { numRuns: 40, seed: 20250101 },
    );
  });
});

describe('readExport: spells', () => {
  it('rows that overlap, touch or lie at most 30 days apart are one spell; a longer gap makes a returned account', async () => {
    const content = [
      'id,start,end',
      'a,2024-01-01,2024-02-01',
      'a,2024-03-02,2024-04-01', // 30 days later
      'b,2024-01-01,2024-02-01',
      'b,2024-03-03,', // 31 days later
      'c,2024-01-01,',
      'c,2024-05-01,2024-06-01',
      'd,2024-01-01,2024-06-01',
      'd,2024-02-01,2024-03-01',
      'e,2024-05-20,2024-06-01',
    ].join('\n');
    const accounts = await files.accounts(content);
    expect(accounts.map(({ start, end, returned }) => [start, end, returned]).sort()).toEqual(
      [
        [day('2024-01-01'), day('2024-04-01'), false],
        [day('2024-01-01'), day('2024-02-01'), true],
        [day('2024-01-01'), null, false],
        [day('2024-01-01'), day('2024-06-01'), false],
        [day('2024-05-20'), day('2024-06-01'), false],
      ].sort(),
    );
    expect(await files.report(content)).toMatchObject({ rows: 9, accounts: 5, mergedRows: 4, returned: 1 });
  });

  it('agree with a plain second implementation', async () => {
    const base = day('2024-01-01');
    const iso = (at: number): string => new Date((base + at) * 86_400_000).toISOString().slice(0, 10);
    const row = fc.record({
      id: fc.integer({ min: 0, max: 5 }),
      start: fc.integer({ min: 0, max: 250 }),
      length: fc.option(fc.integer({ min: 1, max: 80 })),
    });
    await fc.assert(
      fc.asyncProperty(
        fc.array(row, { minLength: 1, maxLength: 30 }),
        fc.constantFrom(0, 10, 30),
        async (rows, bridgeDays) => {
          const content = `id,start,end\n${rows.map(({ id, start, length }) => `k${id},${iso(start)},${length === null ? '' : iso(start + length)}`).join('\n')}\n`;
          const expected = [...new Set(rows.map(({ id }) => id))].map((id) => {
            const own = rows.filter((one) => one.id === id).sort((a, b) => a.start - b.start);
            const first = own[0]?.start ?? 0;
            let end = Number.NEGATIVE_INFINITY;
            let returned = false;
            for (const { start, length } of own) {
              if (end !== Number.NEGATIVE_INFINITY && start > end + bridgeDays) {
                returned = true;
                break;
              }
              end = Math.max(end, length === null ? Number.POSITIVE_INFINITY : start + length);
            }
            return [base + first, end === Number.POSITIVE_INFINITY ? null : base + end, returned];
          });
          const accounts = await files.accounts(content, { bridgeDays, asOf: base + 350 });
          expect(accounts.map(({ start, end, returned }) => JSON.stringify([start, end, returned])).sort()).toEqual(
            expected.map((one) => JSON.stringify(one)).sort(),
          );
          expect(used(await files.report(content, { bridgeDays, asOf: base + 350 }))).toBe(rows.length);
        },
      ),
      { numRuns: 30, seed: 7 },
    );
  });
});
