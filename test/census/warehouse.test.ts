import { type DuckDBConnection, DuckDBInstance } from '@duckdb/node-api';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { rowsOf } from '../../src/accounts/sql.ts';
import { calendarSql } from '../../src/census/calendarSql.ts';
import { censusSql } from '../../src/census/censusSql.ts';
import { groupsCensusSql, groupTotalsSql } from '../../src/census/groupsSql.ts';
import { renewalDaysSql, renewalSql } from '../../src/census/renewalSql.ts';
import { lastMaturedStart } from '../../src/census/tenure.ts';
import type { CensusRequest, Tenure } from '../../src/census/types.ts';
import { day } from '../accounts/exportFile.ts';
import { startServer, type TestServer } from '../store/support/server.ts';

/*
 * The census runs where the data is: the same SQL text on the embedded engine and on a real Postgres, over the same accounts.
 */

const server: TestServer | string = await startServer().catch((error: unknown) => {
  // Where the checks run for everyone, a missing server must not look like a pass.
  if (process.env.CI) throw error;
  return String(error);
});

const FIRST = day('2022-11-15');
const AS_OF = day('2025-03-20');

/** 3,000 accounts with many ties, starts on the last days of months and ends on the very day of a renewal. */
function someAccounts(): string[] {
  let seed = 20_250_320;
  const next = (below: number): number => {
    seed = (Math.imul(seed, 1_664_525) + 1_013_904_223) >>> 0;
    return Math.floor((seed / 2 ** 32) * below);
  };
  return Array.from({ length: 3_000 }, (_, at) => {
    const start = FIRST + (next(4) === 0 ? [46, 75, 76, 77, 105, 106, 107][next(7)]! : next(AS_OF - FIRST));
    const life = next(3) === 0 ? 'NULL' : String(start + 1 + [27, 28, 29, 30, 58, 88, 91, 364, next(800)][next(9)]!);
    const segment = ["'Windowsill'", "'Allotment'", "'Wren''s own'", 'NULL'][next(4)]!;
    return `(${(at * 7_919) % 1_000_003}, ${start}, ${life}, ${segment})`;
  });
}

const missing = typeof server === 'string';
describe.skipIf(missing)(`the census on a Postgres server${missing ? ` (skipped: ${server})` : ''}`, () => {
  let embedded: DuckDBConnection;
  let client: pg.Client;

  beforeAll(async () => {
    const rows = someAccounts().join(', ');
    const create = (key: string): string =>
      `CREATE TABLE accounts (key ${key}, start_day INTEGER, end_day INTEGER, segment VARCHAR)`;
    embedded = await (await DuckDBInstance.create(':memory:')).connect();
    await embedded.run(`${create('UBIGINT')}; INSERT INTO accounts VALUES ${rows}`);
    client = new pg.Client({ connectionString: await (server as TestServer).database() });
    await client.connect();
    await client.query(create('NUMERIC(20)'));
    await client.query(`INSERT INTO accounts VALUES ${rows}`);
  });

  afterAll(async () => {
    embedded?.closeSync();
    await client?.end();
    if (typeof server !== 'string') await server.stop();
  });

  /** Both engines' rows with whole numbers as plain ones; the order of text is the engine's own. */
  async function both(sql: string): Promise<[unknown[], unknown[]]> {
    const plain = (rows: readonly object[]): unknown[] =>
      rows
        .map((row) =>
          Object.fromEntries(
            Object.entries(row).map(([name, value]) => [
              name,
              name === 'segment' || value === null ? value : Number(value),
            ]),
          ),
        )
        .sort((a, b) => (JSON.stringify(a) < JSON.stringify(b) ? -1 : 1));
    return [plain(await rowsOf(embedded, sql)), plain((await client.query(sql)).rows)];
  }

  const requests: readonly (readonly [string, CensusRequest])[] = (
    [
      ['a month', { count: 1, unit: 'month' }, 40],
      ['three months, settled for a week', { count: 3, unit: 'month' }, 25, 7],
      ['a year', { count: 12, unit: 'month' }, 7],
      ['two weeks', { count: 2, unit: 'week' }, 500],
      ['ninety days of one plan', { count: 90, unit: 'day' }, 30, 0, "Wren's own"],
      ['a size larger than the data', { count: 1, unit: 'month' }, 1_000_000],
    ] as [string, Tenure, number, number?, string?][]
  ).map(([name, tenure, subgroupSize, settleDays = 0, segment]) => [
    name,
    { tenure, subgroupSize, settleDays, asOf: AS_OF, view: 'start', ...(segment === undefined ? {} : { segment }) },
  ]);
  const segmentsOf = ({ segment }: CensusRequest): string[] =>
    segment === undefined ? ['Windowsill', "Wren's own"] : [];

  it.each(requests)('start view, %s: the same counts', async (_, request) => {
    const until = lastMaturedStart(AS_OF, request.tenure, request.settleDays);
    const [here, there] = await both(censusSql('accounts', request, FIRST, until, segmentsOf(request)));
    expect(there).toEqual(here);
    expect(here.length).toBeGreaterThan(0);
  });

  it.each(requests)('every group by itself, %s: the same counts', async (_, { tenure, settleDays, subgroupSize }) => {
    const until = lastMaturedStart(AS_OF, tenure, settleDays);
    const values = ['Windowsill', "Wren's own"];
    const [totals, sameTotals] = await both(groupTotalsSql('accounts', values, tenure, FIRST, until));
    expect(sameTotals).toEqual(totals);
    expect(totals).toHaveLength(3);
    const sizes = new Map([
      [0, subgroupSize],
      [2, 3 * subgroupSize],
    ]);
    const [here, there] = await both(groupsCensusSql('accounts', values, sizes, tenure, FIRST, until));
    expect(there).toEqual(here);
    expect(here.length).toBeGreaterThan(0);
  });

  it.each(requests)('renewal view, %s: the same counts', async (_, request) => {
    const range = { firstStart: FIRST, until: AS_OF - request.settleDays, most: 70 };
    const [here, there] = await both(renewalSql('accounts', request, range));
    expect(there).toEqual(here);
    expect(here.length).toBeGreaterThan(0);
    const [hereDays, thereDays] = await both(renewalDaysSql('accounts', request, range, AS_OF - 91));
    expect(thereDays).toEqual(hereDays);
    expect(hereDays.length).toBeGreaterThan(0);
  });

  it.each(requests)('calendar view, %s: the same counts', async (_, request) => {
    const [here, there] = await both(
      calendarSql('accounts', request, 2022 * 12 + 10, 2025 * 12 + 2, segmentsOf(request)),
    );
    expect(there).toEqual(here);
    expect(here.length).toBeGreaterThan(25);
  });
});
