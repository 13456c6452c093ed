import { existsSync } from 'node:fs';
import { readFile, stat } from 'node:fs/promises';
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { dirname } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { withFetchedFile } from '../../src/channel/download/fetchFile.ts';
import type { SharedFile } from '../../src/channel/download/fileInfo.ts';
import { hostRule, isAllowed } from '../../src/channel/download/hosts.ts';
import { EbbError } from '../../src/errors.ts';

const CONTENT = 'id,start,end\n1,2025-01-01,\n';
const LOGIN = '<!DOCTYPE html><html><body>Sign in</body></html>';

let base = '';
const asked: { url: string; token: string | undefined }[] = [];
const routes: Record<string, (request: IncomingMessage, response: ServerResponse) => void> = {
  '/plain': (_, response) => response.writeHead(200, { 'content-type': 'text/csv' }).end(CONTENT),
  '/login': (_, response) => response.writeHead(200, { 'content-type': 'text/html; charset=utf-8' }).end(LOGIN),
  '/sly-login': (_, response) => response.writeHead(200, { 'content-type': 'text/csv' }).end(LOGIN),
  '/short': (_, response) => response.writeHead(200, { 'content-type': 'text/csv' }).end(CONTENT.slice(0, 5)),
  '/endless': (_, response) => {
    response.writeHead(200, { 'content-type': 'text/csv' });
    const more = (): void => {
      if (response.destroyed) return;
      if (response.write('x'.repeat(65_536))) setImmediate(more);
      else response.once('drain', more);
    };
    more();
  },
  '/moved': (_, response) => response.writeHead(302, { location: '/plain' }).end(),
  '/circle': (_, response) => response.writeHead(302, { location: '/circle' }).end(),
  '/away': (_, response) => response.writeHead(302, { location: 'http://127.0.0.1:9/steal' }).end(),
  '/down': (_, response) => response.writeHead(503).end(),
  '/forbidden': (_, response) => response.writeHead(403).end(),
};
const server = createServer((request, response) => {
  asked.push({ url: request.url ?? '', token: request.headers.authorization });
  routes[request.url ?? '']?.(request, response);
});
beforeAll(async () => {
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  base = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
});
afterAll(() => {
  server.closeAllConnections();
  server.close();
});

function file(path: string, more: Partial<SharedFile> = {}): SharedFile {
  return {
    id: 'F0123456789',
    name: 'export.csv',
    mimetype: 'text/csv',
    size: CONTENT.length,
    url_private_download: base + path,
    ...more,
  };
}
const fetched = (one: SharedFile, maxBytes = 1_000_000): Promise<string> =>
  withFetchedFile(one, { token: 'xoxb-1', rule: hostRule(`${base}/api/`), maxBytes }, (path) => readFile(path, 'utf8'));

async function problem(one: SharedFile, maxBytes?: number): Promise<EbbError> {
  const error = await fetched(one, maxBytes).then(
    () => undefined,
    (thrown: unknown) => thrown,
  );
  expect(error).toBeInstanceOf(EbbError);
  return error as EbbError;
}

describe('fetching a file', () => {
  it('puts it where only this user may read, with the token, and removes it afterwards', async () => {
    let seen = '';
    await withFetchedFile(
      file('/plain'),
      { token: 'xoxb-1', rule: hostRule(`${base}/api/`), maxBytes: 1000 },
      async (path) => {
        seen = path;
        expect(await readFile(path, 'utf8')).toBe(CONTENT);
        expect((await stat(path)).mode & 0o077).toBe(0);
        expect((await stat(dirname(path))).mode & 0o077).toBe(0);
      },
    );
    expect(existsSync(dirname(seen))).toBe(false);
    expect(asked.at(-1)).toEqual({ url: '/plain', token: 'Bearer xoxb-1' });
  });

  it('follows a redirect within the service, and not without end', async () => {
    expect(await fetched(file('/moved'))).toBe(CONTENT);
    expect((await problem(file('/circle'))).message).toContain('without end');
  });

  it('sends no token to another host, not even by a redirect', async () => {
    expect((await problem(file('/away'))).message).toContain('another host');
    expect((await problem(file('', { url_private_download: 'https://files.example.com/x' }))).message).toContain(
      'another host',
    );
  });

  it('knows the sign-in page from a file, and a file from a sign-in page', async () => {
    expect((await problem(file('/login'))).message).toContain('sign-in page');
    expect((await problem(file('/sly-login'))).message).toContain('sign-in page');
    // A web page that somebody really dropped is handed to the reader, which has its own words for it.
    expect(await fetched(file('/sly-login', { size: LOGIN.length }))).toBe(LOGIN);
  });

  it('stops at the size limit, declared or not', async () => {
    const before = asked.length;
    expect((await problem(file('/plain', { size: 2_000_000 }))).code).toBe('FILE_TOO_LARGE');
    expect(asked).toHaveLength(before);
    expect((await problem(file('/endless'))).code).toBe('FILE_TOO_LARGE');
  });

  it.each([
    ['/short', true],
    ['/down', true],
    ['/forbidden', false],
  ])('says of %s whether trying again may help: %s', async (path, mayPass) => {
    const error = await problem(file(path));
    expect(error.code).toBe('UPSTREAM_FAILED');
    expect(error.detail['mayPass']).toBe(mayPass);
  });
});

describe('which addresses files are taken from', () => {
  const real = hostRule(undefined);
  it.each([
    ['https://files.slack.com/files-pri/T1-F1/x.csv', true],
    ['https://a.slack-edge.com/x', true],
    ['https://slack.com/x', true],
    ['http://files.slack.com/x', false],
    ['https://files.slack.com:8443/x', false],
    ['https://files.slack.com.example.com/x', false],
    ['https://notslack.com/x', false],
    ['https://user@files.slack.com/x', false],
    ['http://127.0.0.1:7411/x', false],
    ['http://169.254.169.254/latest', false],
  ])('%s: %s', (url, allowed) => {
    expect(isAllowed(new URL(url), real)).toBe(allowed);
  });

  it('opens this machine only at the address of a stand-in on this machine', () => {
    const practice = hostRule('http://127.0.0.1:7411/api/');
    expect(isAllowed(new URL('http://127.0.0.1:7411/x'), practice)).toBe(true);
    expect(isAllowed(new URL('http://127.0.0.1:7412/x'), practice)).toBe(false);
    expect(isAllowed(new URL('http://api.example.com/x'), hostRule('http://api.example.com/api/'))).toBe(false);
  });
});
