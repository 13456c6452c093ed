/** Starting the practice service in tests, and a Bolt app against it. */
import { App, type AppOptions, HTTPReceiver, LogLevel } from '@slack/bolt';
import { type PracticeService, type PracticeServiceOptions, startPracticeService } from '../../src/practice/service.ts';

export const SECRET = 'practice-signing-secret';
export const BOT_TOKEN = 'xoxb-practice';
export const APP_TOKEN = 'xapp-practice';

/** A small seeded generator: ids differ between calls and repeat between runs. */
export function seeded(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

/** A clock a test moves by hand. */
export function handClock(startMs = Date.UTC(2026, 2, 2, 9)): { now: () => number; forward: (ms: number) => void } {
  let at = startMs;
  return {
    now: () => at,
    forward: (ms) => {
      at += ms;
    },
  };
}

export function startService(options: Partial<PracticeServiceOptions> = {}): Promise<PracticeService> {
  return startPracticeService({
    host: '127.0.0.1',
    signingSecret: SECRET,
    botToken: BOT_TOKEN,
    appToken: APP_TOKEN,
    now: Date.now,
    random: seeded(7),
    retryDelaysMs: [5, 10, 15],
    ...options,
  });
}

export interface ApiAnswer {
  ok: boolean;
  error?: string;
  response_metadata?: { messages?: string[] };
  // biome-ignore lint/suspicious/noExplicitAny: tests pick single fields out of many shapes
  [key: string]: any;
}

/** Calls a method the way the client library does: a form, nested values as JSON. */
export async function call(
  service: PracticeService,
  method: string,
  args: Record<string, unknown> = {},
  token: string | undefined = BOT_TOKEN,
): Promise<ApiAnswer> {
  const form = new URLSearchParams();
  for (const [key, value] of Object.entries(args)) {
    if (value === undefined || value === null) continue;
    form.set(key, typeof value === 'object' ? JSON.stringify(value) : String(value));
  }
  const response = await fetch(service.apiUrl + method, {
    method: 'POST',
    headers: {
      'content-type': 'application/x-www-form-urlencoded',
      ...(token === undefined ? {} : { authorization: `Bearer ${token}` }),
    },
    body: form.toString(),
  });
  return (await response.json()) as ApiAnswer;
}

export async function startHttpApp(
  service: PracticeService,
  prepare: (app: App) => void,
): Promise<{ app: App; stop: () => Promise<void> }> {
  const receiver = new HTTPReceiver({ signingSecret: SECRET, logLevel: LogLevel.ERROR });
  const app = newApp(service, { receiver });
  prepare(app);
  await app.init();
  const server = await app.start({ port: 0, host: '127.0.0.1' });
  const address = server?.address();
  if (address === null || typeof address !== 'object') throw new Error('the app is not listening');
  service.setAppRequestUrl(`http://127.0.0.1:${address.port}/slack/events`);
  return {
    app,
    stop: async () => {
      const stopped = app.stop();
      if (server && 'closeAllConnections' in server) server.closeAllConnections();
      await stopped;
    },
  };
}

export async function startSocketApp(
  service: PracticeService,
  prepare: (app: App) => void,
): Promise<{ app: App; stop: () => Promise<void> }> {
  const app = newApp(service, { socketMode: true, appToken: APP_TOKEN });
  prepare(app);
  await app.init();
  await app.start();
  return {
    app,
    stop: async () => {
      await app.stop();
    },
  };
}

function newApp(service: PracticeService, options: AppOptions): App {
  return new App({
    token: BOT_TOKEN,
    deferInitialization: true,
    convoStore: false,
    logLevel: LogLevel.ERROR,
    clientOptions: { slackApiUrl: service.apiUrl, retryConfig: { retries: 0 }, timeout: 5000 },
    ...options,
  });
}
