import type { IncomingMessage, RequestListener, ServerResponse } from 'node:http';
import { HTTPReceiver, verifySlackRequest } from '@slack/bolt';
import type { Logger } from 'pino';
import { boltLogger } from '../logging.ts';

export const EVENTS_PATH = '/slack/events';
/** The largest body the chat service sends is far below this. */
const BODY_LIMIT = 4 * 1024 * 1024;
/** The service asks to refuse clocks that differ by more than five minutes either way; the framework checks the past only. */
const CLOCK_SECONDS = 300;

export interface HttpFrontOptions {
  readonly signingSecret: string;
  readonly log: Logger;
  readonly now: () => number;
  /** whether the app is ready for work, for /readyz */
  readonly ready: () => boolean;
}

export interface HttpFront {
  readonly receiver: HTTPReceiver;
  readonly listener: RequestListener;
}

/** Takes requests before the framework does: health, clocks that run ahead, and the notice that too many events are sent. */
export function httpFront(options: HttpFrontOptions): HttpFront {
  const { signingSecret, log, now, ready } = options;
  const receiver = new HTTPReceiver({
    signingSecret,
    processBeforeResponse: true,
    endpoints: [EVENTS_PATH],
    bodyLimit: BODY_LIMIT,
    logger: boltLogger(log),
    unhandledRequestHandler: ({ request, response }) => {
      log.warn({ path: request.url }, 'a request was not acknowledged in time');
      if (!response.headersSent) response.writeHead(404).end();
    },
  });

  const slack = async (request: IncomingMessage, response: ServerResponse): Promise<void> => {
    const time = Number(request.headers['x-slack-request-timestamp']);
    if (Number.isFinite(time) && time > now() / 1000 + CLOCK_SECONDS) {
      log.warn('a request with a time ahead of this clock was refused');
      response.writeHead(401, { connection: 'close' }).end();
      return;
    }
    const body = await bufferedBody(request);
    if (body === undefined) {
      log.warn('a request with too large a body was refused');
      response.writeHead(413, { connection: 'close' }).end();
      return;
    }
    if (isRateNotice(body)) {
      // It holds no event and would stay unanswered in the framework.
      try {
        const signature = String(request.headers['x-slack-signature'] ?? '');
        verifySlackRequest({
          signingSecret,
          body: body.toString(),
          headers: { 'x-slack-signature': signature, 'x-slack-request-timestamp': time },
        });
      } catch {
        response.writeHead(401).end();
        return;
      }
      log.error('the chat service holds events back: more than it delivers in an hour');
      response.writeHead(200).end();
      return;
    }
    // The framework takes a body that was already read from here.
    Object.assign(request, { rawBody: body });
    receiver.requestListener(request, response);
  };

  const listener: RequestListener = (request, response) => {
    const path = (request.url ?? '/').split('?')[0];
    if (path === '/healthz') {
      response.writeHead(200, { 'content-type': 'text/plain' }).end('alive\n');
    } else if (path === '/readyz') {
      const ok = ready();
      response.writeHead(ok ? 200 : 503, { 'content-type': 'text/plain' }).end(ok ? 'ready\n' : 'not ready\n');
    } else if (path === EVENTS_PATH && request.method === 'POST') {
      slack(request, response).catch((error: unknown) => {
        log.warn({ err: error }, 'a request could not be read');
        if (!response.headersSent) response.writeHead(400, { connection: 'close' }).end();
      });
    } else {
      response.writeHead(404).end();
    }
  };
  return { receiver, listener };
}

async function bufferedBody(request: IncomingMessage): Promise<Buffer | undefined> {
  const chunks: Buffer[] = [];
  let length = 0;
  for await (const chunk of request as AsyncIterable<Buffer>) {
    length += chunk.length;
    if (length > BODY_LIMIT) return undefined;
    chunks.push(chunk);
  }
  return Buffer.concat(chunks);
}

function isRateNotice(body: Buffer): boolean {
  if (body.length > 4096 || !body.includes('"app_rate_limited"')) return false;
  try {
    return (JSON.parse(body.toString()) as { type?: unknown }).type === 'app_rate_limited';
  } catch {
    return false;
  }
}
