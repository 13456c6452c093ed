/**
 * The practice service: a local stand-in for the team-chat service, at the wire. The real app talks to it through `slackApiUrl`, and
 * people talk to the app through its page or, in tests, through `as(person)`. It listens on this machine only and holds everything in
 * memory.
 */
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { ApiCallRecord } from './api/dispatch.ts';
import { createAppLink, RETRY_DELAYS_MS } from './delivery/appLink.ts';
import { envelopesFor } from './delivery/events.ts';
import { createSocketMode } from './delivery/socketMode.ts';
import { handlePage } from './desk/routes.ts';
import type { Sample } from './desk/snapshot.ts';
import { actionsOf, type PersonActions } from './people/actions.ts';
import type { Desk, ShortcutDefinition } from './people/desk.ts';
import { createReader, type WorldReader } from './reader.ts';
import { handleApi } from './server/apiRoutes.ts';
import { BodyTooLarge } from './server/body.ts';
import { type Fault, FaultPlan } from './server/faults.ts';
import { isLoopbackHost, requireLoopbackUrl } from './server/loopback.ts';
import { addChannel, addInstall, settleMarrowby } from './world/marrowby.ts';
import { createWorld } from './world/world.ts';

export interface PracticeServiceOptions {
  /** 0 or absent: any free port */
  readonly port?: number;
  readonly host: '127.0.0.1';
  /** where signed events go, such as http://127.0.0.1:3000/slack/events; may be set later */
  readonly appRequestUrl?: string;
  readonly signingSecret: string;
  readonly botToken: string;
  readonly appToken?: string;
  readonly now: () => number;
  /** in [0, 1), for ids */
  readonly random: () => number;
  readonly retryDelaysMs?: readonly number[];
  readonly ackTimeoutMs?: number;
  /** calls of files.info that still find a bot's upload unprocessed; default 1 */
  readonly fileProcessingPolls?: number;
  readonly scopes?: readonly string[];
  readonly commands?: readonly string[];
  readonly shortcuts?: readonly ShortcutDefinition[];
  readonly samples?: readonly Sample[];
  readonly log?: (message: string, facts: Record<string, unknown>) => void;
}

export interface PracticeService {
  /** the page */
  readonly url: string;
  /** for `clientOptions.slackApiUrl` */
  readonly apiUrl: string;
  setAppRequestUrl(url: string): void;
  readonly world: WorldReader;
  /** @param person id or name: 'wren', 'tamsin', 'odell' */
  as(person: string): PersonActions;
  /**
   * Waits until something holds, looking again whenever anything changes.
   * @param what returns the thing waited for, or undefined, null or false while it is not there
   */
  waitFor<T>(
    what: (world: WorldReader) => T | undefined | null | false,
    timeoutMs?: number,
    label?: string,
  ): Promise<T>;
  /** makes the API misbehave the next `times` times the method is called */
  failNext(method: string, fault: Fault, times?: number): void;
  /** sends an event that was already sent again, under the same event_id */
  redeliver(eventId: string): void;
  /** an event of any kind in a proper envelope, for those nobody on the page can cause */
  sendEvent(event: Record<string, unknown>): string;
  disconnectSockets(reason: 'warning' | 'refresh_requested'): void;
  /** a second workspace with the same app in it */
  addWorkspace(team: {
    id: string;
    name: string;
    botToken: string;
    botUser: string;
    channel: { id: string; name: string };
  }): void;
  close(): Promise<void>;
}

const KEPT_CALLS = 5000;

/** @throws RangeError for any host but 127.0.0.1 */
export async function startPracticeService(options: PracticeServiceOptions): Promise<PracticeService> {
  if (options.host !== '127.0.0.1') {
    throw new RangeError(
      `the practice service listens on 127.0.0.1 only, not on ${String(options.host)}: it lets anyone be anyone`,
    );
  }
  const log = options.log ?? (() => undefined);
  const world = createWorld({
    appId: 'A0EBBLINE01',
    now: options.now,
    random: options.random,
    fileProcessingPolls: options.fileProcessingPolls ?? 1,
  });
  settleMarrowby(world, { bot: options.botToken, app: options.appToken, scopes: options.scopes });
  const calls: ApiCallRecord[] = [];
  const faults = new FaultPlan();
  const streams = new Set<() => void>();
  const told = () => world.publish({ kind: 'delivery' });
  const sockets = createSocketMode({
    appId: world.appId,
    newId: world.newId,
    onConnected: () => {
      link.flushHeld();
      told();
    },
  });
  const link = createAppLink({
    secret: options.signingSecret,
    now: options.now,
    newId: world.newId,
    sockets,
    retryDelaysMs: options.retryDelaysMs ?? RETRY_DELAYS_MS,
    ackTimeoutMs: options.ackTimeoutMs ?? 3000,
    onChange: told,
    log,
  });
  if (options.appRequestUrl !== undefined) link.setUrl(requireLoopbackUrl(options.appRequestUrl).href);
  world.subscribe((change) => {
    for (const { id, envelope } of envelopesFor(world, change)) link.sendEvent(id, envelope);
  });
  const desk: Desk = { world, link, commands: options.commands ?? ['/ebb'], shortcuts: options.shortcuts ?? [] };
  const api = {
    world,
    faults,
    socketUrl: () => sockets.newUrl(world.baseUrl),
    onCall: (record: ApiCallRecord) => {
      calls.push(record);
      if (calls.length > KEPT_CALLS) calls.shift();
      told();
    },
  };
  const page = {
    desk,
    samples: options.samples ?? [],
    // From src/practice as from dist/practice, the built page lies in dist/practice/page.
    pageFolder: new URL('../../dist/practice/page/', import.meta.url),
    streams,
  };

  async function handle(request: IncomingMessage, response: ServerResponse): Promise<void> {
    if (!isLoopbackHost(request.headers.host)) {
      response.writeHead(403, { 'content-type': 'text/plain' });
      response.end('the practice service is for this machine only\n');
      return;
    }
    const url = new URL(request.url ?? '/', 'http://127.0.0.1');
    if (!(await handleApi(api, request, response, url.pathname))) await handlePage(page, request, response, url);
  }

  const server = createServer((request, response) => {
    handle(request, response).catch((error: unknown) => {
      const tooLarge = error instanceof BodyTooLarge;
      if (!tooLarge) log('a request to the practice service failed', { url: request.url, error });
      if (!response.headersSent)
        response.writeHead(tooLarge ? 413 : 500, { 'content-type': 'text/plain', connection: 'close' });
      response.end(tooLarge ? 'the body is too large\n' : 'the practice service failed\n');
    });
  });
  server.on('upgrade', (request, stream, head) => {
    const path = new URL(request.url ?? '/', 'http://127.0.0.1').pathname;
    if (isLoopbackHost(request.headers.host) && path === '/socket') sockets.upgrade(request, stream, head);
    else stream.end('HTTP/1.1 403 Forbidden\r\nconnection: close\r\n\r\n');
  });
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(options.port ?? 0, options.host, () => {
      server.off('error', reject);
      resolve();
    });
  });
  world.baseUrl = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const reader = createReader(world, link.deliveries, calls);

  return {
    url: `${world.baseUrl}/`,
    apiUrl: `${world.baseUrl}/api/`,
    world: reader,
    setAppRequestUrl: (url) => {
      link.setUrl(requireLoopbackUrl(url).href);
      link.flushHeld();
      told();
    },
    as: (name) => {
      const person = reader.person(name);
      if (person.isBot) throw new RangeError('the bot acts through the API');
      return actionsOf(desk, person);
    },
    waitFor: (what, timeoutMs = 10_000, label = 'what was waited for') =>
      new Promise((resolve, reject) => {
        let stop = () => {};
        const finish = (end: () => void) => {
          clearTimeout(timer);
          stop();
          end();
        };
        const timer = setTimeout(
          () => finish(() => reject(new Error(`${label} did not happen within ${timeoutMs} ms; ${summary(reader)}`))),
          timeoutMs,
        );
        const look = () => {
          try {
            const found = what(reader);
            if (found !== undefined && found !== null && found !== false) finish(() => resolve(found));
          } catch (error) {
            finish(() => reject(error));
          }
        };
        stop = world.subscribe(look);
        look();
      }),
    failNext: (method, fault, times) => faults.add(method, fault, times),
    redeliver: (eventId) => link.redeliver(eventId),
    sendEvent: (event) => {
      const id = world.newId('Ev');
      const team = [...world.teams.keys()][0] ?? '';
      link.sendEvent(id, {
        token: 'practice',
        team_id: team,
        api_app_id: world.appId,
        event: { event_ts: world.nextTs(), ...event },
        type: 'event_callback',
        event_id: id,
        event_time: Math.floor(world.now() / 1000),
        authorizations: [],
      });
      return id;
    },
    disconnectSockets: (reason) => sockets.disconnectAll(reason),
    addWorkspace: ({ id, name, botToken, botUser, channel }) => {
      world.teams.set(id, { id, name, domain: name.toLowerCase().replaceAll(/\W+/g, '-') });
      world.people.set(botUser, {
        id: botUser,
        team: id,
        name: 'ebbline',
        realName: 'ebbline',
        role: '',
        timeZone: 'Etc/UTC',
        isBot: true,
      });
      addChannel(world, { ...channel, team: id, purpose: '', kind: 'public', members: [botUser] });
      addInstall(world, { token: botToken, kind: 'bot', team: id, botUser, botId: botUser.replace(/^U/, 'B') });
    },
    close: async () => {
      for (const end of [...streams]) end();
      link.close();
      sockets.close();
      const closed = new Promise<void>((resolve) => server.close(() => resolve()));
      server.closeAllConnections();
      await closed;
    },
  };
}

/** The end of what happened, so that a wait that failed says why. */
function summary(reader: WorldReader): string {
  const messages = reader
    .messages()
    .slice(-5)
    .map((m) => `${m.user}: ${m.text.slice(0, 120)}`);
  const refused = reader.calls
    .filter((c) => c.response.ok !== true)
    .slice(-5)
    .map((c) => `${c.method} ${JSON.stringify(c.response).slice(0, 300)}`);
  const failed = reader.deliveries
    .filter((d) => d.state !== 'acknowledged')
    .slice(-5)
    .map((d) => `${d.kind} ${d.state}`);
  return `last messages: ${JSON.stringify(messages)}; refused calls: ${JSON.stringify(refused)}; open deliveries: ${JSON.stringify(failed)}`;
}
