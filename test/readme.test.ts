import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { runEbb } from './cli/runEbb.ts';

it('README: the reply it shows is what the program answers today', async () => {
  const readme = readFileSync(new URL('../README.md', import.meta.url), 'utf8');
  const run = await runEbb('ask', 'fixtures/exports/marrowby-recipe-cards.csv', 'has churn moved');
  const words = (text: string): string =>
    text
      .replace(/^\s*(>|-)\s?/gm, ' ')
      .replace(/^\s*-\s/gm, ' ')
      .replaceAll('**', '')
      .replace(/\s+/g, ' ');
  const answer = words(run.stdout);
  const quoted = readme.slice(readme.indexOf('> **Churn'), readme.indexOf('<img'));
  const sentences = words(quoted.replace(/^>\s?/gm, ''))
    .split(/(?<=[.)])\s(?=[A-Z0-9])/)
    .filter((sentence) => sentence.length > 20);
  expect(sentences.length).toBeGreaterThan(6);
  for (const sentence of sentences) expect(answer).toContain(sentence.trim().replace(/^- /, ''));
});
