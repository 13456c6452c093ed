/** The real program as a process of its own; `npm test` builds it first. */
import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import type { AddressInfo } from 'node:net';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeAll, describe, expect, it } from 'vitest';
import { type PracticeService, startPracticeService } from '../../src/practice/service.ts';
import { APP_TOKEN, BOT_TOKEN, SAMPLE, SECRET } from './support.ts';

const MAIN = new URL('../../dist/main.js', import.meta.url).pathname;
const START_MS = 60_000;
const VERDICT = /^Churn has fallen/;

interface Program {
  readonly child: ChildProcess;
  readonly said: () => string;
  /** resolves with the first line of standard output */
  readonly line: Promise<string>;
  readonly ended: Promise<number | NodeJS.Signals | null>;
}

const children: ChildProcess[] = [];
const cleanUps: (() => Promise<unknown>)[] = [];
beforeAll(() => {
  if (!existsSync(MAIN)) throw new Error('build first: npm run build');
});
afterEach(async () => {
  for (const child of children.splice(0)) child.kill('SIGKILL');
  for (const clean of cleanUps.splice(0).reverse()) await clean();
});

async function folder(): Promise<string> {
  const path = await mkdtemp(join(tmpdir(), 'ebbline-process-'));
  cleanUps.push(() => rm(path, { recursive: true, force: true }));
  return path;
}

function run(cwd: string, variables: Record<string, string>): Program {
  const child = spawn(process.execPath, [MAIN], {
    cwd,
    env: { PATH: process.env['PATH'] ?? '', ...variables },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  children.push(child);
  let out = '';
  let errors = '';
  child.stderr.on('data', (chunk: Buffer) => {
    errors += chunk.toString();
  });
  const ended = new Promise<number | NodeJS.Signals | null>((resolve) =>
    child.once('exit', (code, signal) => resolve(code ?? signal)),
  );
  const line = new Promise<string>((resolve, reject) => {
    child.stdout.on('data', (chunk: Buffer) => {
      out += chunk.toString();
      if (out.includes('\n')) resolve(out.split('\n')[0]!);
    });
    void ended.then((code) => reject(new Error(`it ended with ${code}: ${errors}`)));
  });
  line.catch(() => undefined);
  return { child, said: () => out + errors, line, ended };
}

async function freePort(): Promise<number> {
  const server = createServer();
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const { port } = server.address() as AddressInfo;
  await new Promise((resolve) => server.close(resolve));
  return port;
}

async function workspace(): Promise<{ service: PracticeService; variables: Record<string, string> }> {
  const service = await startPracticeService({
    host: '127.0.0.1',
    signingSecret: SECRET,
    botToken: BOT_TOKEN,
    appToken: APP_TOKEN,
    now: Date.now,
    random: Math.random,
    // A stopped bot is tried again soon and often, as the service would within minutes.
    retryDelaysMs: Array.from({ length: 200 }, () => 200),
  });
  cleanUps.push(() => service.close());
  const port = await freePort();
  service.setAppRequestUrl(`http://127.0.0.1:${port}/slack/events`);
  const variables = {
    EBBLINE_MODE: 'http',
    EBBLINE_PORT: String(port),
    SLACK_BOT_TOKEN: BOT_TOKEN,
    SLACK_SIGNING_SECRET: SECRET,
    SLACK_API_URL: service.apiUrl,
    EBBLINE_ALLOW_LOCAL_API: 'yes',
  };
  return { service, variables };
}

describe('the program', () => {
  it('killed in the middle of its work, it answers after the next start, once', async () => {
    const { service, variables } = await workspace();
    const cwd = await folder();
    const first = run(cwd, variables);
    await first.line;
    service.failNext('files.getUploadURLExternal', { kind: 'rate-limited', retryAfterSeconds: 3 });
    const post = service.as('wren').drop('#retention', [{ path: SAMPLE }]);
    // What was read is posted; the answer is held up by the service.
    await service.waitFor(
      (world) => world.thread('retention', post.ts).some((m) => m.text.startsWith('Read: ')),
      START_MS,
      'what was read',
    );
    first.child.kill('SIGKILL');
    await first.ended;
    const answered = (): number =>
      service.world.thread('retention', post.ts).filter((m) => VERDICT.test(m.text)).length;
    expect(answered()).toBe(0);

    const second = run(cwd, variables);
    await service.waitFor(answered, START_MS, 'the verdict after the restart');
    await second.line;
    second.child.kill('SIGTERM');
    expect(await second.ended, second.said()).toBe(0);
    expect(service.world.thread('retention', post.ts).filter((m) => m.bot_id !== undefined)).toHaveLength(2);
  });

  it('asked to stop, it ends with 0; what comes meanwhile is answered after the next start', async () => {
    const { service, variables } = await workspace();
    const cwd = await folder();
    const first = run(cwd, variables);
    await first.line;
    const post = service.as('wren').drop('#retention', [{ path: SAMPLE }]);
    await service.waitFor((world) => world.thread('retention', post.ts).some((m) => VERDICT.test(m.text)), START_MS);
    first.child.kill('SIGTERM');
    expect(await first.ended).toBe(0);
    const asked = service.as('wren').say('#retention', '@ebbline has churn moved at 2 months?');
    run(cwd, variables);
    const reply = await service.waitFor(
      (world) => world.thread('retention', asked.ts).find((m) => VERDICT.test(m.text)),
      START_MS,
    );
    expect(reply.text).toContain('within 2 months');
  });

  it('without any setting it opens the practice workspace with the invented business loaded, and keeps it', async () => {
    const cwd = await folder();
    const port = await freePort();
    const first = run(cwd, { EBBLINE_PORT: String(port) });
    expect(await first.line).toContain(`http://127.0.0.1:${port}/`);
    await streamed(port, /"text":"Churn has fallen/);
    first.child.kill('SIGINT');
    expect(await first.ended).toBe(0);
    const second = run(cwd, { EBBLINE_PORT: String(port) });
    await second.line;
    await streamed(port, /I still have `marrowby-recipe-cards.csv` from last time: 8,005 accounts/);
  });

  it('says what is wrong with the settings, all at once, and ends with 2', async () => {
    const program = run(await folder(), { EBBLINE_MODE: 'http', EBBLINE_PORT: 'x' });
    expect(await program.ended).toBe(2);
    expect(program.said()).toMatch(/EBBLINE_PORT[\s\S]*SLACK_BOT_TOKEN[\s\S]*SLACK_SIGNING_SECRET/);
    expect(program.said()).not.toMatch(/\bat .*\.js:\d+/);
  });
});

/** Reads the page's live stream until something is shown. */
async function streamed(port: number, wanted: RegExp): Promise<void> {
  const stop = AbortSignal.timeout(START_MS);
  const response = await fetch(`http://127.0.0.1:${port}/page/stream?as=U0WREN00001`, { signal: stop });
  let seen = '';
  for await (const chunk of response.body as unknown as AsyncIterable<Uint8Array>) {
    seen += Buffer.from(chunk).toString();
    if (wanted.test(seen)) return;
  }
  throw new Error(`the page never showed ${String(wanted)}`);
}
