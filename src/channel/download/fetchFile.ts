import { createWriteStream } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Readable, Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { EbbError } from '../../errors.ts';
import { fileName, type SharedFile } from './fileInfo.ts';
import { type HostRule, isAllowed } from './hosts.ts';

export interface FetchOptions {
  readonly token: string;
  readonly rule: HostRule;
  readonly maxBytes: number;
}

const MOST_HOPS = 3;
const ANSWER_TIMEOUT_MS = 20_000;
const IDLE_TIMEOUT_MS = 30_000;
const WHOLE_TIMEOUT_MS = 15 * 60_000;

/**
 * Fetches a file of the chat service into a private folder for the time of `use`, and removes it afterwards.
 * @throws EbbError FILE_TOO_LARGE, or UPSTREAM_FAILED when the service does not hand the file over (`detail.mayPass`: trying again may help)
 */
export async function withFetchedFile<T>(
  file: SharedFile,
  options: FetchOptions,
  use: (path: string) => Promise<T>,
): Promise<T> {
  if ((file.size ?? 0) > options.maxBytes) throw tooLarge(file, options.maxBytes);
  // The folder is made for this process's user alone.
  const folder = await mkdtemp(join(tmpdir(), 'ebbline-'));
  try {
    const path = join(folder, 'export');
    await fetchTo(path, file, options);
    return await use(path);
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

async function fetchTo(path: string, file: SharedFile, options: FetchOptions): Promise<void> {
  const address = file.url_private_download ?? file.url_private;
  if (!address) throw failed(file, 'the chat service names no address for it', false);
  const stop = new AbortController();
  const whole = setTimeout(() => stop.abort(), WHOLE_TIMEOUT_MS);
  let idle = setTimeout(() => stop.abort(), ANSWER_TIMEOUT_MS);
  try {
    const response = await follow(new URL(address), file, options, stop.signal);
    if (response.status >= 400 || !response.body) {
      throw failed(
        file,
        `the chat service answered with ${response.status}`,
        response.status >= 500 || response.status === 429,
      );
    }
    let bytes = 0;
    let head = Buffer.alloc(0);
    const counted = new Transform({
      transform(chunk: Buffer, _encoding, done) {
        clearTimeout(idle);
        idle = setTimeout(() => stop.abort(), IDLE_TIMEOUT_MS);
        bytes += chunk.length;
        if (head.length < 512) head = Buffer.concat([head, chunk.subarray(0, 512)]);
        if (bytes > options.maxBytes) done(tooLarge(file, options.maxBytes));
        else done(null, chunk);
      },
    });
    await pipeline(Readable.fromWeb(response.body as never), counted, createWriteStream(path, { mode: 0o600 }), {
      signal: stop.signal,
    });
    refuseLoginPage(file, response.headers.get('content-type') ?? '', head, bytes);
  } catch (error) {
    if (error instanceof EbbError) throw error;
    throw failed(file, stop.signal.aborted ? 'it did not arrive in time' : 'the connection failed', true, error);
  } finally {
    clearTimeout(whole);
    clearTimeout(idle);
  }
}

/** Follows redirects by hand, so that the token goes to no host that is not on the list. */
async function follow(start: URL, file: SharedFile, options: FetchOptions, signal: AbortSignal): Promise<Response> {
  let url = start;
  for (let hop = 0; hop <= MOST_HOPS; hop++) {
    if (!isAllowed(url, options.rule)) throw failed(file, `its address lies on another host (${url.hostname})`, false);
    const response = await fetch(url, {
      headers: { authorization: `Bearer ${options.token}` },
      redirect: 'manual',
      signal,
    });
    const next = response.headers.get('location');
    if (response.status < 300 || response.status >= 400 || next === null) return response;
    await response.body?.cancel();
    url = new URL(next, url);
  }
  throw failed(file, 'its address leads from one place to the next without end', false);
}

/** Without the right to a file the service answers 200 with its sign-in page. A file that really is a web page is left to the reader. */
function refuseLoginPage(file: SharedFile, contentType: string, head: Buffer, bytes: number): void {
  const declaredHtml = (file.mimetype ?? '') === 'text/html';
  const html = /^text\/html\b/i.test(contentType) && !declaredHtml;
  const looksHtml = /^\uFEFF?\s*<(!doctype html|html)/i.test(head.toString('utf8'));
  const rightSize = file.size === undefined || file.size === null || file.size === bytes;
  if (html || (looksHtml && !rightSize)) throw failed(file, 'the chat service answered with a sign-in page', false);
  if (!rightSize) throw failed(file, `${bytes} of ${file.size} bytes arrived`, true);
}

function tooLarge(file: SharedFile, maxBytes: number): EbbError {
  const megabytes = (bytes: number): string => `${(bytes / 1_000_000).toFixed(0)} MB`;
  const size = file.size ? ` (${megabytes(file.size)})` : '';
  return new EbbError(
    'FILE_TOO_LARGE',
    `${fileName(file)}${size} is larger than the ${megabytes(maxBytes)} this bot reads`,
    'Export only the columns that are needed (id, start, end, plan), or a shorter stretch of time.',
  );
}

function failed(file: SharedFile, why: string, mayPass: boolean, cause?: unknown): EbbError {
  return new EbbError(
    'UPSTREAM_FAILED',
    `the file ${fileName(file)} could not be fetched: ${why}`,
    mayPass
      ? 'Drop it into the channel again in a moment.'
      : 'Drop it into the channel again; if it stays so, whoever looks after this bot should check its right to read files (files:read).',
    { kind: 'upstream', detail: { mayPass }, ...(cause === undefined ? {} : { cause }) },
  );
}
