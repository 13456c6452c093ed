import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import file from './checkValues.json' with { type: 'json' };

const here = import.meta.dirname;

/** What the tests beside this one load: whole ids, and beginnings of ids. */
function loaded(): { whole: ReadonlySet<string>; beginnings: readonly string[] } {
  const whole = new Set<string>();
  const beginnings: string[] = [];
  for (const name of readdirSync(here).filter((one) => one.endsWith('.test.ts') && one !== 'everyValue.test.ts')) {
    const text = readFileSync(join(here, name), 'utf8');
    for (const [, literal] of text.matchAll(/['"`]([A-Za-z0-9][\w.,+-]*)['"`]/g)) whole.add(literal!);
    for (const [, literal] of text.matchAll(/checkValues(?:<[^(]*>)?\(\s*['"`]([^'"`]+)['"`]/g))
      beginnings.push(literal!);
    // A literal with a place for a value: `ci-${method}-81of263` counts for what stands before the place.
    for (const [, literal] of text.matchAll(/checkValue(?:<[^(]*>)?\(\s*`([^`$]{3,})\$\{/g)) beginnings.push(literal!);
  }
  return { whole, beginnings };
}

test('every published value at hand is checked by a test', () => {
  const { whole, beginnings } = loaded();
  const left = file.entries
    .map(({ id }) => id)
    .filter((id) => !whole.has(id) && !beginnings.some((beginning) => id.startsWith(beginning)));
  expect(left).toEqual([]);
});
