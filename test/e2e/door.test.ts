import { createHmac } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type Bot, heard, SAMPLE, SECRET, saidIn, startBot } from './support.ts';

describe('the door: what is let in over HTTP', () => {
  let bot: Bot;
  beforeAll(async () => {
    bot = await startBot();
  });
  afterAll(() => bot?.stop());

  const now = (): number => Math.floor(Date.now() / 1000);
  function send(
    body: string,
    options: { at?: number; secret?: string; unsigned?: boolean; type?: string } = {},
  ): Promise<Response> {
    const at = options.at ?? now();
    const signature = `v0=${createHmac('sha256', options.secret ?? SECRET)
      .update(`v0:${at}:${body}`)
      .digest('hex')}`;
    return fetch(bot.url!, {
      method: 'POST',
      headers: {
        'content-type': options.type ?? 'application/json',
        ...(options.unsigned ? {} : { 'x-slack-request-timestamp': String(at), 'x-slack-signature': signature }),
      },
      body,
    });
  }
  const mention = (id: string): string =>
    JSON.stringify({
      type: 'event_callback',
      team_id: 'T0MARROWBY1',
      event_id: id,
      authorizations: [],
      event: {
        type: 'app_mention',
        channel: 'C0RETENTION',
        user: 'U0WREN00001',
        text: '<@U0EBBLINE01> help',
        ts: '1700000000.000100',
        event_ts: '1700000000.000100',
      },
    });

  it.each([
    ['unsigned', { unsigned: true }],
    ['signed with another secret', { secret: 'another-secret-altogether' }],
    ['six minutes old', { at: now() - 360 }],
    ['six minutes ahead', { at: now() + 360 }],
  ])('refuses a request that is %s', async (_what, options) => {
    expect((await send(mention('Ev0REFUSED1'), options)).status).toBe(401);
    await bot.store.drained(5000);
    expect(bot.service.world.calls.filter((call) => call.method === 'chat.postMessage')).toHaveLength(0);
  });

  it('takes the same request when it is signed and of now', async () => {
    expect((await send(mention('Ev0TAKEN001'))).status).toBe(200);
    await bot.service.waitFor((world) => world.calls.find((call) => call.method === 'chat.postMessage'));
  });

  it('answers the check of the address, and the notice that events are held back, at once', async () => {
    const check = await send(JSON.stringify({ type: 'url_verification', challenge: 'abc' }));
    expect(await check.json()).toEqual({ challenge: 'abc' });
    const notice = JSON.stringify({ type: 'app_rate_limited', team_id: 'T0MARROWBY1', minute_rate_limited: now() });
    const begun = Date.now();
    expect((await send(notice)).status).toBe(200);
    expect(Date.now() - begun).toBeLessThan(2500);
    expect((await send(notice, { secret: 'another-secret-altogether' })).status).toBe(401);
  });

  it('says whether it lives and works, and knows no other address', async () => {
    const base = new URL('/', bot.url).href;
    expect((await fetch(`${base}healthz`)).status).toBe(200);
    expect((await fetch(`${base}readyz`)).status).toBe(200);
    expect((await fetch(`${base}else`)).status).toBe(404);
    expect((await send('x'.repeat(4 * 1024 * 1024 + 1))).status).toBe(413);
    expect((await send('{broken')).status).toBe(400);
  });
});

describe('trouble on the way', () => {
  let bot: Bot;
  let fail: Error | undefined;
  beforeAll(async () => {
    bot = await startBot({
      answers: (real) => ({
        ...real,
        askDataset: (...args) => (fail ? Promise.reject(fail) : real.askDataset(...args)),
      }),
    });
    const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }]);
    await heard(bot, post.ts, /^Churn/);
  });
  afterAll(() => bot?.stop());
  const ask = () => bot.service.as('wren').say('#retention', '@ebbline has churn moved at 4 months?');

  it('tells of anything unexpected in one sentence with a reference that leads to the log, and goes on', async () => {
    fail = new Error('SELECT secret FROM accounts failed at census.ts:12:3');
    const asked = ask();
    const reply = await heard(bot, asked.ts, 'Something went wrong on my side');
    fail = undefined;
    expect(reply.text).not.toContain('SELECT');
    const reference = /reference: (\w{6})\./.exec(reply.text)![1]!;
    expect(bot.logged()).toContain(reference);
    await heard(bot, ask().ts, /^Churn/);
  });

  it('shares the picture in the thread when it cannot be put into the message', async () => {
    bot.service.failNext('files.info', { kind: 'refused', error: 'file_not_found' });
    const asked = ask();
    await heard(bot, asked.ts, /^Churn/);
    await bot.store.drained(20_000);
    const said = saidIn(bot, asked.ts);
    expect(said.some((message) => (message.files?.length ?? 0) > 0)).toBe(true);
  });

  it('goes out in words alone when the service takes no picture', async () => {
    bot.service.failNext('files.getUploadURLExternal', { kind: 'refused', error: 'file_uploads_disabled' }, 2);
    const asked = ask();
    await heard(bot, asked.ts, /^Churn/);
    await heard(bot, asked.ts, 'picture could not be shown');
  });

  it('tries again when the service is overloaded, and posts once', async () => {
    bot.service.failNext('chat.postMessage', { kind: 'server-error' }, 4);
    const asked = ask();
    await heard(bot, asked.ts, /^Churn/);
    await bot.store.drained(20_000);
    expect(saidIn(bot, asked.ts)).toHaveLength(1);
  });
});
