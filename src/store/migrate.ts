import { EbbError } from '../errors.ts';
import type { Migration } from './migrations/types.ts';
import type { Database } from './sql.ts';

/**
 * Brings the schema up to the newest step, each step in a transaction of its own. Harmless when there is nothing to do.
 * Call inside `database.alone`, so that processes starting at once take turns.
 * @param migrations numbered 1, 2, 3, … without gaps
 * @param now the time to be recorded with each step
 * @throws EbbError STORE_NEWER, before anything is changed, when the database holds steps that this program does not know
 */
export async function migrate(database: Database, migrations: readonly Migration[], now: () => number): Promise<void> {
  migrations.forEach((migration, index) => {
    if (migration.number !== index + 1)
      throw new Error(`migration "${migration.name}" is number ${index + 1} in the list but says ${migration.number}`);
  });
  await database.script(`
    CREATE SCHEMA IF NOT EXISTS ebbline;
    CREATE TABLE IF NOT EXISTS ebbline.migrations (
      number integer PRIMARY KEY,
      name text NOT NULL,
      applied_at timestamptz NOT NULL
    )`);
  const rows = await database.query<{ number: number }>('SELECT max(number) AS number FROM ebbline.migrations');
  const applied = rows[0]?.number ?? 0;
  if (applied > migrations.length) {
    throw new EbbError(
      'STORE_NEWER',
      `the stored data is at schema step ${applied}, but this version of Ebbline only knows ${migrations.length}`,
      'Start the newer version of Ebbline that wrote it, or restore the copy made before that version was first started.',
      { kind: 'settings', detail: { applied, known: migrations.length } },
    );
  }
  for (const migration of migrations.slice(applied)) {
    await database.transaction(async (tx) => {
      for (const statement of statements(migration.sql)) await tx.query(statement);
      await tx.query('INSERT INTO ebbline.migrations (number, name, applied_at) VALUES ($1, $2, $3)', [
        migration.number,
        migration.name,
        new Date(now()),
      ]);
    });
  }
}

/** One statement at a time, since a statement with bound values cannot be several. Steps hold no semicolon but those that end a statement. */
function statements(sql: string): string[] {
  return sql
    .split(/;\s*$/m)
    .map((statement) => statement.trim())
    .filter((statement) => statement !== '');
}
