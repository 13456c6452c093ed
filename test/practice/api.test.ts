import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { type PracticeService, startPracticeService } from '../../src/practice/service.ts';
import { call, handClock, seeded, startService } from './support.ts';

const RETENTION = 'C0RETENTION';
const LAUNCHES = 'C0LAUNCHES1';
const WREN = 'U0WREN00001';
const PNG = Uint8Array.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 1, 2, 3, 4, 5]);
const modal = (title = 'T') => ({ type: 'modal', title: { type: 'plain_text', text: title }, blocks: [] });

let service: PracticeService;
beforeEach(async () => {
  service = await startService();
});
afterEach(() => service.close());

async function upload(args: Record<string, unknown> = {}, bytes = PNG): Promise<string> {
  const asked = await call(service, 'files.getUploadURLExternal', { filename: 'a.png', length: bytes.length, ...args });
  const sent = await fetch(asked.upload_url, { method: 'POST', body: Uint8Array.from(bytes) });
  expect(await sent.text()).toBe(`OK - ${bytes.length}`);
  return asked.file_id;
}

describe('who is calling', () => {
  it('answers auth.test with the bot and its workspace', async () => {
    expect(await call(service, 'auth.test')).toMatchObject({
      ok: true,
      team: 'Marrowby Seed Club',
      user_id: 'U0EBBLINE01',
      bot_id: 'B0EBBLINE01',
    });
  });
  it('refuses a missing token, a strange one, the wrong kind, and a method it does not know', async () => {
    expect((await call(service, 'auth.test', {}, '')).error).toBe('not_authed');
    expect((await call(service, 'auth.test', {}, 'xoxb-other')).error).toBe('invalid_auth');
    expect((await call(service, 'apps.connections.open')).error).toBe('not_allowed_token_type');
    expect((await call(service, 'chat.shout')).error).toBe('unknown_method');
  });
  it('takes JSON bodies as well as forms', async () => {
    const response = await fetch(`${service.apiUrl}chat.postMessage`, {
      method: 'POST',
      headers: { 'content-type': 'application/json', authorization: 'Bearer xoxb-practice' },
      body: JSON.stringify({ channel: RETENTION, text: 'hello', blocks: [{ type: 'divider' }] }),
    });
    expect(await response.json()).toMatchObject({ ok: true, message: { text: 'hello', bot_id: 'B0EBBLINE01' } });
  });
  it('keeps workspaces apart: another workspace’s bearer does not reach the channel', async () => {
    service.addWorkspace({
      id: 'T0OTHER0001',
      name: 'Other',
      botToken: 'xoxb-two',
      botUser: 'U0OTHERBOT1',
      channel: { id: 'C0OTHER0001', name: 'retention' },
    });
    expect((await call(service, 'chat.postMessage', { channel: RETENTION, text: 'x' }, 'xoxb-two')).error).toBe(
      'channel_not_found',
    );
    expect((await call(service, 'chat.postMessage', { channel: 'C0OTHER0001', text: 'x' }, 'xoxb-two')).ok).toBe(true);
  });
  it('names the scope that is missing', async () => {
    const narrow = await startService({ scopes: ['chat:write'] });
    const answer = await call(narrow, 'users.info', { user: WREN });
    await narrow.close();
    expect(answer).toMatchObject({ error: 'missing_scope', needed: 'users:read', provided: 'chat:write' });
  });
  it('misbehaves when asked to: limits, failures, pages instead of JSON, and answers lost after the deed', async () => {
    const post = () =>
      fetch(`${service.apiUrl}auth.test`, { method: 'POST', headers: { authorization: 'Bearer xoxb-practice' } });
    service.failNext('auth.test', { kind: 'rate-limited', retryAfterSeconds: 7 });
    const limited = await post();
    expect([limited.status, limited.headers.get('retry-after')]).toEqual([429, '7']);
    service.failNext('auth.test', { kind: 'server-error' });
    expect((await post()).status).toBe(500);
    service.failNext('auth.test', { kind: 'html' });
    expect(await (await post()).text()).toContain('<html>');
    service.failNext('chat.postMessage', { kind: 'dropped-after' });
    await expect(call(service, 'chat.postMessage', { channel: RETENTION, text: 'once' })).rejects.toThrow();
    expect(service.world.messages('retention').map((m) => m.text)).toEqual(['once']);
  });
});

describe('messages', () => {
  it('posts, changes and removes the bot’s own message, and no one else’s', async () => {
    const { ts } = await call(service, 'chat.postMessage', { channel: RETENTION, text: 'one' });
    expect(await call(service, 'chat.update', { channel: RETENTION, ts, text: 'two' })).toMatchObject({
      ok: true,
      text: 'two',
    });
    expect(service.world.messages('retention')[0]).toMatchObject({ text: 'two', edited: { user: 'U0EBBLINE01' } });
    const theirs = service.as('wren').say('retention', 'mine');
    expect((await call(service, 'chat.update', { channel: RETENTION, ts: theirs.ts, text: 'no' })).error).toBe(
      'cant_update_message',
    );
    expect((await call(service, 'chat.delete', { channel: RETENTION, ts: theirs.ts })).error).toBe(
      'cant_delete_message',
    );
    expect((await call(service, 'chat.delete', { channel: RETENTION, ts })).ok).toBe(true);
    expect((await call(service, 'chat.delete', { channel: RETENTION, ts })).error).toBe('message_not_found');
  });
  it('a text alone removes the blocks on update', async () => {
    const { ts } = await call(service, 'chat.postMessage', {
      channel: RETENTION,
      text: 'one',
      blocks: [{ type: 'divider' }],
    });
    await call(service, 'chat.update', { channel: RETENTION, ts, text: 'two' });
    expect(service.world.messages('retention')[0]?.blocks).toBeUndefined();
  });
  it('refuses what the service refuses', async () => {
    const post = (args: object) => call(service, 'chat.postMessage', { channel: RETENTION, ...args });
    expect((await post({})).error).toBe('no_text');
    expect((await call(service, 'chat.postMessage', { text: 'x' })).error).toBe('invalid_arguments');
    expect((await call(service, 'chat.postMessage', { channel: 'C0NOWHERE01', text: 'x' })).error).toBe(
      'channel_not_found',
    );
    expect((await call(service, 'chat.postMessage', { channel: LAUNCHES, text: 'x' })).error).toBe('not_in_channel');
    expect((await post({ text: 'x', markdown_text: 'y' })).error).toBe('markdown_text_conflict');
    expect((await post({ text: 'x', thread_ts: '1.000001' })).error).toBe('thread_not_found');
    const refused = await post({
      text: 'x',
      blocks: [{ type: 'header', text: { type: 'plain_text', text: 'x'.repeat(151) } }],
    });
    expect(refused.error).toBe('invalid_blocks');
    expect(refused.response_metadata?.messages?.[0]).toContain(
      'must be less than 151 characters [json-pointer:/blocks/0/text/text]',
    );
    expect((await call(service, 'chat.update', { channel: RETENTION, ts: '1.000001', text: 'x' })).error).toBe(
      'message_not_found',
    );
    expect(service.world.messages()).toEqual([]);
  });
  it('cuts a text at forty thousand characters', async () => {
    await call(service, 'chat.postMessage', { channel: RETENTION, text: 'x'.repeat(40_500) });
    expect(service.world.messages('retention')[0]?.text).toHaveLength(40_000);
  });
  it('a reply to a reply joins the thread of its first message', async () => {
    const top = service.as('wren').say('retention', 'top');
    const reply = await call(service, 'chat.postMessage', { channel: RETENTION, text: 'a', thread_ts: top.ts });
    await call(service, 'chat.postMessage', { channel: RETENTION, text: 'b', thread_ts: reply.ts });
    expect(service.world.thread('retention', top.ts).map((m) => m.text)).toEqual(['top', 'a', 'b']);
  });
  it('shows an ephemeral message to one person and lets nobody change it', async () => {
    const { message_ts } = await call(service, 'chat.postEphemeral', { channel: RETENTION, user: WREN, text: 'psst' });
    expect(service.world.messages('retention')[0]).toMatchObject({ onlyFor: WREN, text: 'psst' });
    expect((await call(service, 'chat.update', { channel: RETENTION, ts: message_ts, text: 'x' })).error).toBe(
      'message_not_found',
    );
    expect(
      (await call(service, 'chat.postEphemeral', { channel: RETENTION, user: 'U0NOBODY001', text: 'x' })).error,
    ).toBe('user_not_in_channel');
  });
  it('gives a permalink, and reactions once each', async () => {
    const { ts } = service.as('wren').say('retention', 'top');
    expect((await call(service, 'chat.getPermalink', { channel: RETENTION, message_ts: ts })).permalink).toContain(
      ts.replace('.', ''),
    );
    const mark = { channel: RETENTION, timestamp: ts, name: 'eyes' };
    expect((await call(service, 'reactions.add', mark)).ok).toBe(true);
    expect((await call(service, 'reactions.add', mark)).error).toBe('already_reacted');
    expect((await call(service, 'reactions.remove', mark)).ok).toBe(true);
    expect((await call(service, 'reactions.remove', mark)).error).toBe('no_reaction');
  });
  it('a person’s id as channel means the direct channel with them', async () => {
    const { channel } = await call(service, 'chat.postMessage', { channel: WREN, text: 'just you' });
    expect((await call(service, 'conversations.info', { channel })).channel).toMatchObject({ is_im: true, user: WREN });
    expect((await call(service, 'conversations.open', { users: WREN })).channel.id).toBe(channel);
  });
});

describe('channels and people', () => {
  it('tells members and joins public channels only', async () => {
    expect((await call(service, 'conversations.members', { channel: RETENTION })).members).toContain(WREN);
    expect((await call(service, 'conversations.info', { channel: LAUNCHES })).channel.is_member).toBe(false);
    expect((await call(service, 'conversations.join', { channel: LAUNCHES })).ok).toBe(true);
    expect((await call(service, 'conversations.info', { channel: LAUNCHES })).channel.is_member).toBe(true);
    const direct = (await call(service, 'conversations.open', { users: WREN })).channel.id;
    expect((await call(service, 'conversations.join', { channel: direct })).error).toBe(
      'method_not_supported_for_channel_type',
    );
  });
  it('pages members with a cursor', async () => {
    const first = await call(service, 'conversations.members', { channel: RETENTION, limit: 3 });
    const rest = await call(service, 'conversations.members', {
      channel: RETENTION,
      limit: 3,
      cursor: first.response_metadata && (first.response_metadata as { next_cursor?: string }).next_cursor,
    });
    expect(new Set([...first.members, ...rest.members]).size).toBe(4);
  });
  it('gives each person an IANA time zone whose offset moves with daylight saving', async () => {
    const clock = handClock(Date.UTC(2026, 0, 15));
    const winter = await startService({ now: clock.now });
    expect((await call(winter, 'users.info', { user: WREN })).user).toMatchObject({
      tz: 'Europe/London',
      tz_offset: 0,
    });
    clock.forward(180 * 86_400_000);
    expect((await call(winter, 'users.info', { user: WREN })).user.tz_offset).toBe(3600);
    await winter.close();
    expect((await call(service, 'users.info', { user: 'U0EBBLINE01' })).user.tz).toBeUndefined();
    expect((await call(service, 'team.info')).team.name).toBe('Marrowby Seed Club');
  });
});

describe('a restart', () => {
  it('leaves every id under which an app may keep things as it was', async () => {
    const ids = async (seed: number) => {
      const started = await startService({ random: seeded(seed) });
      try {
        const { channels } = await call(started, 'conversations.list', { types: 'public_channel,im' });
        const direct = await Promise.all(
          [WREN, 'U0TAMSIN001', 'U0ODELL0001'].map(
            async (users) => (await call(started, 'conversations.open', { users })).channel.id,
          ),
        );
        const { team_id, user_id } = await call(started, 'auth.test');
        return { channels: channels.map((c: { id: string }) => c.id), direct, team_id, user_id };
      } finally {
        await started.close();
      }
    };
    const before = await ids(1);
    expect(await ids(2)).toEqual(before);
    expect(new Set(before.direct).size).toBe(3);
  });
});

describe('the three-step upload', () => {
  it('stays unprocessed for the set number of looks, then can be shown in a message', async () => {
    const id = await upload({ alt_txt: 'churn lies at 6 %' });
    const done = await call(service, 'files.completeUploadExternal', { files: [{ id, title: 'Chart' }] });
    expect(done.files[0]).toMatchObject({ id, title: 'Chart', mimetype: '', shares: {} });
    const blocks = [{ type: 'image', alt_text: 'a', slack_file: { id } }];
    const early = await call(service, 'chat.postMessage', { channel: RETENTION, text: 'x', blocks });
    expect(early.error).toBe('invalid_blocks');
    expect(early.response_metadata?.messages?.join()).toContain(
      'invalid slack file [json-pointer:/blocks/0/slack_file]',
    );
    expect((await call(service, 'files.info', { file: id })).file.mimetype).toBe('');
    expect((await call(service, 'files.info', { file: id })).file).toMatchObject({
      mimetype: 'image/png',
      alt_txt: 'churn lies at 6 %',
    });
    expect((await call(service, 'chat.postMessage', { channel: RETENTION, text: 'x', blocks })).ok).toBe(true);
  });
  it('takes multipart too, as the client library sends it', async () => {
    const asked = await call(service, 'files.getUploadURLExternal', { filename: 'a.png', length: PNG.length });
    const form = new FormData();
    form.set('body', new Blob([PNG]), 'Untitled');
    expect(await (await fetch(asked.upload_url, { method: 'POST', body: form })).text()).toBe(`OK - ${PNG.length}`);
    await call(service, 'files.completeUploadExternal', { files: [{ id: asked.file_id }] });
    expect(service.world.fileContent(asked.file_id)).toEqual(PNG);
  });
  it('refuses an empty file, a long alt text, a second use, other bytes than announced, and completing twice', async () => {
    const ask = (args: object) =>
      call(service, 'files.getUploadURLExternal', { filename: 'a.png', length: 4, ...args });
    expect((await ask({ length: 0 })).error).toBe('invalid_arguments');
    expect((await ask({ alt_txt: 'x'.repeat(1001) })).error).toBe('alt_txt_too_large');
    const asked = await ask({});
    const send = (bytes: number) => fetch(asked.upload_url, { method: 'POST', body: new Uint8Array(bytes) });
    expect((await send(3)).status).toBe(400);
    expect((await send(4)).status).toBe(200);
    expect((await send(4)).status).toBe(400);
    const complete = (args: object = {}) =>
      call(service, 'files.completeUploadExternal', { files: [{ id: asked.file_id }], ...args });
    expect((await complete({ channel_id: LAUNCHES })).error).toBe('not_in_channel');
    expect((await complete({ blocks: [{ type: 'markdown', text: 'x' }] })).error).toBe('internal_error');
    expect((await complete()).ok).toBe(true);
    expect((await complete()).error).toBe('file_not_found');
  });
  it('shares into a thread with a comment, and only then knows the message', async () => {
    const top = service.as('wren').say('retention', 'top');
    const id = await upload();
    const done = await call(service, 'files.completeUploadExternal', {
      files: [{ id }],
      channel_id: RETENTION,
      thread_ts: top.ts,
      initial_comment: 'here',
    });
    expect(done.files[0].shares).toEqual({});
    await call(service, 'files.info', { file: id });
    const { file } = await call(service, 'files.info', { file: id });
    const shared = service.world.thread('retention', top.ts)[1];
    expect(file.shares.public[RETENTION][0]).toMatchObject({ ts: shared?.ts, thread_ts: top.ts });
    expect(shared).toMatchObject({ text: 'here', subtype: 'file_share' });
  });
  it('hands the bytes to the bearer, and a sign-in page with status 200 to anyone else', async () => {
    const message = service.as('wren').drop('retention', [{ name: 'a.csv', text: 'id,start\n' }]);
    const url = message.files?.[0]?.url_private_download ?? '';
    const got = await fetch(url, { headers: { authorization: 'Bearer xoxb-practice' } });
    expect([got.headers.get('content-type'), await got.text()]).toEqual(['text/csv', 'id,start\n']);
    for (const headers of [{}, { authorization: 'Bearer xoxb-other' }]) {
      const locked = await fetch(url, { headers: headers as Record<string, string> });
      expect([locked.status, locked.headers.get('content-type')?.split(';')[0]]).toEqual([200, 'text/html']);
    }
  });
  it('removes the bot’s own files only', async () => {
    const id = await upload();
    await call(service, 'files.completeUploadExternal', { files: [{ id }] });
    const theirs = service.as('wren').drop('retention', [{ name: 'a.csv', text: 'x' }]).files?.[0]?.id;
    expect((await call(service, 'files.delete', { file: theirs })).error).toBe('cant_delete_file');
    expect((await call(service, 'files.delete', { file: id })).ok).toBe(true);
    expect((await call(service, 'files.info', { file: id })).error).toBe('file_deleted');
  });
});

describe('views without a trigger that holds', () => {
  it('refuses unknown triggers, publishes a Home tab, and guards it with its hash', async () => {
    expect((await call(service, 'views.open', { trigger_id: 'x', view: modal() })).error).toBe('invalid_trigger_id');
    expect((await call(service, 'views.open', { view: modal() })).error).toBe('invalid_arguments');
    const home = { type: 'home', blocks: [{ type: 'divider' }] };
    const { view } = await call(service, 'views.publish', { user_id: WREN, view: home });
    expect((await call(service, 'views.publish', { user_id: WREN, view: home, hash: 'old' })).error).toBe(
      'hash_conflict',
    );
    expect((await call(service, 'views.update', { view_id: view.id, view: home, hash: view.hash })).ok).toBe(true);
    expect((await call(service, 'views.update', { view_id: 'V0NOTHING01', view: modal() })).error).toBe('not_found');
  });
});

describe('this machine only', () => {
  it('refuses to listen on any other address', async () => {
    const options = {
      host: '0.0.0.0' as '127.0.0.1',
      signingSecret: 's',
      botToken: 'b',
      now: Date.now,
      random: seeded(1),
    };
    await expect(startPracticeService(options)).rejects.toThrow(/127\.0\.0\.1 only/);
  });
  it('refuses to send anywhere else', () => {
    expect(() => service.setAppRequestUrl('http://chat.example.org/')).toThrow(RangeError);
  });
});
