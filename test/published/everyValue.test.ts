import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import file from './checkValues.json' with { type: 'json' };

/** What tests load: whole ids, and beginnings of ids: handed to checkValues, or ending with a dash. */
function loaded(): { whole: ReadonlySet<string>; beginnings: readonly string[] } {
  const tests = readdirSync(join(import.meta.dirname, '..'), { recursive: true, encoding: 'utf8' }).filter(
    (name) => name.endsWith('.test.ts') && !name.endsWith('everyValue.test.ts'),
  );
  const whole = new Set<string>();
  const beginnings: string[] = [];
  for (const name of tests) {
    const text = readFileSync(join(import.meta.dirname, '..', name), 'utf8');
    if (!text.includes('checkValue')) continue;
    for (const [, literal] of text.matchAll(/['"`]([A-Za-z0-9][\w.,+-]*)['"`]/g)) whole.add(literal!);
    for (const [, literal] of text.matchAll(/checkValues(?:<[^(]*>)?\(\s*['"`]([^'"`]+)['"`]/g))
      beginnings.push(literal!);
    // A template counts for what stands before its first place for a value.
    for (const [, literal] of text.matchAll(/checkValue(?:<[^(]*>)?\(\s*`([^`$]{3,})\$\{/g)) beginnings.push(literal!);
  }
  return { whole, beginnings: [...beginnings, ...[...whole].filter((one) => one.length > 3 && one.endsWith('-'))] };
}

test('every published value at hand is checked by a test', () => {
  const { whole, beginnings } = loaded();
  const left = file.entries
    .map(({ id }) => id)
    .filter((id) => !whole.has(id) && !beginnings.some((beginning) => id.startsWith(beginning)));
  expect(left).toEqual([]);
});
