import { existsSync, readdirSync, statSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { openEngine } from '../../src/accounts/engine.ts';
import { loadAccounts, writeAccounts } from '../../src/accounts/parquet.ts';
import { dayFromIso } from '../../src/days.ts';
import { accountsOf, exportReader } from './exportFile.ts';

const files = exportReader();
const CONTENT =
  'id,start,end,plan,mrr\nc1,2024-01-02,,Orchard,20\nc2,2024-01-03,2024-02-04,Allotment,15.5\nc2,2024-06-03,,Allotment,15.5\n';

describe('the engine', () => {
  it('reads the one file it was opened for, and nothing else, and that cannot be changed', async () => {
    const [mine, other] = [files.put(CONTENT), files.put(CONTENT)];
    const connection = await files.engine().open(mine);
    await connection.run(`SELECT * FROM read_csv('${mine}')`);
    for (const sql of [
      `SELECT * FROM read_csv('${other}')`,
      `SELECT * FROM read_text('/etc/passwd')`,
      `COPY (SELECT 1) TO '${other}.out'`,
      `ATTACH '${other}.db'`,
      'INSTALL httpfs',
      'LOAD httpfs',
      "SET allowed_paths = ['/etc/passwd']",
      'SET enable_external_access = true',
    ]) {
      await expect(connection.run(sql), sql).rejects.toThrow();
    }
    files.engine().release(connection);
  });

  it('keeps its folder private, and removes it', async () => {
    const engine = await openEngine();
    expect(statSync(engine.folder).mode & 0o777).toBe(0o700);
    await engine.open();
    await engine.close();
    expect(existsSync(engine.folder)).toBe(false);
  });
});

describe('stored accounts', () => {
  it('come back as they were, hold no id, and leave no file behind', async () => {
    await files.with(CONTENT, { idKey: 'a key' }, async (table) => {
      const parquet = await writeAccounts(files.engine(), table);
      expect(Buffer.from(parquet).toString('latin1')).not.toMatch(/c1|c2/);
      const loaded = await loadAccounts(files.engine(), parquet, table.report);
      expect(await accountsOf(loaded)).toEqual(await accountsOf(table));
      files.engine().release(loaded.connection);
      expect(readdirSync(files.engine().folder).filter((name) => /parquet|csv/.test(name))).toEqual([]);
    });
  });

  it('two workspaces and the command line put the accounts of one day in the same order, but for accounts whose short hashes are equal', async () => {
    const many = `id,start,end\n${Array.from({ length: 300 }, (_, at) => `k${at},2024-03-01,`).join('\n')}\n`;
    const upper = async (idKey?: string): Promise<bigint[]> =>
      (await files.accounts(many, { asOf: dayFromIso('2024-06-30')!, ...(idKey === undefined ? {} : { idKey }) }))
        .map(({ key }) => key >> 52n)
        .sort((a, b) => (a < b ? -1 : a > b ? 1 : 0));
    const plain = await upper();
    expect(new Set(plain).size).toBeGreaterThan(250);
    expect(await upper('a')).toEqual(plain);
    expect(await upper('b')).toEqual(plain);
  });

  it('keys are stable for one key and differ between keys', async () => {
    const keys = async (idKey?: string) =>
      (await files.accounts(CONTENT, idKey === undefined ? {} : { idKey })).map(({ key }) => key);
    expect(await keys('a')).toEqual(await keys('a'));
    expect(await keys('a')).not.toEqual(await keys('b'));
    // DuckDB's own hash, which orders ties on the command line: should a new version change it, orders of ties change with it.
    const connection = await files.engine().open();
    const reader = await connection.runAndReadAll("SELECT hash('c1')::VARCHAR AS one, hash('c2')::VARCHAR AS two");
    expect((await keys()).map(String).sort()).toEqual(
      Object.values(reader.getRowObjectsJS()[0] ?? {})
        .map(String)
        .sort(),
    );
    const pinned = await connection.runAndReadAll("SELECT hash('acc-1')::VARCHAR AS pinned");
    expect(pinned.getRowObjectsJS()[0]).toEqual({ pinned: '16079672836783419685' });
    files.engine().release(connection);
  });
});
