import { randomBytes } from 'node:crypto';
import { createServer, type RequestListener, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import process from 'node:process';
import type { Logger } from 'pino';
import { createAnswers } from './answers/createAnswers.ts';
import { buildApp, type Inbound } from './channel/buildApp.ts';
import { COMMAND, SHORTCUT_READ } from './channel/names.ts';
import { EbbError } from './errors.ts';
import { createLog } from './log.ts';
import { warmPicture } from './picture/picture.ts';
import type { PracticeService } from './practice/service.ts';
import { furnish, samples, startOnFreePort } from './practiceWorkspace.ts';
import { type Settings, settingsOfProcess } from './settings.ts';
import { openStore } from './store/openStore.ts';

/** How long an open connection may keep a stopping server. */
const SERVER_STOP_MS = 3000;
/** How often records that are no longer needed are removed. */
const TIDY_EVERY_MS = 3_600_000;
/** How often it is looked whether a weekly post is due. */
const WEEKLY_EVERY_MS = 15_000;
const EVENTS_PATH = '/slack/events';

/** What was started, undone in reverse order. */
type Stop = () => Promise<void>;

interface Reach {
  readonly inbound: Inbound;
  readonly botToken: string;
  readonly apiUrl: string | undefined;
  readonly service: PracticeService | undefined;
}

async function start(settings: Settings, log: Logger, stops: Stop[]): Promise<string> {
  const reach = await reachOf(settings, log, stops);
  const store = await openStore({
    dataFolder: settings.dataFolder,
    now: Date.now,
    log: log.child({ part: 'store' }),
    ...(settings.databaseUrl === undefined ? {} : { databaseUrl: settings.databaseUrl }),
  });
  const answers = createAnswers({ clock: () => performance.now() });
  stops.push(
    () => answers.close(),
    () => store.close(),
  );
  const app = buildApp(
    {
      store,
      answers,
      log: log.child({ part: 'channel' }),
      now: Date.now,
      random: Math.random,
      slack: { botToken: reach.botToken, ...(reach.apiUrl === undefined ? {} : { apiUrl: reach.apiUrl }) },
      maxUploadBytes: settings.maxUploadBytes,
      practice: settings.mode === 'practice',
      onConnectionLost: () => {
        log.fatal(
          'the connection to the chat service is lost for good; whoever supervises this process starts it again',
        );
        void shutDown(stops, log, 1);
      },
    },
    reach.inbound,
  );
  // Listening first, so that nothing is missed; what comes before the bot is ready is written down like everything else.
  if (app.requestListener) {
    const [host, port] = settings.mode === 'http' ? [settings.host, settings.port] : ['127.0.0.1', 0];
    const server = await listen(app.requestListener, host, port);
    stops.push(() => closeServer(server));
    reach.service?.setAppRequestUrl(`http://127.0.0.1:${(server.address() as AddressInfo).port}${EVENTS_PATH}`);
  }
  stops.push(() => app.stop());
  await app.init();
  if (settings.mode === 'socket') await app.connect();
  const tidying = setInterval(() => {
    store.maintain().catch((error: unknown) => log.warn({ err: error }, 'old records could not be tidied away'));
  }, TIDY_EVERY_MS);
  tidying.unref();
  stops.push(async () => clearInterval(tidying));
  const weekly = setInterval(() => {
    app
      .takeDuePosts()
      .catch((error: unknown) => log.warn({ err: error }, 'the weekly posts that are due could not be taken'));
  }, WEEKLY_EVERY_MS);
  stops.push(async () => clearInterval(weekly));
  void warmPicture().catch((error: unknown) => log.warn({ err: error }, 'the picture could not be prepared'));
  if (reach.service) {
    await furnish(reach.service, store, app);
    return `The practice workspace is open at ${reach.service.url} (Ctrl+C ends it)`;
  }
  return `Ebbline is ready (${settings.mode} mode)`;
}

/** How the bot is reached: by the real service, or by a stand-in that is started here. */
async function reachOf(settings: Settings, log: Logger, stops: Stop[]): Promise<Reach> {
  if (settings.mode === 'http') {
    const { signingSecret, botToken, apiUrl } = settings;
    return { inbound: { mode: 'http', signingSecret }, botToken, apiUrl, service: undefined };
  }
  if (settings.mode === 'socket') {
    const { appToken, botToken, apiUrl } = settings;
    return { inbound: { mode: 'socket', appToken }, botToken, apiUrl, service: undefined };
  }
  const signingSecret = randomBytes(24).toString('hex');
  const botToken = `xoxb-practice-${randomBytes(12).toString('hex')}`;
  const service = await startOnFreePort(
    {
      host: '127.0.0.1',
      port: settings.port,
      signingSecret,
      botToken,
      now: Date.now,
      random: Math.random,
      commands: [COMMAND],
      shortcuts: [{ callbackId: SHORTCUT_READ, name: 'Read this file' }],
      samples: await samples(),
      log: (message, facts) => log.warn({ part: 'practice', ...facts }, message),
    },
    settings.portMayMove,
  );
  stops.push(() => service.close());
  return { inbound: { mode: 'http', signingSecret }, botToken, apiUrl: service.apiUrl, service };
}

function listen(listener: RequestListener, host: string, port: number): Promise<Server> {
  const server = createServer(listener);
  return new Promise((resolve, reject) => {
    server.once('error', (error: NodeJS.ErrnoException) => {
      const hint = 'Choose another one with EBBLINE_PORT and EBBLINE_HOST.';
      reject(
        new EbbError(
          'SETTINGS_INVALID',
          `${host}:${port} cannot be listened on (${error.code ?? error.message})`,
          hint,
          {
            kind: 'settings',
            cause: error,
          },
        ),
      );
    });
    server.listen(port, host, () => resolve(server));
  });
}

async function closeServer(server: Server): Promise<void> {
  const closed = new Promise<void>((resolve) => server.close(() => resolve()));
  server.closeIdleConnections();
  const deadline = setTimeout(() => server.closeAllConnections(), SERVER_STOP_MS);
  await closed;
  clearTimeout(deadline);
}

let shuttingDown: Promise<void> | undefined;

/** Stops taking things in, lets the running work end or puts it back into the queue, then closes what holds it. */
function shutDown(stops: readonly Stop[], log: Logger, exitCode: number): Promise<void> {
  shuttingDown ??= (async () => {
    for (const stop of [...stops].reverse()) {
      try {
        await stop();
      } catch (error) {
        log.error({ err: error }, 'something did not stop cleanly');
      }
    }
    process.exit(exitCode);
  })();
  return shuttingDown;
}

async function main(): Promise<void> {
  const stops: Stop[] = [];
  let log: Logger | undefined;
  try {
    const settings = settingsOfProcess();
    log = createLog(settings.logLevel, process.stderr);
    const started = log;
    for (const signal of ['SIGINT', 'SIGTERM'] as const) {
      process.on(signal, () => {
        if (shuttingDown) process.exit(1);
        started.info({ signal }, 'stopping');
        void shutDown(stops, started, 0);
      });
    }
    process.on('uncaughtException', (error) => {
      started.fatal(
        { err: error },
        'something unexpected outside any work; stopping, so that a supervisor can start it again',
      );
      void shutDown(stops, started, 1);
    });
    process.stdout.write(`${await start(settings, log, stops)}\n`);
  } catch (error) {
    // Stopped while starting: what was closed under the start's feet is no failure.
    if (shuttingDown) return shuttingDown;
    const deliberate = error instanceof EbbError;
    process.stderr.write(
      deliberate ? `${error.message}\n${error.hint}\n` : `Ebbline could not start: ${(error as Error).message}\n`,
    );
    log?.debug({ err: error }, 'the start failed');
    await shutDown(stops, log ?? createLog('error', process.stderr), deliberate ? 2 : 1);
  }
}

await main();
