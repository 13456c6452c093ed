import { describe, expect, test } from 'vitest';
import { migrate } from '../../src/store/migrate.ts';
import { MIGRATIONS } from '../../src/store/migrations/all.ts';
import { openStore } from '../../src/store/openStore.ts';
import type { Database } from '../../src/store/sql.ts';
import { behind, NOON, onBothEngines, onRealServer, opened } from './support/engines.ts';
import { entry } from './support/samples.ts';

const now = () => NOON;
const next = MIGRATIONS.length + 1;

/** Every column, key, check and index of our schema, one a line. */
async function schemaOf(database: Database): Promise<string> {
  const columns = await database.query<{ line: string }>(
    `SELECT format('%s.%s %s%s%s', c.table_name, c.column_name, c.data_type,
       CASE WHEN c.is_nullable = 'NO' THEN ' not null' ELSE '' END,
       CASE WHEN c.is_identity = 'YES' THEN ' identity' ELSE '' END) AS line
     FROM information_schema.columns c WHERE c.table_schema = 'ebbline' ORDER BY c.table_name, c.ordinal_position`,
  );
  const constraints = await database.query<{ line: string }>(
    `SELECT format('%s: %s', conrelid::regclass, pg_get_constraintdef(oid)) AS line FROM pg_constraint
     WHERE connamespace = 'ebbline'::regnamespace AND contype IN ('p', 'u', 'f', 'c')
     ORDER BY conrelid::regclass::text COLLATE "C", contype, conname COLLATE "C"`,
  );
  const indexes = await database.query<{ line: string }>(
    `SELECT indexdef AS line FROM pg_indexes WHERE schemaname = 'ebbline' ORDER BY indexname COLLATE "C"`,
  );
  return `${[...columns, ...constraints, ...indexes].map((row) => row.line).join('\n')}\n`;
}

onBothEngines('the schema', (engine) => {
  test('is the one written down beside this test', async () => {
    const database = await behind(await engine.migrated());
    await expect(await schemaOf(database)).toMatchFileSnapshot('./schema.txt');
    await database.close();
  });

  describe('migrating', () => {
    test('twice is harmless and changes nothing', async () => {
      const database = await behind(await engine.migrated());
      const before = await schemaOf(database);
      await migrate(database, MIGRATIONS, () => NOON + 1);
      await migrate(database, MIGRATIONS, () => NOON + 2);
      expect(await schemaOf(database)).toBe(before);
      expect(await database.query('SELECT number, applied_at FROM ebbline.migrations ORDER BY number')).toEqual(
        MIGRATIONS.map(({ number }) => ({ number, applied_at: new Date(NOON) })),
      );
      await database.close();
    });

    test('a step that fails leaves nothing of itself, and the steps before it stay', async () => {
      const database = await behind(await engine.migrated());
      const before = await schemaOf(database);
      const failing = {
        number: next,
        name: 'fails half way',
        sql: 'CREATE TABLE ebbline.half (a int);\nSELECT 1 / 0;',
      };
      await expect(migrate(database, [...MIGRATIONS, failing], now)).rejects.toThrow('division by zero');
      expect(await schemaOf(database)).toBe(before);
      const mended = { ...failing, sql: 'CREATE TABLE ebbline.half (a int);\nSELECT 1 / 1;' };
      await migrate(database, [...MIGRATIONS, mended], now);
      expect(await schemaOf(database)).toContain('half.a integer');
      await database.close();
    });

    test('a program older than the stored data refuses to start, says why, and lets go of the place', async () => {
      const place = await engine.migrated();
      const newer = await behind(place);
      const later = { number: next, name: 'from the future', sql: 'CREATE TABLE ebbline.future (a int);' };
      await migrate(newer, [...MIGRATIONS, later], now);
      await newer.close();
      await expect(openStore({ ...place, now })).rejects.toMatchObject({
        code: 'STORE_NEWER',
        message: expect.stringContaining(`step ${next}`),
        hint: expect.stringContaining('newer version'),
      });
      await (await behind(place)).close();
    });

    test('a list with a gap or out of order is refused before anything is changed', async () => {
      const database = await behind(await engine.migrated());
      const step = { number: next + 1, name: 'too far', sql: 'CREATE TABLE ebbline.far (a int);' };
      await expect(migrate(database, [...MIGRATIONS, step], now)).rejects.toThrow(`says ${next + 1}`);
      await database.close();
    });
  });
});

onRealServer('twenty starts at once', (engine) => {
  test('on an empty database all succeed, the schema is right, and all can work', async () => {
    const place = await engine.bare();
    const stores = await Promise.all(Array.from({ length: 20 }, () => opened(place)));
    await expect(await schemaOf(await behind(place))).toMatchFileSnapshot('./schema.txt');
    const same = entry();
    const results = await Promise.all(stores.map((store) => store.receive(same)));
    expect(results.filter((result) => result === 'new').length).toBe(1);
  });
});

onRealServer('a server', (engine) => {
  test('that cannot be reached is named without its password', async () => {
    const { databaseUrl = '' } = await engine.bare();
    const wrong = databaseUrl.replace(/t\d+$/, 'nowhere');
    const error: Error = await openStore({ databaseUrl: wrong, dataFolder: '', now }).then(
      () => new Error('opened'),
      (reason) => reason,
    );
    expect(error).toMatchObject({ code: 'SETTINGS_INVALID', message: expect.stringContaining('nowhere on 127.0.0.1') });
    expect(error.message).not.toContain('ebb:ebb');
  });
});
