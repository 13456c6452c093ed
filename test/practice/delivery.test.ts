import { createHmac } from 'node:crypto';
import { afterEach, describe, expect, it } from 'vitest';
import type { PracticeService, PracticeServiceOptions } from '../../src/practice/service.ts';
import { type Answer, type Received, startFakeApp } from './fakeApp.ts';
import { call, handClock, SECRET, startService } from './support.ts';

const stops: (() => Promise<void>)[] = [];
afterEach(async () => {
  for (const stop of stops.splice(0).reverse()) await stop();
});

async function start(
  answer: (received: Received, index: number) => Answer | Promise<Answer> = () => ({}),
  options: Partial<PracticeServiceOptions> = {},
): Promise<{ service: PracticeService; received: Received[]; url: string }> {
  const app = await startFakeApp(answer);
  const service = await startService({ appRequestUrl: app.url, ...options });
  stops.push(app.stop, () => service.close());
  return { service, received: app.received, url: app.url };
}

const eventTypes = (received: Received[]) => received.map((r) => r.body.event?.subtype ?? r.body.event?.type);
const settled = (service: PracticeService) =>
  service.waitFor((w) => w.deliveries.length > 0 && w.deliveries.every((d) => d.state !== 'waiting'));
const text = (value: string) => ({ type: 'plain_text', text: value });
const buttons = [
  { type: 'actions', block_id: 'b', elements: [{ type: 'button', action_id: 'go', text: text('Go'), value: 'v' }] },
];
const form = {
  type: 'modal',
  callback_id: 'f',
  private_metadata: 'kept',
  title: text('Form'),
  submit: text('Hand in'),
  notify_on_close: true,
  blocks: [
    { type: 'input', block_id: 'name', label: text('Name'), element: { type: 'plain_text_input', action_id: 'n' } },
  ],
};

describe('events', () => {
  it('are signed over the exact bytes that are sent', async () => {
    const { service, received } = await start();
    service.as('wren').say('retention', 'naïve – “quoted”');
    await settled(service);
    const [first] = received;
    const timestamp = String(first?.headers['x-slack-request-timestamp']);
    const expected = createHmac('sha256', SECRET).update(`v0:${timestamp}:${first?.raw}`).digest('hex');
    expect(first?.headers['x-slack-signature']).toBe(`v0=${expected}`);
    expect(first?.headers['content-type']).toBe('application/json');
    expect(first?.body).toMatchObject({
      type: 'event_callback',
      team_id: 'T0MARROWBY1',
      event: { type: 'message', channel_type: 'channel' },
    });
  });

  it('a dropped file with a mention makes a message with the file, a mention and a share, each with its own id', async () => {
    const { service, received } = await start();
    service.as('wren').drop('retention', [{ name: 'a.csv', text: 'id\n' }], { text: '@ebbline moved?' });
    await settled(service);
    expect(eventTypes(received).sort()).toEqual(['app_mention', 'file_share', 'file_shared']);
    expect(new Set(received.map((r) => r.body.event_id)).size).toBe(3);
    expect(received.find((r) => r.body.event.type === 'file_shared')?.body.event).not.toHaveProperty('file.name');
  });

  it('say nothing of channels the bot is not in, until it is brought in', async () => {
    const { service, received } = await start();
    const odell = service.as('odell');
    odell.say('launches', '@ebbline are you there?');
    expect(service.world.messages('launches').at(-1)).toMatchObject({ notice: true, onlyFor: odell.id });
    expect(service.world.deliveries).toEqual([]);
    odell.invite('launches');
    await settled(service);
    expect(received[0]?.body.event).toMatchObject({
      type: 'member_joined_channel',
      user: 'U0EBBLINE01',
      inviter: odell.id,
    });
  });

  it('tell of changes, removals, marks, the bot’s own messages, direct messages and the Home tab', async () => {
    const { service, received } = await start();
    const wren = service.as('wren');
    const mine = wren.say('retention', 'one');
    wren.edit(mine, 'two');
    wren.remove(mine);
    await call(service, 'chat.postMessage', { channel: 'C0RETENTION', text: 'bot' });
    wren.say('direct', 'psst @ebbline');
    wren.openHome();
    await settled(service);
    expect(eventTypes(received).sort()).toEqual([
      'app_home_opened',
      'message',
      'message',
      'message',
      'message_changed',
      'message_deleted',
    ]);
    expect(received.map((r) => r.body.event).find((e) => e.channel_type === 'im')?.text).toBe('psst <@U0EBBLINE01>');
  });

  it('are tried again up to three times, saying which time and why', async () => {
    const { service, received } = await start((_, i) => (i < 3 ? { status: 500 } : {}));
    service.as('wren').say('retention', 'hello');
    await settled(service);
    const retries = received.map((r) => [r.headers['x-slack-retry-num'], r.headers['x-slack-retry-reason']]);
    expect(retries).toEqual([
      [undefined, undefined],
      ['1', 'http_error'],
      ['2', 'http_error'],
      ['3', 'http_error'],
    ]);
    expect(new Set(received.map((r) => r.body.event_id)).size).toBe(1);
    expect(service.world.deliveries[0]?.state).toBe('acknowledged');
  });

  it('are given up after the third retry, and at once when the app says so', async () => {
    const { service, received } = await start((r) => ({
      status: 500,
      headers: r.body.event.text === 'stop' ? { 'x-slack-no-retry': '1' } : {},
    }));
    service.as('wren').say('retention', 'go on');
    await settled(service);
    expect(received).toHaveLength(4);
    service.as('wren').say('retention', 'stop');
    await settled(service);
    expect(received).toHaveLength(5);
    expect(service.world.deliveries.map((d) => d.state)).toEqual(['failed', 'failed']);
  });

  it('count as missed when the answer takes too long, or nobody listens', async () => {
    const { service, received } = await start((_, i) => ({ silent: i === 0 }), { ackTimeoutMs: 60 });
    service.as('wren').say('retention', 'hello');
    await settled(service);
    expect(received[1]?.headers['x-slack-retry-reason']).toBe('http_timeout');
    const nobody = await startService({ appRequestUrl: 'http://127.0.0.1:9/', retryDelaysMs: [] });
    stops.push(() => nobody.close());
    nobody.as('wren').say('retention', 'hello');
    await nobody.waitFor((w) => w.deliveries[0]?.state === 'failed');
    expect(nobody.world.deliveries[0]?.attempts[0]?.outcome).toBe('connection_failed');
  });

  it('wait for the app when it is not running yet', async () => {
    const service = await startService();
    stops.push(() => service.close());
    service.as('wren').say('retention', 'early');
    const app = await startFakeApp(() => ({}));
    stops.push(app.stop);
    service.setAppRequestUrl(app.url);
    await service.waitFor((w) => w.deliveries[0]?.state === 'acknowledged');
    expect(app.received[0]?.body.event.text).toBe('early');
  });

  it('can come twice under one id, as they do in life', async () => {
    const { service, received } = await start();
    service.as('wren').say('retention', 'hello');
    await settled(service);
    service.redeliver(String(received[0]?.body.event_id));
    await service.waitFor((w) => w.deliveries.length === 2 && w.deliveries[1]?.state === 'acknowledged');
    expect(received[1]?.body.event_id).toBe(received[0]?.body.event_id);
    expect(received[1]?.headers['x-slack-retry-num']).toBe('1');
  });
});

describe('commands and interactions', () => {
  it('a command is a flat form with the bare content type, and its answer goes to the one who asked', async () => {
    const { service, received } = await start(() => ({ body: 'here you are' }));
    await service.as('wren').slash('retention', '/ebb where is @Tamsin');
    expect(received[0]?.headers['content-type']).toBe('application/x-www-form-urlencoded');
    expect(received[0]?.body).toMatchObject({
      command: '/ebb',
      text: 'where is <@U0TAMSIN001|tamsin>',
      channel_name: 'retention',
      is_enterprise_install: 'false',
    });
    expect(service.world.messages('retention').at(-1)).toMatchObject({
      text: 'here you are',
      onlyFor: service.as('wren').id,
    });
  });

  it('a command that is not acknowledged in time is not sent again, and the person is told', async () => {
    const { service, received } = await start(() => ({ silent: true }), { ackTimeoutMs: 60 });
    expect(await service.as('wren').slash('retention', '/ebb x')).toEqual({ ok: false, error: 'operation_timeout' });
    expect(received).toHaveLength(1);
    expect(service.world.messages('retention').at(-1)?.text).toContain('operation_timeout');
  });

  it('a button press carries the message, the action and what else is filled in', async () => {
    const { service, received } = await start();
    await call(service, 'chat.postMessage', { channel: 'C0RETENTION', text: 'x', blocks: buttons });
    const [message] = service.world.messages('retention');
    await service.as('odell').press(message!, 'go');
    const body = received.find((r) => r.body.type === 'block_actions')?.body;
    expect(body).toMatchObject({
      user: { id: 'U0ODELL0001' },
      container: { type: 'message', message_ts: message?.ts, is_ephemeral: false },
      actions: [{ type: 'button', action_id: 'go', block_id: 'b', value: 'v' }],
      message: { ts: message?.ts },
    });
  });

  it('a trigger opens one modal within three seconds, and no more', async () => {
    const clock = handClock();
    const { service, received } = await start(() => ({}), { now: clock.now });
    await service.as('wren').globalShortcut('s');
    await service.as('wren').globalShortcut('s');
    const [first, second] = received.map((r) => r.body.trigger_id);
    expect(
      (await call(service, 'views.open', { trigger_id: first, view: { ...form, title: text('x'.repeat(25)) } })).error,
    ).toBe('invalid_arguments');
    expect((await call(service, 'views.open', { trigger_id: first, view: form })).ok).toBe(true);
    expect((await call(service, 'views.open', { trigger_id: first, view: form })).error).toBe('exchanged_trigger_id');
    clock.forward(3001);
    expect((await call(service, 'views.open', { trigger_id: second, view: form })).error).toBe('expired_trigger_id');
  });

  it('modals stack three deep', async () => {
    const { service, received } = await start();
    const trigger = async () => {
      await service.as('wren').globalShortcut('s');
      return received.at(-1)?.body.trigger_id;
    };
    await call(service, 'views.open', { trigger_id: await trigger(), view: form });
    for (const expected of [undefined, undefined, 'push_limit_reached']) {
      expect((await call(service, 'views.push', { trigger_id: await trigger(), view: form })).error).toBe(expected);
    }
    await service.as('wren').closeModal();
    expect(received.at(-1)?.body).toMatchObject({ type: 'view_closed', is_cleared: false });
    await service.as('wren').closeModal({ all: true });
    expect(received.at(-1)?.body).toMatchObject({ type: 'view_closed', is_cleared: true });
    expect(service.as('wren').modal()).toBeUndefined();
  });

  it.each([
    ['nothing', '', { kind: 'closed' }],
    [
      'errors',
      { response_action: 'errors', errors: { name: 'taken' } },
      { kind: 'errors', asked: 'app', errors: { name: 'taken' } },
    ],
    [
      'errors for a block that is no input',
      { response_action: 'errors', errors: { other: 'x' } },
      { kind: 'failed', error: 'invalid_view_response' },
    ],
    ['an update', { response_action: 'update', view: form }, { kind: 'updated' }],
    ['a push', { response_action: 'push', view: form }, { kind: 'pushed' }],
    ['an end', { response_action: 'clear' }, { kind: 'cleared' }],
    [
      'a view beyond the limits',
      { response_action: 'update', view: { ...form, title: text('x'.repeat(25)) } },
      { kind: 'failed', error: 'invalid_arguments' },
    ],
  ])('a form handed in and answered with %s', async (_name, body, outcome) => {
    const { service, received } = await start((r) => (r.body.type === 'view_submission' ? { body } : {}));
    const wren = service.as('wren');
    await wren.globalShortcut('s');
    const { view } = await call(service, 'views.open', { trigger_id: received[0]?.body.trigger_id, view: form });
    wren.fill({ view: view.id }, 'n', 'Marrow');
    expect(await wren.submit()).toMatchObject(outcome);
    const sent = received.find((r) => r.body.type === 'view_submission')?.body.view;
    expect(sent).toMatchObject({
      id: view.id,
      private_metadata: 'kept',
      state: { values: { name: { n: { value: 'Marrow' } } } },
    });
    const after = await call(service, 'views.update', { view_id: view.id, view: form });
    expect(after.ok).toBe(!['closed', 'cleared'].includes(outcome.kind));
    // What was typed survives under the same names.
    if (after.ok) expect(after.view.state.values.name.n.value).toBe('Marrow');
    if (after.ok)
      expect((await call(service, 'views.update', { view_id: view.id, view: form, hash: view.hash })).error).toBe(
        'hash_conflict',
      );
  });

  it('a message shortcut carries the message with its files', async () => {
    const { service, received } = await start();
    const wren = service.as('wren');
    const dropped = wren.drop('launches', [{ name: 'a.csv', text: 'id\n' }]);
    await wren.messageShortcut(dropped, 'analyse_file');
    expect(received.at(-1)?.body).toMatchObject({
      type: 'message_action',
      callback_id: 'analyse_file',
      message: { files: [{ name: 'a.csv' }] },
    });
  });

  it('a response address takes five posts in half an hour', async () => {
    const clock = handClock();
    const { service, received } = await start(() => ({}), { now: clock.now });
    const post = (url: string, body: object) =>
      fetch(url, { method: 'POST', body: JSON.stringify(body), headers: { 'content-type': 'application/json' } });
    await service.as('wren').slash('launches', '/ebb x');
    const url = String(received[0]?.body.response_url);
    expect((await post(url, { blocks: [{ type: 'nonsense' }] })).status).toBe(400);
    for (let i = 0; i < 4; i++) expect(await (await post(url, { text: `${i}` })).text()).toBe('ok');
    expect(await (await post(url, { text: 'sixth' })).json()).toMatchObject({ error: 'used_url' });
    await service.as('wren').slash('launches', '/ebb y');
    clock.forward(30 * 60_000 + 1);
    expect(await (await post(String(received[1]?.body.response_url), { text: 'late' })).json()).toMatchObject({
      error: 'expired_url',
    });
  });

  it('a response address can change or remove the message the button stood in', async () => {
    const { service, received } = await start();
    await call(service, 'chat.postEphemeral', {
      channel: 'C0RETENTION',
      user: service.as('wren').id,
      text: 'x',
      blocks: buttons,
    });
    const [whisper] = service.world.messages('retention');
    await service.as('wren').press(whisper!, 'go');
    const { response_url: url, message } = received[0]!.body;
    expect(message).toBeUndefined();
    const post = (body: object) =>
      fetch(url, { method: 'POST', body: JSON.stringify(body), headers: { 'content-type': 'application/json' } });
    await post({ text: 'changed', replace_original: true });
    expect(service.world.messages('retention').map((m) => [m.text, m.onlyFor])).toEqual([['changed', 'U0WREN00001']]);
    await post({ delete_original: true });
    expect(service.world.messages('retention')).toEqual([]);
  });
});

describe('socket mode at the wire', () => {
  it('greets, wants acknowledgements, tries an event again, and takes an address once', async () => {
    const service = await startService({ ackTimeoutMs: 500 });
    stops.push(() => service.close());
    const { url } = await call(service, 'apps.connections.open', {}, 'xapp-practice');
    const { WebSocket } = await import('undici');
    const socket = new WebSocket(url);
    // biome-ignore lint/suspicious/noExplicitAny: tests pick single fields out of many shapes
    const got: any[] = [];
    const next = (count: number) =>
      new Promise<void>((resolve) => {
        const look = () => got.length >= count && resolve();
        socket.addEventListener('message', look);
        look();
      });
    socket.addEventListener('message', (event) => got.push(JSON.parse(String(event.data))));
    await next(1);
    expect(got[0]).toMatchObject({ type: 'hello', num_connections: 1, connection_info: { app_id: 'A0EBBLINE01' } });
    const long = 'x'.repeat(70_000);
    service.as('wren').say('retention', long);
    await next(3);
    expect(got[1]).toMatchObject({ type: 'events_api', retry_attempt: 0, payload: { event: { text: long } } });
    expect(got[2]).toMatchObject({
      retry_attempt: 1,
      retry_reason: 'timeout',
      payload: { event_id: got[1].payload.event_id },
    });
    socket.send(JSON.stringify({ envelope_id: got[2].envelope_id, payload: {} }));
    await service.waitFor((w) => w.deliveries[0]?.state === 'acknowledged');
    const command = service.as('wren').slash('retention', '/ebb hi');
    await next(4);
    expect(got[3]).toMatchObject({
      type: 'slash_commands',
      accepts_response_payload: true,
      payload: { command: '/ebb', text: 'hi' },
    });
    socket.send(JSON.stringify({ envelope_id: got[3].envelope_id, payload: { text: 'hello' } }));
    await command;
    expect(service.world.messages('retention').at(-1)?.text).toBe('hello');
    const again = new WebSocket(url);
    await new Promise<void>((resolve) => again.addEventListener('error', () => resolve()));
    service.disconnectSockets('refresh_requested');
    await next(5);
    expect(got[4]).toMatchObject({ type: 'disconnect', reason: 'refresh_requested' });
    const closed = new Promise<void>((resolve) => socket.addEventListener('close', () => resolve()));
    socket.close();
    await closed;
  });
});
