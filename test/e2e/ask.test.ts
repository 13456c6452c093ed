import { readFile } from 'node:fs/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type Bot, heard, imageOf, SAMPLE, saidIn, startBot } from './support.ts';

const VERDICT = /^Churn has fallen|^Churn is|^Cannot say|^Too early/;

describe.each(['http', 'socket'] as const)('the running bot in %s mode', (mode) => {
  let bot: Bot;
  let thread: string;
  beforeAll(async () => {
    bot = await startBot({ mode });
  });
  afterAll(() => bot?.stop());

  it('says how to hand in an export when there is none yet', async () => {
    const asked = bot.service.as('wren').say('#retention', '@ebbline has churn moved?');
    const reply = await heard(bot, asked.ts, 'no export in this channel yet');
    expect(reply.text).toContain('sample exports');
  });

  it('reads a dropped export, says what it read, and posts the verdict with its picture', async () => {
    const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }], { text: 'June export' });
    thread = post.ts;
    const read = await heard(bot, thread, 'Read: marrowby-recipe-cards.csv');
    expect(read.text).toMatch(/8,0\d\d rows, 8,005 accounts/);
    const verdict = await heard(bot, thread, VERDICT);
    expect(verdict.text).toMatch(/Churn has fallen/);
    const image = imageOf(verdict);
    expect(image?.alt_text.length).toBeGreaterThan(60);
    const bytes = bot.service.world.fileContent(image!.slack_file.id) as Uint8Array;
    expect([...bytes.subarray(1, 4)]).toEqual([...Buffer.from('PNG')]);
    await bot.store.drained(20_000);
    // Its own picture and messages come back as events; it must not answer itself.
    expect(saidIn(bot, thread)).toHaveLength(2);
  });

  it('answers a mention in its thread with what it understood and the verdict', async () => {
    const asked = bot.service
      .as('tamsin')
      .say('#retention', '@ebbline has churn moved at 2 months for the orchrad plan by country?');
    const verdict = await heard(bot, asked.ts, VERDICT);
    const words = JSON.stringify(verdict.blocks);
    expect(words).toContain('I understood: has churn at 2 months moved for “Orchard”?');
    expect(words).toContain('by country');
    expect(words).toContain('Windowsill');
    expect(imageOf(verdict)).toBeDefined();
  });

  it('answers the slash command in a thread of its own, and help for the asker alone', async () => {
    await bot.service.as('odell').slash('#retention', '/ebb has churn moved at 90 days');
    const root = await bot.service.waitFor((world) =>
      world.messages('retention').find((m) => /asks: has churn moved at 90 days/.test(m.text)),
    );
    await heard(bot, root.ts, VERDICT);
    await bot.service.as('odell').slash('#retention', 'help');
    const help = await bot.service.waitFor((world) =>
      world.messages('retention').find((m) => m.onlyFor !== undefined && /Drop an export/.test(m.text)),
    );
    expect(help.bot_id).toBeDefined();
  });

  it('asks again when its button is pressed, and says what was read when asked', async () => {
    const before = saidIn(bot, thread).length;
    const verdict = saidIn(bot, thread).at(-1)!;
    await bot.service.as('wren').press({ channel: verdict.channel, ts: verdict.ts }, 'ask_again');
    await bot.service.waitFor(() => saidIn(bot, thread).length > before);
    const repeated = saidIn(bot, thread).at(-1)!;
    expect(repeated.text).toMatch(VERDICT);
    expect(imageOf(repeated)).toBeDefined();
    const asked = bot.service.as('wren').say('#retention', '@ebbline what did you read?');
    await heard(bot, asked.ts, 'Read: marrowby-recipe-cards.csv');
  });

  it('leaves replies in its thread alone unless they mention it, and answers direct messages', async () => {
    bot.service.as('wren').say('#retention', 'interesting, has churn moved?', { threadTs: thread });
    const direct = bot.service.as('wren').say('direct', 'has churn moved?');
    await bot.service.waitFor(() =>
      bot.service.world.thread(direct.channel, direct.ts).find((m) => m.bot_id !== undefined),
    );
    await bot.store.drained(20_000);
    expect(saidIn(bot, thread)).toHaveLength(3);
  });

  it('handles an event once, however often it is delivered', async () => {
    const asked = bot.service.as('wren').say('#retention', '@ebbline has churn moved at 5 months?');
    await heard(bot, asked.ts, VERDICT);
    const delivery = bot.service.world.deliveries.find(
      (d) => JSON.stringify(d.payload).includes(asked.ts) && JSON.stringify(d.payload).includes('app_mention'),
    )!;
    bot.service.redeliver(delivery.id);
    bot.service.redeliver(delivery.id);
    await bot.service.waitFor((world) => world.deliveries.every((d) => d.state === 'acknowledged'));
    await bot.store.drained(20_000);
    expect(saidIn(bot, asked.ts)).toHaveLength(1);
  });

  it('reads a file of a post that mentions it once, and answers the question of the post', async () => {
    const text = '@ebbline has churn moved at 6 months?';
    const post = bot.service
      .as('wren')
      .drop('#retention', [{ name: 'again.csv', bytes: await readFile(SAMPLE) }], { text });
    const verdict = await heard(bot, post.ts, VERDICT);
    expect(JSON.stringify(verdict.blocks)).toContain('I understood: has churn at 6 months moved?');
    await bot.service.waitFor((world) => world.deliveries.every((d) => d.state === 'acknowledged'));
    await bot.store.drained(20_000);
    expect(saidIn(bot, post.ts)).toHaveLength(2);
  });

  it('leaves pictures alone unless it is mentioned', async () => {
    const png = { name: 'cat.png', bytes: Uint8Array.from([0x89, 0x50, 0x4e, 0x47, 13, 10, 26, 10, 0, 0]) };
    const quiet = bot.service.as('wren').drop('#retention', [png], { text: 'look' });
    const named = bot.service.as('wren').drop('#retention', [png], { text: '@ebbline' });
    await heard(bot, named.ts, 'not an export I can read');
    await bot.store.drained(20_000);
    expect(saidIn(bot, quiet.ts)).toHaveLength(0);
  });

  it('greets in three lines when it is brought into a channel', async () => {
    bot.service.as('odell').invite('#launches');
    const hello = await bot.service.waitFor((world) => world.messages('launches').find((m) => m.bot_id !== undefined));
    expect(hello.text.split('\n')).toHaveLength(3);
  });

  it('posts nothing the service refuses, and acknowledges every delivery the first time', async () => {
    await bot.store.drained(20_000);
    const refused = bot.service.world.calls.filter((call) => call.response.ok !== true);
    expect(refused.map((call) => [call.method, call.response])).toEqual([]);
    for (const delivery of bot.service.world.deliveries)
      expect(delivery.attempts.length, delivery.kind).toBeLessThanOrEqual(2);
    expect(bot.logged()).not.toMatch(/"level":50/);
  });
});
