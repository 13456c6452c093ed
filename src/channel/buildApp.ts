import type { RequestListener } from 'node:http';
import { App, type Receiver, SocketModeReceiver } from '@slack/bolt';
import { EbbError } from '../errors.ts';
import type { Dataset } from '../store/types.ts';
import { holdAcknowledgement } from './front/holdAcknowledgement.ts';
import { httpFront } from './front/httpFront.ts';
import { createHandler } from './jobs/worker.ts';
import { listenToCommand } from './listeners/command.ts';
import { listenToJoins } from './listeners/joins.ts';
import { listenToMendView } from './listeners/mendView.ts';
import { listenToPosts } from './listeners/posts.ts';
import { listenToPresses } from './listeners/presses.ts';
import { listenToSharedFiles } from './listeners/sharedFiles.ts';
import { listenToShortcut } from './listeners/shortcut.ts';
import { boltLogger } from './logging.ts';
import { stillHereMessage } from './messages/plainMessages.ts';
import { clientOptions, onceOnlyClient, refusal, webClient } from './posting/webClient.ts';
import type { ChannelDeps } from './types.ts';
import { takeDuePosts } from './weeklyPosts.ts';

export type Inbound =
  | { readonly mode: 'http'; readonly signingSecret: string }
  | { readonly mode: 'socket'; readonly appToken: string; readonly clientPingTimeout?: number };

export interface ChannelApp {
  /** HTTP mode: what the server listens with; undefined in socket mode */
  readonly requestListener: RequestListener | undefined;
  /** Asks the service who the bot is, and starts to work what is in the inbox. @throws when the token is refused */
  init(): Promise<void>;
  /** socket mode: opens the connection; resolves once the service has said hello */
  connect(): Promise<void>;
  /** says in a channel which export it still has; for the practice workspace, whose messages do not last */
  sayStillHere(channel: string, dataset: Pick<Dataset, 'name' | 'report'>): Promise<void>;
  /** writes down the weekly posts that are due, to be worked from the queue; call it now and then, several times a minute */
  takeDuePosts(): Promise<number>;
  /** takes in nothing more, and waits for what a listener began */
  stop(): Promise<void>;
}

const CONCURRENCY = 4;

/**
 * Wires the bot: listeners that check, write down and acknowledge, and the handler that works what was written down.
 * Listening is somebody else's business, so that tests can drive it.
 */
export function buildApp(deps: ChannelDeps, inbound: Inbound): ChannelApp {
  let ready = false;
  const background = new Set<Promise<unknown>>();
  const inBackground = (work: Promise<unknown>): void => {
    const settled = work.catch((error: unknown) => deps.log.warn({ err: error }, 'something begun in passing failed'));
    background.add(settled);
    void settled.finally(() => background.delete(settled));
  };

  const front =
    inbound.mode === 'http'
      ? httpFront({ signingSecret: inbound.signingSecret, log: deps.log, now: deps.now, ready: () => ready })
      : undefined;
  let stopping = false;
  const receiver =
    front?.receiver ??
    socketReceiver(deps, inbound as Extract<Inbound, { mode: 'socket' }>, () => {
      if (!stopping) deps.onConnectionLost?.();
    });
  const app = new App({
    token: deps.slack.botToken,
    receiver,
    logger: boltLogger(deps.log),
    clientOptions: clientOptions(deps),
    convoStore: false,
    deferInitialization: true,
  });
  app.error(async (error) => {
    deps.log.error({ err: error }, 'a listener failed; the service will send the event again');
    // Swallowed, the request would hang until it times out.
    throw error;
  });
  listenToPosts(app, deps);
  listenToSharedFiles(app, deps);
  listenToJoins(app, deps);
  listenToCommand(app, deps);
  listenToPresses(app, deps, inBackground);
  listenToMendView(app, deps);
  listenToShortcut(app, deps, inBackground);

  return {
    requestListener: front?.listener,
    async init() {
      try {
        await app.init();
      } catch (error) {
        throw refusedToken(error);
      }
      await deps.store.work(
        createHandler(deps, webClient(deps), onceOnlyClient(deps)),
        deps.concurrency ?? CONCURRENCY,
      );
      ready = true;
    },
    async connect() {
      await receiver.start();
    },
    async sayStillHere(channel, { name, report }) {
      const { text, blocks } = stillHereMessage(name, report.accounts);
      await app.client.chat.postMessage({ channel, text, blocks });
    },
    takeDuePosts: () => takeDuePosts(deps),
    async stop() {
      ready = false;
      stopping = true;
      if (inbound.mode === 'socket') await receiver.stop();
      await Promise.all(background);
    },
  };
}

/** In the service's words "invalid_auth" and the like; in ours what to do about it. */
function refusedToken(error: unknown): unknown {
  const why = refusal(error);
  if (why === undefined) return error;
  return new EbbError(
    'SETTINGS_INVALID',
    `the chat service refuses the bot token (${why})`,
    'Copy SLACK_BOT_TOKEN again from OAuth & Permissions of your app; after a change of scopes, reinstall the app first.',
    { kind: 'settings', cause: error },
  );
}

function socketReceiver(
  deps: ChannelDeps,
  inbound: Extract<Inbound, { mode: 'socket' }>,
  onLost: () => void,
): Receiver {
  const receiver = new SocketModeReceiver({
    appToken: inbound.appToken,
    logger: boltLogger(deps.log),
    installerOptions: { clientOptions: clientOptions(deps) },
    ...(inbound.clientPingTimeout === undefined ? {} : { clientPingTimeout: inbound.clientPingTimeout }),
  });
  // Said only when the client has given up, not when it connects anew.
  receiver.client.on('disconnected', onLost);
  return holdAcknowledgement(receiver);
}
