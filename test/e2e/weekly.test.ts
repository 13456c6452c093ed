import { DateTime } from 'luxon';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type Bot, heard, imageOf, SAMPLE, startBot } from './support.ts';

const VERDICT = /^Churn has fallen|^Churn is|^Cannot say|^Too early/;
const DAY = 86_400_000;
const london = (iso: string): number => DateTime.fromISO(iso, { zone: 'Europe/London' }).toMillis();

describe('a weekly post', () => {
  let clock = london('2026-07-02T15:00');
  let bot: Bot;
  beforeAll(async () => {
    bot = await startBot({ mode: 'socket', now: () => clock });
    const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }], { text: 'June export' });
    await heard(bot, post.ts, VERDICT);
    await bot.store.drained(20_000);
  });
  afterAll(() => bot?.stop());

  /** What the bot posted to the channel itself, outside threads. */
  const posts = () =>
    bot.service.world.messages('retention').filter((m) => m.bot_id !== undefined && m.thread_ts === undefined);
  const taken = async (): Promise<number> => {
    const written = await bot.app.takeDuePosts();
    await bot.store.drained(20_000);
    return written;
  };

  it("is set in words, at the setter's own clock", async () => {
    const asked = bot.service.as('wren').say('#retention', '@ebbline every monday at 9:00');
    const reply = await heard(bot, asked.ts, 'Set: every Monday at 09:00 Europe/London');
    expect(reply.text).toContain('The first time is Monday 6 July 2026, 09:00');
    const shown = bot.service.as('odell').say('#retention', '@ebbline when do you post?');
    await heard(bot, shown.ts, 'Next: Monday 6 July 2026, 09:00.');
  });

  it('does not come early', async () => {
    clock = london('2026-07-06T08:59:59');
    expect(await taken()).toBe(0);
    expect(posts()).toHaveLength(0);
  });

  it('comes once, with its picture, however often and by how many it is looked for', async () => {
    clock = london('2026-07-06T09:00');
    await Promise.all([bot.app.takeDuePosts(), bot.app.takeDuePosts(), bot.app.takeDuePosts()]);
    await bot.store.drained(20_000);
    expect(await taken()).toBe(0);
    clock -= 3_600_000;
    expect(await taken()).toBe(0);
    clock += 3_600_000;
    expect(posts()).toHaveLength(1);
    expect(posts()[0]!.text).toMatch(VERDICT);
    expect(imageOf(posts()[0]!)).toBeDefined();
  });

  it('is one line when nothing is new, and takes an old export for no news', async () => {
    // The export ends on 30 June 2026: a week later it is still fresh enough.
    clock = london('2026-07-10T12:00');
    const asked = bot.service.as('wren').say('#retention', '@ebbline every friday at 13:00');
    await heard(bot, asked.ts, 'Changed: every Friday at 13:00');
    clock = london('2026-07-10T13:00:05');
    expect(await taken()).toBe(1);
    expect(posts()).toHaveLength(2);
    expect(posts()[1]!.text).toMatch(/^Nothing new since Monday 6 July 2026\. /);
    expect(posts()[1]!.text.split('\n')).toHaveLength(1);

    clock = london('2026-07-17T13:00:05');
    expect(await taken()).toBe(1);
    expect(posts()[2]!.text).toMatch(/ends on 30 June 2026, 17 days ago/);
    expect(posts()[2]!.text).toMatch(/new export/);
  });

  it('is made late after a short absence, and named as missed after a long one', async () => {
    clock = london('2026-07-25T12:00');
    expect(await taken()).toBe(1);
    expect(posts()).toHaveLength(4);

    clock = london('2026-08-09T15:00');
    expect(await taken()).toBe(0);
    expect(posts()).toHaveLength(4);
    clock = london('2026-08-14T13:00:30');
    expect(await taken()).toBe(1);
    expect(posts()[4]!.text).toContain('I was not running at Friday 31 July 2026, 13:00; Friday 7 August 2026, 13:00');
    clock += 7 * DAY;
    expect(await taken()).toBe(1);
    expect(posts()[5]!.text).not.toContain('I was not running');
  });

  it('is stopped in words', async () => {
    const asked = bot.service.as('tamsin').say('#retention', '@ebbline stop the weekly post');
    await heard(bot, asked.ts, 'Stopped: every Friday at 13:00 Europe/London');
    clock += 14 * DAY;
    expect(await taken()).toBe(0);
    const shown = bot.service.as('odell').say('#retention', '@ebbline when do you post?');
    await heard(bot, shown.ts, 'Nothing is posted here by itself');
  });
});

describe('a post whose sender was cut off before it could remember it', () => {
  it('is found again by its mark, and not made twice', async () => {
    const bot = await startBot();
    try {
      const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }], { text: 'June export' });
      await heard(bot, post.ts, VERDICT);
      await bot.store.drained(20_000);
      // The service takes the message, and its answer is lost on the way back.
      bot.service.failNext('chat.postMessage', { kind: 'dropped-after' });
      const asked = bot.service.as('tamsin').say('#retention', '@ebbline has churn moved?');
      await heard(bot, asked.ts, VERDICT);
      await bot.store.drained(30_000);
      const said = bot.service.world.thread('retention', asked.ts).filter((m) => m.bot_id !== undefined);
      expect(said.filter((m) => VERDICT.test(m.text))).toHaveLength(1);
    } finally {
      await bot.stop();
    }
  });
});
