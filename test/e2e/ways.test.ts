/** Ways in and out that are less common: fewer rights, slow files, lost sockets, channels without the bot. */
import { afterEach, describe, expect, it } from 'vitest';
import type { Answers } from '../../src/answers/useCases.ts';
import { type Bot, heard, SAMPLE, saidIn, startBot } from './support.ts';

const VERDICT = /^Churn has fallen/;
let bot: Bot | undefined;
afterEach(async () => {
  await bot?.stop();
  bot = undefined;
});

describe('with fewer rights', () => {
  it('reads files where it may not read messages, by the event of the file alone', async () => {
    bot = await startBot({ scopes: ['chat:write', 'files:read', 'files:write', 'app_mentions:read'] });
    const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }]);
    await heard(bot, post.ts, 'Read: marrowby-recipe-cards.csv');
    await heard(bot, post.ts, VERDICT);
    const kinds = bot.service.world.deliveries.map((d) => (d.payload['event'] as { type: string }).type);
    expect(new Set(kinds)).toEqual(new Set(['file_shared']));
    await bot.store.drained(20_000);
    expect(saidIn(bot, post.ts)).toHaveLength(2);
  });

  it('asks to be invited when the command is used where it is not', async () => {
    bot = await startBot();
    await bot.service.as('odell').slash('#launches', 'has churn moved?');
    const reply = await bot.service.waitFor((world) =>
      world.messages('launches').find((m) => m.text.includes('Invite me')),
    );
    expect(reply.onlyFor).toBeDefined();
  });
});

describe('a file that takes a while', () => {
  it('gets a word beforehand, which what was read then replaces', async () => {
    let goOn = (): void => undefined;
    const gate = new Promise<void>((resolve) => {
      goOn = resolve;
    });
    bot = await startBot({
      answers: (real): Answers => ({
        ...real,
        ingest: async (...args) => {
          await gate;
          return real.ingest(...args);
        },
      }),
    });
    const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }]);
    const early = await heard(bot, post.ts, /^Reading `marrowby-recipe-cards.csv`/);
    goOn();
    const read = await heard(bot, post.ts, /^Read: /);
    expect(read.ts).toBe(early.ts);
    await heard(bot, post.ts, VERDICT);
    expect(saidIn(bot, post.ts)).toHaveLength(2);
  });

  it('answers a question that comes right after it from that file', async () => {
    bot = await startBot();
    const wren = bot.service.as('wren');
    wren.drop('#retention', [{ path: SAMPLE }]);
    const asked = wren.say('#retention', '@ebbline has churn moved?');
    await heard(bot, asked.ts, VERDICT);
  });
});

describe('socket mode', () => {
  it('goes on after the service renews the connection', async () => {
    bot = await startBot({ mode: 'socket' });
    const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }]);
    await heard(bot, post.ts, VERDICT);
    bot.service.disconnectSockets('refresh_requested');
    const asked = bot.service.as('wren').say('#retention', '@ebbline has churn moved?');
    await heard(bot, asked.ts, VERDICT);
  });
});
