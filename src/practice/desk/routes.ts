/** The page and what it talks to: the built files, a live stream of snapshots, and requests. */
import { createReadStream } from 'node:fs';
import { readFile } from 'node:fs/promises';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { extname } from 'node:path';
import type { Desk } from '../people/desk.ts';
import { takeIn } from '../people/say.ts';
import { BodyTooLarge, mediaType, readBody } from '../server/body.ts';
import { isShowableImage } from '../world/files.ts';
import type { Person } from '../world/world.ts';
import { carryOut } from './carryOut.ts';
import { pageRequestSchema } from './requests.ts';
import { type Sample, snapshotFor } from './snapshot.ts';

export interface PageRouteOptions {
  readonly desk: Desk;
  readonly samples: readonly Sample[];
  /** the built page, ending in a slash */
  readonly pageFolder: URL;
  readonly streams: Set<() => void>;
}

/** Only the page itself sends this header; another site's script cannot without asking first, and is never let. */
export const PAGE_HEADER = 'x-practice-page';
const UPLOAD_BYTES = 512 * 1024 * 1024;
const TYPES: Record<string, string> = {
  '.html': 'text/html; charset=utf-8',
  '.js': 'text/javascript; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.ttf': 'font/ttf',
  '.woff2': 'font/woff2',
  '.svg': 'image/svg+xml',
  '.png': 'image/png',
};
const POLICY =
  "default-src 'none'; script-src 'self'; style-src 'self' 'unsafe-inline'; font-src 'self'; img-src 'self' data:; connect-src 'self'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'";

export async function handlePage(
  options: PageRouteOptions,
  request: IncomingMessage,
  response: ServerResponse,
  url: URL,
): Promise<void> {
  const { pathname } = url;
  if (request.method === 'POST') {
    if (request.headers[PAGE_HEADER] !== '1')
      return sendJson(response, 403, { problem: 'this address is for the practice page' });
    return await post(options, request, response, url);
  }
  if (request.method !== 'GET' && request.method !== 'HEAD') return sendJson(response, 405, { problem: 'GET or POST' });
  if (pathname === '/page/stream') return stream(options, request, response, url);
  if (pathname.startsWith('/page/file/')) return file(options, response, pathname.slice('/page/file/'.length), url);
  await asset(options, response, pathname);
}

function sendJson(response: ServerResponse, status: number, body: unknown): void {
  response.writeHead(status, { 'content-type': 'application/json; charset=utf-8' });
  response.end(JSON.stringify(body));
}

function personNamed({ desk }: PageRouteOptions, id: string | null): Person | undefined {
  const person = desk.world.people.get(id ?? '');
  return person?.isBot === false ? person : undefined;
}

/** Server-sent events; changes that come together make one snapshot. */
function stream(options: PageRouteOptions, request: IncomingMessage, response: ServerResponse, url: URL) {
  const person = personNamed(options, url.searchParams.get('as'));
  if (!person) return sendJson(response, 404, { problem: 'there is no such person' });
  response.writeHead(200, { 'content-type': 'text/event-stream', 'cache-control': 'no-store' });
  let planned = false;
  const send = () => {
    planned = false;
    if (!response.writableEnded) {
      response.write(`data: ${JSON.stringify(snapshotFor(options.desk, person, options.samples))}\n\n`);
    }
  };
  const plan = () => {
    if (planned) return;
    planned = true;
    setImmediate(send);
  };
  send();
  const stop = options.desk.world.subscribe(plan);
  const end = () => {
    stop();
    options.streams.delete(end);
    response.end();
  };
  options.streams.add(end);
  request.on('close', end);
}

async function post(
  options: PageRouteOptions,
  request: IncomingMessage,
  response: ServerResponse,
  url: URL,
): Promise<void> {
  try {
    if (url.pathname === '/page/upload') {
      const person = personNamed(options, url.searchParams.get('as'));
      if (!person) return sendJson(response, 404, { problem: 'there is no such person' });
      const bytes = await readBody(request, UPLOAD_BYTES);
      const name = url.searchParams.get('name') || 'file';
      return sendJson(response, 200, {
        file: takeIn(options.desk.world, person, { name, bytes: Uint8Array.from(bytes) }).id,
      });
    }
    if (url.pathname !== '/page/do' || mediaType(request) !== 'application/json') {
      return sendJson(response, 404, { problem: 'there is no such address' });
    }
    const ask = pageRequestSchema.safeParse(JSON.parse((await readBody(request, 1024 * 1024)).toString('utf8')));
    if (!ask.success) return sendJson(response, 400, { problem: ask.error.issues[0]?.message ?? 'unreadable request' });
    const person = personNamed(options, ask.data.as);
    if (!person) return sendJson(response, 404, { problem: 'there is no such person' });
    sendJson(response, 200, (await carryOut(options.desk, person, ask.data, options.samples)) ?? {});
  } catch (error) {
    if (error instanceof BodyTooLarge) return sendJson(response, 413, { problem: error.message });
    if (error instanceof RangeError || error instanceof SyntaxError)
      return sendJson(response, 400, { problem: error.message });
    throw error;
  }
}

/** Only pictures are shown in place; anything else is handed over as a download, so that no uploaded page can run here. */
function file({ desk }: PageRouteOptions, response: ServerResponse, id: string, url: URL) {
  const stored = desk.world.files.get(id);
  if (!stored || stored.deleted) return sendJson(response, 404, { problem: 'there is no such file' });
  const inline = isShowableImage(stored) && !url.searchParams.has('download');
  response.writeHead(200, {
    'content-type': inline ? stored.mimetype : 'application/octet-stream',
    'content-length': String(stored.size),
    'content-disposition': `${inline ? 'inline' : 'attachment'}; filename*=UTF-8''${encodeURIComponent(stored.name)}`,
    'x-content-type-options': 'nosniff',
    'content-security-policy': "default-src 'none'; sandbox",
  });
  if ('bytes' in stored.content) response.end(stored.content.bytes);
  else
    createReadStream(stored.content.path)
      .on('error', () => response.destroy())
      .pipe(response);
}

async function asset({ pageFolder }: PageRouteOptions, response: ServerResponse, pathname: string): Promise<void> {
  const name = pathname === '/' ? 'index.html' : pathname.slice(1);
  if (!/^(?:index\.html|assets\/[\w.-]+)$/.test(name))
    return sendJson(response, 404, { problem: 'there is no such address' });
  try {
    const bytes = await readFile(new URL(name, pageFolder));
    response.writeHead(200, {
      'content-type': TYPES[extname(name)] ?? 'application/octet-stream',
      'cache-control': name === 'index.html' ? 'no-store' : 'max-age=31536000, immutable',
      'content-security-policy': POLICY,
      'x-content-type-options': 'nosniff',
      'referrer-policy': 'no-referrer',
    });
    response.end(bytes);
  } catch {
    const hint =
      name === 'index.html' ? 'the practice page has not been built: run `npm run build`' : 'there is no such file';
    sendJson(response, 404, { problem: hint });
  }
}
