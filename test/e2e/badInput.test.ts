import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type Bot, FIXTURES, heard, SAMPLE, saidIn, startBot } from './support.ts';

interface Hostile {
  readonly file: string;
  readonly why: string;
  readonly expect: { readonly errors?: string[]; readonly orRead?: boolean; readonly accounts?: number };
}
const hostile = (JSON.parse(readFileSync(join(FIXTURES, 'hostile/expected.json'), 'utf8')) as { files: Hostile[] })
  .files;

describe('files nobody should hand over', () => {
  let bot: Bot;
  beforeAll(async () => {
    bot = await startBot({ maxUploadBytes: 3_000_000 });
  });
  afterAll(() => bot?.stop());

  it.each(hostile.map((one) => [one.file, one.why, one] as const))(
    '%s (%s): one clear message',
    async (file, _why, one) => {
      const post = bot.service.as('wren').drop('#retention', [{ path: join(FIXTURES, 'hostile', file) }]);
      const first = await bot.service.waitFor(() => saidIn(bot, post.ts)[0], 20_000, `an answer to ${file}`);
      await bot.store.drained(20_000);
      const said = saidIn(bot, post.ts);
      if (one.expect.errors && !(one.expect.orRead && first.text.startsWith('Read'))) {
        expect(first.text).toMatch(/^I could not use|^The dates/);
        expect(said).toHaveLength(1);
      } else {
        expect(first.text).toMatch(/^Read: /);
        expect(said).toHaveLength(2);
      }
      // Neither a stack nor SQL nor a command line option reaches the channel.
      for (const message of said) expect(message.text).not.toMatch(/\bat .*:\d+:\d+|SELECT |--[a-z]+/);
    },
  );

  it('refuses a file that is too large by its declared size, before fetching it', async () => {
    const rows = Array.from({ length: 160_000 }, (_, i) => `A${i},2025-01-01,`).join('\n');
    const post = bot.service.as('wren').drop('#retention', [{ name: 'large.csv', text: `id,start,end\n${rows}` }]);
    const reply = await heard(bot, post.ts, 'larger than the 3 MB');
    expect(reply.text).toContain('Export only the columns');
  });

  it('shows column names and values that try to do something as mere text', async () => {
    const lines = readFileSync(SAMPLE, 'utf8')
      .split('\n')
      .map((line) => line.replaceAll('Orchard', '<!channel> *Orchard* & <https://x.example|here>'));
    lines[0] = lines[0]!.replace('plan', '`<!here>_plan_');
    const post = bot.service.as('wren').drop('#retention', [{ name: '<!channel>.csv', text: lines.join('\n') }]);
    const read = await heard(bot, post.ts, /^Read: /);
    const verdict = await heard(bot, post.ts, /^Churn/);
    for (const message of [read, verdict]) {
      const shown = JSON.stringify([message.text, message.blocks]);
      expect(shown).not.toMatch(/<!|<http/);
    }
    expect(read.text).toContain('&lt;!channel&gt;.csv');
  });

  it('goes on: a good file is still read and answered', async () => {
    const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }]);
    await heard(bot, post.ts, /^Churn has fallen/);
    const refused = bot.service.world.calls.filter((call) => call.response.ok !== true);
    expect(refused.map((call) => [call.method, call.response])).toEqual([]);
  });
});
