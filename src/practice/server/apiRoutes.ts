/** The routes the app's client and its `respond()` use: /api/*, /upload/*, /files-pri/*, /response/*. */
import { createReadStream } from 'node:fs';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { type ApiCallRecord, dispatch } from '../api/dispatch.ts';
import { respond } from '../api/responseUrl.ts';
import { Refusal } from '../wire/refusal.ts';
import type { World } from '../world/world.ts';
import { fieldsOf, mediaType, readBody } from './body.ts';
import type { FaultPlan } from './faults.ts';
import { splitMultipart } from './multipart.ts';

export interface ApiRouteOptions {
  readonly world: World;
  readonly faults: FaultPlan;
  readonly socketUrl: () => string;
  readonly onCall: (record: ApiCallRecord) => void;
}

const API_BODY_BYTES = 4 * 1024 * 1024;
const LOGIN_PAGE =
  '<!DOCTYPE html>\n<html lang="en"><head><title>Sign in</title></head><body><h1>Sign in to Marrowby</h1></body></html>\n';

/** @returns false when the address is not one of these */
export async function handleApi(
  options: ApiRouteOptions,
  request: IncomingMessage,
  response: ServerResponse,
  path: string,
): Promise<boolean> {
  if (path.startsWith('/api/')) await apiCall(options, request, response, path.slice('/api/'.length));
  else if (path.startsWith('/upload/v1/'))
    await upload(options.world, request, response, path.slice('/upload/v1/'.length));
  else if (path.startsWith('/files-pri/')) download(options.world, request, response, path);
  else if (path.startsWith('/response/'))
    await responseUrl(options.world, request, response, path.slice('/response/'.length));
  else return false;
  return true;
}

function sendJson(response: ServerResponse, status: number, body: unknown, headers: Record<string, string> = {}): void {
  response.writeHead(status, { 'content-type': 'application/json; charset=utf-8', ...headers });
  response.end(JSON.stringify(body));
}

function sendText(response: ServerResponse, status: number, text: string, type = 'text/plain'): void {
  response.writeHead(status, { 'content-type': `${type}; charset=utf-8` });
  response.end(text);
}

export function bearerOf(request: IncomingMessage): string | undefined {
  return /^Bearer\s+(\S+)$/i.exec(request.headers.authorization ?? '')?.[1];
}

async function apiCall(options: ApiRouteOptions, request: IncomingMessage, response: ServerResponse, method: string) {
  const { world, faults } = options;
  if (request.method !== 'POST' && request.method !== 'GET') return sendText(response, 405, 'POST only');
  const body = await readBody(request, API_BODY_BYTES);
  const fault = faults.take(method);
  if (fault?.kind === 'rate-limited') {
    const headers = { 'retry-after': String(fault.retryAfterSeconds) };
    return sendJson(response, 429, { ok: false, error: 'ratelimited' }, headers);
  }
  if (fault?.kind === 'server-error') return sendText(response, 500, 'something broke');
  if (fault?.kind === 'html') return sendText(response, 200, '<html><body>busy</body></html>', 'text/html');
  if (fault?.kind === 'refused') return sendJson(response, 200, { ok: false, error: fault.error });
  const fields = fieldsOf(request, body);
  if (fields === undefined) return sendJson(response, 200, { ok: false, error: 'invalid_form_data' });
  const answer = dispatch(world, options.socketUrl, method, bearerOf(request), fields);
  const { token: _token, ...args } = fields;
  options.onCall({ method, team: answer.install?.team, args, response: answer.body });
  if (fault?.kind === 'dropped-after') return void response.destroy();
  sendJson(
    response,
    200,
    answer.body,
    answer.install ? { 'x-oauth-scopes': [...answer.install.scopes].join(',') } : {},
  );
}

async function upload(world: World, request: IncomingMessage, response: ServerResponse, id: string) {
  const ticket = world.uploads.get(id);
  if (!ticket) return sendText(response, 404, 'no such upload');
  // An address is good for one upload.
  if (ticket.bytes !== undefined || ticket.completed)
    return sendText(response, 400, 'this upload address has been used');
  const body = await readBody(request, ticket.length + 64 * 1024);
  let bytes: Uint8Array = body;
  if (mediaType(request) === 'multipart/form-data') {
    const parts = splitMultipart(request.headers['content-type'] ?? '', body);
    const only = parts?.[0];
    if (!only || parts.length !== 1) return sendText(response, 400, 'exactly one part is expected');
    bytes = only.data;
  }
  if (bytes.byteLength !== ticket.length) {
    return sendText(response, 400, `${ticket.length} bytes were announced and ${bytes.byteLength} came`);
  }
  ticket.bytes = Uint8Array.from(bytes);
  sendText(response, 200, `OK - ${bytes.byteLength}`);
}

function download(world: World, request: IncomingMessage, response: ServerResponse, path: string) {
  const id = /^\/files-pri\/[A-Z0-9]+-(F[A-Z0-9]+)\//.exec(path)?.[1];
  const file = id === undefined ? undefined : world.files.get(id);
  const install = world.installs.get(bearerOf(request) ?? '');
  // The trap of the real service: no rights gives a cheerful 200 with a sign-in page.
  if (!file || file.deleted || install?.team !== file.team || !install.scopes.has('files:read')) {
    return sendText(response, 200, LOGIN_PAGE, 'text/html');
  }
  response.writeHead(200, { 'content-type': file.mimetype, 'content-length': String(file.size) });
  if ('bytes' in file.content) response.end(file.content.bytes);
  else
    createReadStream(file.content.path)
      .on('error', () => response.destroy())
      .pipe(response);
}

async function responseUrl(world: World, request: IncomingMessage, response: ServerResponse, id: string) {
  if (request.method !== 'POST') return sendText(response, 405, 'POST only');
  const fields = fieldsOf(request, await readBody(request, API_BODY_BYTES));
  try {
    if (fields === undefined) throw new Refusal('invalid_payload');
    respond(world, id, fields);
    sendText(response, 200, 'ok');
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    const gone = ['used_url', 'expired_url', 'invalid_response_url'].includes(error.error);
    sendJson(response, gone ? 404 : 400, {
      ok: false,
      error: error.error,
      response_metadata: { messages: error.messages },
    });
  }
}
