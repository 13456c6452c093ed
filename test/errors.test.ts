import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { ERROR_CODES } from '../src/errors.ts';

it('errors: the table in DEVELOPERS.md and the catalogue list the same codes with the same words', () => {
  const text = readFileSync(new URL('../DEVELOPERS.md', import.meta.url), 'utf8');
  const table = Object.fromEntries(
    [...text.matchAll(/^\| `([A-Z_]+)` \| (.*) \|$/gm)].map((match) => [match[1], match[2]]),
  );
  expect(table).toEqual(ERROR_CODES);
});
