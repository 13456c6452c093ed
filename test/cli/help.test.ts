import { describe, expect, it } from 'vitest';
import { optionsOf } from '../../src/cli/arguments.ts';
import { runEbb } from './runEbb.ts';

describe('ebb --help', () => {
  it('lists every option that there is, and every kind of chart', async () => {
    const { stdout, code } = await runEbb('--help');
    expect(code).toBe(0);
    for (const name of [...optionsOf('ask'), ...optionsOf('chart')])
      expect(stdout, name).toMatch(new RegExp(`^  (-h, )?--${name}( |$)`, 'm'));
    for (const kind of ['auto', 'p', 'p-prime']) expect(stdout).toMatch(new RegExp(`^ .* ${kind} +[a-z]+ `, 'm'));
  });

  it('after an unknown option only the options of the same command are offered', async () => {
    const ask = await runEbb('ask', 'x.csv', '--tenor', '3');
    expect(ask.stderr).toContain('--tenure');
    expect(ask.stderr).not.toMatch(/--counts|--sizes/);
    const chart = await runEbb('chart', '--count', '3');
    expect(chart.stderr).toContain('--counts');
    expect(chart.stderr).not.toMatch(/--tenure|--as-of|--columns/);
  });
});

describe('words that are no question', () => {
  it('get what found no use and the help, and one JSON object when JSON is asked for', async () => {
    const why = await runEbb('ask', 'fixtures/exports/marrowby-price-rise.csv', 'why');
    expect(why.code).toBe(0);
    expect(why.stdout).toMatch(/^I could not use “why” as it stands\. A chart shows/);
    expect(why.stdout).toContain('--tenure');
    const json = await runEbb('ask', 'fixtures/exports/marrowby-price-rise.csv', 'why', '--json');
    expect(JSON.parse(json.stdout)).toMatchObject({ notUnderstood: [{ text: 'why' }] });
  });
});
