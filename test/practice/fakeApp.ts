/** A bare HTTP server in the app's place, which keeps what it was sent and answers as told. */
import { createServer, type IncomingHttpHeaders } from 'node:http';
import type { AddressInfo } from 'node:net';

export interface Received {
  readonly headers: IncomingHttpHeaders;
  readonly raw: string;
  /** the event envelope, the command's fields, or the interaction's payload */
  // biome-ignore lint/suspicious/noExplicitAny: tests pick single fields out of many shapes
  readonly body: any;
}

export interface Answer {
  readonly status?: number;
  readonly headers?: Record<string, string>;
  readonly body?: string | object;
  /** never answer */
  readonly silent?: boolean;
}

export async function startFakeApp(answer: (received: Received, index: number) => Answer | Promise<Answer>) {
  const received: Received[] = [];
  const server = createServer((request, response) => {
    const chunks: Buffer[] = [];
    request.on('data', (chunk: Buffer) => chunks.push(chunk));
    request.on('end', async () => {
      const raw = Buffer.concat(chunks).toString('utf8');
      const entry = { headers: request.headers, raw, body: read(request.headers['content-type'], raw) };
      received.push(entry);
      const { status = 200, headers = {}, body = '', silent } = await answer(entry, received.length - 1);
      if (silent) return;
      const json = typeof body === 'object';
      response.writeHead(status, { ...(json ? { 'content-type': 'application/json' } : {}), ...headers });
      response.end(json ? JSON.stringify(body) : body);
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}/slack/events`,
    received,
    stop: () =>
      new Promise<void>((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}

function read(type: string | undefined, raw: string): unknown {
  if (type === 'application/json') return JSON.parse(raw);
  const fields = Object.fromEntries(new URLSearchParams(raw));
  return fields.payload === undefined ? fields : JSON.parse(fields.payload);
}
