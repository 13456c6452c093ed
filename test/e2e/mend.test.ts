import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type Bot, FIXTURES, heard, SAMPLE, saidIn, startBot } from './support.ts';

const VERDICT = /^Churn (has|is)|^Cannot say|^Too early/;

interface Element {
  readonly action_id: string;
  readonly initial_option?: { readonly text: { readonly text: string } };
  readonly options?: { readonly text: { readonly text: string }; readonly value: string }[];
}

describe('mending how a file is read', () => {
  let bot: Bot;
  beforeAll(async () => {
    bot = await startBot();
  });
  afterAll(() => bot?.stop());

  it('asks how ambiguous dates read, shows one date both ways, and answers once told', async () => {
    const wren = bot.service.as('wren');
    const post = wren.drop('#retention', [{ path: join(FIXTURES, 'exports/marrowby-ambiguous-dates.csv') }]);
    const question = await heard(bot, post.ts, 'more than one way');
    expect(question.text).toMatch(/6 March 2023 read day first, or 3 June 2023 read month first/);
    expect(saidIn(bot, post.ts)).toHaveLength(1);

    // Pressed before anything is chosen: told so, and nothing is guessed.
    await wren.press(question, 'date_order_go');
    await bot.service.waitFor((world) =>
      world.messages('retention').find((m) => m.onlyFor !== undefined && /Choose first/.test(m.text)),
    );

    await wren.choose(question, 'date_order', 'dmy');
    await wren.press(question, 'date_order_go');
    const read = await heard(bot, post.ts, 'Read again: marrowby-ambiguous-dates.csv');
    expect(read.text).toContain('day first');
    await heard(bot, post.ts, VERDICT);
    const replaced = bot.service.world.thread('retention', post.ts).find((m) => m.ts === question.ts);
    expect(replaced?.text).toContain('are read day first');
  });

  it('reads a file again with the columns and the data-through date chosen in the modal', async () => {
    const wren = bot.service.as('wren');
    const post = wren.drop('#retention', [{ path: SAMPLE }]);
    const read = await heard(bot, post.ts, 'Read: marrowby-recipe-cards.csv');
    await heard(bot, post.ts, VERDICT);
    await wren.press(read, 'mend_open');
    const modal = await bot.service.waitFor(() => {
      const open = wren.modal();
      return open && JSON.stringify(open.content).includes('mend_start') ? open : undefined;
    });
    const place = { view: modal.id };
    const start = (modal.content.blocks as unknown as { block_id?: string; element?: Element }[]).find(
      (b) => b.block_id === 'mend_start',
    );
    expect(start?.element?.options?.map((option) => option.text.text)).toEqual([
      'customer_id',
      'household',
      'plan',
      'start_date',
      'end_date',
    ]);

    // The same column twice is refused in the modal, at the field that is wrong.
    wren.fill(place, 'value', '4', 'mend_start');
    expect(await wren.submit()).toMatchObject({
      kind: 'errors',
      errors: { mend_end: expect.stringContaining('same column') },
    });

    // A day long after anything in the file is refused at its field.
    wren.fill(place, 'value', '3', 'mend_start');
    wren.fill(place, 'value', '2090-01-01', 'mend_as_of');
    expect(await wren.submit()).toMatchObject({
      kind: 'errors',
      errors: { mend_as_of: expect.stringContaining('cannot be complete through 1 January 2090') },
    });
    wren.fill(place, 'value', '2025-12-31', 'mend_as_of');
    expect(await wren.submit()).toEqual({ kind: 'closed' });
    const again = await heard(bot, post.ts, 'Read again: marrowby-recipe-cards.csv');
    expect(again.text).toContain('31 December 2025 (as you said)');
    await bot.store.drained(20_000);
    expect(saidIn(bot, post.ts)).toHaveLength(4);
  });

  it('offers the reading that a message shows, not the last try that failed', async () => {
    const wren = bot.service.as('wren');
    const post = wren.drop('#retention', [{ path: SAMPLE }]);
    const read = await heard(bot, post.ts, 'Read: marrowby-recipe-cards.csv');
    await heard(bot, post.ts, VERDICT);
    const opened = async (before?: string) => {
      const modal = await bot.service.waitFor(() => {
        const open = wren.modal();
        return open && open.id !== before && JSON.stringify(open.content).includes('mend_start') ? open : undefined;
      });
      const blocks = modal.content.blocks as unknown as { block_id?: string; element?: Element }[];
      const end = blocks.find((block) => block.block_id === 'mend_end')?.element?.initial_option?.text.text;
      return { id: modal.id, end };
    };
    await wren.press(read, 'mend_open');
    const first = await opened();
    expect(first.end).toBe('end_date');
    wren.fill({ view: first.id }, 'value', '1', 'mend_end');
    await wren.submit();
    const failed = await heard(bot, post.ts, 'I could not use');
    await wren.press(read, 'mend_open');
    const second = await opened(first.id);
    expect(second.end).toBe('end_date');
    await wren.press(failed, 'mend_open');
    expect((await opened(second.id)).end).toBe('household');
  });

  it('offers the columns when none looks like a start, and answers when they are chosen', async () => {
    const tamsin = bot.service.as('tamsin');
    const [, ...rows] = readFileSync(SAMPLE, 'utf8').split('\n');
    const text = ['who,house,what,foo,bar', ...rows].join('\n');
    const post = tamsin.drop('#retention', [{ name: 'odd-headers.csv', text }]);
    const refused = await heard(bot, post.ts, 'I could not use `odd-headers.csv`');
    expect(refused.text).not.toContain('--columns');
    await tamsin.press(refused, 'mend_open');
    const modal = await bot.service.waitFor(() => {
      const open = tamsin.modal();
      return open && JSON.stringify(open.content).includes('mend_start') ? open : undefined;
    });
    tamsin.fill({ view: modal.id }, 'value', '3', 'mend_start');
    tamsin.fill({ view: modal.id }, 'value', '4', 'mend_end');
    tamsin.fill({ view: modal.id }, 'value', '0', 'mend_id');
    expect(await tamsin.submit()).toEqual({ kind: 'closed' });
    await heard(bot, post.ts, 'Read again: odd-headers.csv');
    await heard(bot, post.ts, /^Churn has fallen/);
  });

  it('reads a file again from the message shortcut, and says so when there is none', async () => {
    const odell = bot.service.as('odell');
    const post = bot.service.world
      .messages('retention')
      .find((m) => (m.files?.length ?? 0) > 0 && m.bot_id === undefined)!;
    const before = saidIn(bot, post.ts).length;
    await odell.messageShortcut(post, 'read_this_file');
    await bot.service.waitFor(() => saidIn(bot, post.ts).length > before);
    const plain = odell.say('#retention', 'no file here');
    await odell.messageShortcut(plain, 'read_this_file');
    await bot.service.waitFor((world) =>
      world.messages('retention').find((m) => m.onlyFor !== undefined && /holds no file/.test(m.text)),
    );
    await bot.store.drained(20_000);
    expect(bot.logged()).not.toMatch(/"level":50/);
  });
});
