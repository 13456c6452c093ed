import { existsSync } from 'node:fs';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { request } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { App } from '@slack/bolt';
import type { Browser, Page } from 'playwright-core';
import { build } from 'vite';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { PracticeService } from '../../src/practice/service.ts';
import { browserMissing, launchBrowser } from '../support/browser.ts';
import { call, startHttpApp, startService } from './support.ts';

describe('the page’s own addresses', () => {
  let service: PracticeService;
  beforeEach(async () => {
    service = await startService();
  });
  afterEach(() => service.close());

  const say = (headers: Record<string, string>, body: object) =>
    fetch(`${service.url}page/do`, {
      method: 'POST',
      headers: { 'content-type': 'application/json', ...headers },
      body: JSON.stringify(body),
    });
  const words = { do: 'say', as: 'U0WREN00001', channel: 'C0RETENTION', text: 'hello' };

  it('take nothing from another site’s form, nor for a person who is not there', async () => {
    expect((await say({}, words)).status).toBe(403);
    expect((await say({ 'x-practice-page': '1' }, { ...words, as: 'U0EBBLINE01' })).status).toBe(404);
    expect((await say({ 'x-practice-page': '1' }, { do: 'dance', as: 'U0WREN00001' })).status).toBe(400);
    expect(service.world.messages()).toEqual([]);
    expect((await say({ 'x-practice-page': '1' }, words)).status).toBe(200);
    expect(service.world.messages()).toHaveLength(1);
  });

  it('answer only when addressed as this machine', async () => {
    const status = (host: string) =>
      new Promise<number | undefined>((resolve, reject) => {
        request(service.url, { headers: { host } }, (response) => {
          response.resume();
          resolve(response.statusCode);
        })
          .on('error', reject)
          .end();
      });
    expect(await status('rebound.example.org')).toBe(403);
    expect(await status('localhost:1234')).not.toBe(403);
  });

  it('never run an uploaded page', async () => {
    service.as('wren').drop('retention', [{ name: 'a.html', text: '<script>1</script>' }]);
    const response = await fetch(`${service.url}page/file/${service.world.files()[0]?.id}`);
    expect(response.headers.get('content-type')).toBe('application/octet-stream');
    expect(response.headers.get('content-disposition')).toContain('attachment');
    expect((await fetch(`${service.url}assets/..%2f..%2f..%2fpackage.json`)).status).toBe(404);
  });
});

const option = (value: string) => ({ text: { type: 'plain_text' as const, text: value }, value });
const PNG = Buffer.from(
  'iVBORw0KGgoAAAANSUhEUgAAAAoAAAAKCAIAAAACUFjqAAAAEklEQVR4nGNQqb+CBzGMSmNBAPXyq72l2vO4AAAAAElFTkSuQmCC',
  'base64',
);

/** A small bot: answers a file with a picture and a button, and the button with a form. */
function answering(app: App): void {
  app.message(async ({ message, client }) => {
    if (!('files' in message) || !message.files?.length) return;
    const asked = (await client.apiCall('files.getUploadURLExternal', {
      filename: 'chart.png',
      length: PNG.length,
    })) as {
      upload_url?: string;
      file_id?: string;
    };
    await fetch(String(asked.upload_url), { method: 'POST', body: Uint8Array.from(PNG) });
    const id = String(asked.file_id);
    await client.files.completeUploadExternal({ files: [{ id }] });
    await client.files.info({ file: id });
    await client.chat.postMessage({
      channel: message.channel,
      thread_ts: message.ts,
      text: 'Churn has fallen.',
      blocks: [
        { type: 'section', text: { type: 'mrkdwn', text: '*Churn has fallen.* See `accounts.csv`.' } },
        { type: 'image', alt_text: 'It lay at 6 % and lies at 4 % now.', slack_file: { id } },
        {
          type: 'actions',
          elements: [{ type: 'button', action_id: 'mend', text: { type: 'plain_text', text: 'Mend how it was read' } }],
        },
      ],
    });
    await client.chat.postEphemeral({ channel: message.channel, user: 'U0WREN00001', text: 'Only a word to you.' });
  });
  app.action('mend', async ({ ack, body, client }) => {
    await ack();
    if (body.type !== 'block_actions') return;
    await client.views.open({
      trigger_id: body.trigger_id,
      view: {
        type: 'modal',
        callback_id: 'mending',
        title: { type: 'plain_text', text: 'How it was read' },
        submit: { type: 'plain_text', text: 'Read it again' },
        private_metadata: body.container.channel_id,
        blocks: [
          {
            type: 'input',
            block_id: 'order',
            label: { type: 'plain_text', text: 'Date order' },
            element: { type: 'static_select', action_id: 'o', options: [option('day first'), option('month first')] },
          },
          {
            type: 'input',
            block_id: 'note',
            optional: true,
            label: { type: 'plain_text', text: 'Note' },
            element: { type: 'plain_text_input', action_id: 'n' },
          },
        ],
      },
    });
  });
  app.view('mending', async ({ ack, view, client }) => {
    const order = view.state.values.order?.o?.selected_option?.value;
    if (order !== 'day first')
      return ack({ response_action: 'errors', errors: { order: 'Day 13 cannot be a month.' } });
    await ack();
    await client.chat.postMessage({
      channel: view.private_metadata,
      text: `again, ${order}, ${view.state.values.note?.n?.value}`,
    });
  });
  app.command('/ebb', async ({ ack }) => ack('what I can do'));
}

describe.skipIf(browserMissing)('the page in a browser', () => {
  let service: PracticeService;
  let browser: Browser;
  let page: Page;
  let folder: string;
  const stops: (() => Promise<void>)[] = [];
  const troubles: string[] = [];

  beforeAll(async () => {
    // `npm test` builds first. Building again here would pull the page from under another file's browser.
    if (!existsSync(new URL('../../dist/practice/page/index.html', import.meta.url))) {
      const configFile = new URL('../../src/practice/page/vite.config.ts', import.meta.url).pathname;
      await build({ configFile, logLevel: 'warn' });
    }
    folder = await mkdtemp(join(tmpdir(), 'practice-'));
    await writeFile(join(folder, 'sample.csv'), 'id,start,end\n1,2025-01-02,\n');
    browser = await launchBrowser();
  });
  afterAll(async () => {
    await browser?.close();
    if (folder) await rm(folder, { recursive: true });
  });
  beforeEach(async () => {
    troubles.length = 0;
    service = await startService({
      samples: [{ name: 'a-fall.csv', description: 'Churn fell', path: join(folder, 'sample.csv') }],
      shortcuts: [{ callbackId: 'read', name: 'Read this file' }],
    });
    stops.push(() => service.close());
    stops.push((await startHttpApp(service, answering)).stop);
    page = await browser.newPage({ viewport: { width: 360, height: 740 } });
    page.on('pageerror', (error) => troubles.push(String(error)));
    page.on('request', (r) => {
      if (!r.url().startsWith(service.url) && !r.url().startsWith('data:'))
        troubles.push(`asked elsewhere: ${r.url()}`);
    });
    await page.goto(service.url);
    await page.getByRole('log').waitFor();
  });
  afterEach(async () => {
    await page.close();
    for (const stop of stops.splice(0).reverse()) await stop();
    expect(troubles).toEqual([]);
  });

  it('a newcomer hands in a file, sees the picture and its words, mends the reading in a form, and reads the answer', async () => {
    await page
      .locator('.desk input[type=file]')
      .setInputFiles({ name: 'accounts.csv', mimeType: 'text/csv', buffer: Buffer.from('id,start\n') });
    await page.getByLabel('Write in retention').fill('@ebbline has churn moved?');
    await page.getByLabel('Write in retention').press('Enter');
    const picture = page.getByRole('log').getByRole('img', { name: 'It lay at 6 %' });
    await picture.waitFor();
    await page.waitForFunction(() => document.querySelector<HTMLImageElement>('.log img')?.naturalWidth === 10);
    expect(await page.getByRole('log').locator('strong').textContent()).toBe('Churn has fallen.');
    await page.getByText('What this picture says').click();
    await page.getByRole('log').getByText('lies at 4 % now', { exact: false }).last().waitFor();
    expect(await page.getByText('only you can see this').count()).toBe(1);

    await page.getByRole('button', { name: /Full size/ }).click();
    await page.getByRole('dialog').getByRole('img').waitFor();
    await page.keyboard.press('Escape');
    await page.getByRole('dialog').waitFor({ state: 'detached' });

    await page.getByRole('button', { name: 'Mend how it was read' }).click();
    const form = page.getByRole('dialog', { name: 'How it was read' });
    await form.getByRole('button', { name: 'Read it again' }).click();
    await form.getByText('This is needed').waitFor();
    expect(await form.getByLabel('Date order').evaluate((e) => e === document.activeElement)).toBe(true);
    expect(await form.getByLabel('Date order').getAttribute('aria-invalid')).toBe('true');
    await form.getByLabel('Date order').selectOption('month first');
    await form.getByRole('button', { name: 'Read it again' }).click();
    await form.getByText('Day 13 cannot be a month.').waitFor();
    await form.getByLabel('Date order').selectOption('day first');
    await form.getByLabel('Note').fill('thanks');
    await form.getByRole('button', { name: 'Read it again' }).click();
    await form.waitFor({ state: 'detached' });
    await page.getByText('again, day first, thanks').waitFor();
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(360);
  });

  it('what is only for one person disappears when someone else looks', async () => {
    service.as('odell').say('retention', 'for all');
    await page.getByLabel('Write in retention').fill('/ebb help');
    await page.getByLabel('Write in retention').press('Enter');
    await page.getByText('what I can do').waitFor();
    await page.getByLabel('You are').selectOption({ label: 'Tamsin, finance' });
    await page.getByText('for all').waitFor();
    expect(await page.getByText('what I can do').count()).toBe(0);
  });

  it('hands in a sample, takes a dropped file, writes under an entry, and brings the bot into a channel', async () => {
    await page.getByRole('button', { name: 'a-fall.csv' }).click();
    await page.getByText('Churn has fallen.').waitFor();
    expect(service.world.messages('retention')[0]?.files?.[0]?.name).toBe('sample.csv');

    const data = await page.evaluateHandle(() => {
      const transfer = new DataTransfer();
      transfer.items.add(new File(['id\n'], 'dropped.csv'));
      return transfer;
    });
    await page.dispatchEvent('.sheet', 'drop', { dataTransfer: data });
    await page.getByRole('button', { name: 'Leave out dropped.csv' }).waitFor();
    await page.getByRole('button', { name: 'Send' }).click();
    await service.waitFor((w) => w.messages('retention').find((m) => m.files?.[0]?.name === 'dropped.csv'));

    await page.getByRole('button', { name: 'write under this' }).first().click();
    await page.getByLabel('Write under what Wren wrote').fill('a note');
    await page.getByLabel('Write under what Wren wrote').press('Enter');
    const note = await service.waitFor((w) => w.messages('retention').find((m) => m.text === 'a note'));
    expect(note.thread_ts).toBe(service.world.messages('retention')[0]?.ts);

    await page.getByRole('button', { name: 'launches' }).click();
    await page.getByRole('button', { name: 'Bring ebbline in' }).click();
    await service.waitFor((w) => w.channel('launches').members.has('U0EBBLINE01'));
    await page.getByRole('button', { name: 'Bring ebbline in' }).waitFor({ state: 'detached' });
  });

  it('says what to try until the person has written something, whatever was handed in for them', async () => {
    const root = service.as('wren').drop('retention', [{ name: 'a.csv', text: 'id,start' }]);
    await page.getByText('Churn has fallen.').waitFor();
    for (let i = 0; i < 30; i++) service.as('odell').say('retention', `note ${i}`, { threadTs: root.ts });
    await page.reload();
    await page.getByText('note 29').waitFor();
    const example = page.getByRole('button', { name: '@ebbline has churn moved?' });
    expect(await example.isVisible()).toBe(true);
    expect(await page.evaluate(() => window.scrollY)).toBe(0);
    await example.click();
    await page.getByLabel('Write in retention').press('Enter');
    await example.waitFor({ state: 'detached' });
  });

  it('begins where the newest thread does, when an older one stands above it', async () => {
    service.as('tamsin').say('retention', 'an older entry');
    for (let i = 0; i < 30; i++) service.as('tamsin').say('retention', `entry ${i}`);
    const root = service.as('odell').say('retention', 'the newest thread');
    for (let i = 0; i < 30; i++) service.as('tamsin').say('retention', `note ${i}`, { threadTs: root.ts });
    await page.reload();
    const top = page.getByText('the newest thread');
    await top.waitFor();
    await page.waitForFunction(() => window.scrollY > 0);
    const box = await top.boundingBox();
    expect(box?.y).toBeGreaterThanOrEqual(0);
    expect(box?.y).toBeLessThan(150);
  });

  it('offers to read a file only where there is one, and the bot’s page only when there is something on it', async () => {
    service.as('odell').say('retention', 'no file here');
    await page.getByText('no file here').waitFor();
    expect(await page.getByRole('button', { name: 'read this file' }).count()).toBe(0);
    expect(await page.getByRole('button', { name: 'ebbline’s page' }).count()).toBe(0);
    service.as('odell').drop('retention', [{ name: 'a.csv', text: 'id,start' }]);
    await page.getByRole('button', { name: 'read this file' }).waitFor();
    expect(await page.getByRole('button', { name: 'read this file' }).count()).toBe(1);
    const view = { type: 'home', blocks: [{ type: 'section', text: { type: 'mrkdwn', text: 'All is calm.' } }] };
    await call(service, 'views.publish', { user_id: 'U0WREN00001', view });
    await page.getByRole('button', { name: 'ebbline’s page' }).click();
    await page.getByText('All is calm.').waitFor();
  });

  it('keeps a form’s buttons in reach in a low window, and does not bring it back on the next visit', async () => {
    service.as('wren').drop('retention', [{ name: 'a.csv', text: 'id,start' }]);
    await page.getByRole('button', { name: 'Mend how it was read' }).click();
    await page.setViewportSize({ width: 360, height: 300 });
    const form = page.getByRole('dialog', { name: 'How it was read' });
    const hand = await form.getByRole('button', { name: 'Read it again' }).boundingBox();
    expect((hand?.y ?? 999) + (hand?.height ?? 999)).toBeLessThanOrEqual(300);
    expect(await form.evaluate((e) => e.scrollHeight > e.clientHeight)).toBe(true);

    const order = form.getByLabel('Date order');
    expect(await order.locator('option').first().textContent()).toBe('Choose one');
    await order.selectOption('day first');
    await page.waitForFunction(() => document.querySelectorAll('dialog option').length === 2);
    expect(await order.locator('option').allTextContents()).toEqual(['day first', 'month first']);

    await page.reload();
    await page.getByRole('log').waitFor();
    await service.waitFor((w) => w.modal('wren') === undefined);
    expect(await page.getByRole('dialog').count()).toBe(0);
  });

  it('names the time zone of whoever is looking', async () => {
    expect(await page.getByText('times in Europe/London').count()).toBe(1);
    await page.getByLabel('You are').selectOption({ label: 'Tamsin, finance' });
    await page.getByText('times in America/New_York').waitFor();
  });
});
