/** The whole product as a newcomer meets it: the page in a real browser, the real bot behind it. */
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { browserMissing, launchBrowser } from '../support/browser.ts';
import { type Bot, FIXTURES, SAMPLE, startBot } from './support.ts';

const exported = (name: string): string => join(FIXTURES, 'exports', name);

describe.skipIf(browserMissing)('the running bot in a browser', () => {
  let bot: Bot;
  let browser: Browser;
  let page: Page;
  beforeAll(async () => {
    [bot, browser] = await Promise.all([startBot(), launchBrowser()]);
    page = await browser.newPage({ viewport: { width: 1100, height: 900 } });
    page.setDefaultTimeout(30_000);
    await page.goto(bot.service.url);
    await page.getByRole('log').waitFor();
  });
  afterAll(async () => {
    await browser?.close();
    await bot?.stop();
  });

  const handIn = async (file: string): Promise<void> => {
    await page.locator('.desk input[type=file]').setInputFiles(file);
    await page.getByRole('button', { name: 'Send' }).click();
  };
  const log = () => page.getByRole('log');

  it('a file dropped in is read and answered, with a picture that loaded and says in words what it shows', async () => {
    await handIn(SAMPLE);
    await log().getByText('Read: marrowby-recipe-cards.csv').waitFor();
    await log()
      .getByText(/^Churn has fallen: about/)
      .first()
      .waitFor();
    const picture = log().getByRole('img', { name: /^Churn has fallen/ });
    await picture.waitFor();
    await page.waitForFunction(() => {
      const image = [...document.querySelectorAll<HTMLImageElement>('.log img')].at(-1);
      return image?.complete === true && image.naturalWidth === 1080;
    });
    expect((await picture.getAttribute('alt'))!.length).toBeGreaterThan(100);
  });

  it('dates that read both ways are asked about, answered with a select and a button, and mended later in the form', async () => {
    await handIn(exported('marrowby-ambiguous-dates.csv'));
    await log()
      .getByText(/more than one way/)
      .first()
      .waitFor();
    await log().getByRole('combobox').last().selectOption({ value: 'mdy' });
    await log()
      .getByRole('button', { name: /Read it/ })
      .last()
      .click();
    await log().getByText('Read again: marrowby-ambiguous-dates.csv').waitFor();
    await log()
      .getByText(/month first/i)
      .last()
      .waitFor();

    await log().getByRole('button', { name: 'Correct this' }).last().click();
    const form = page.getByRole('dialog');
    await form.getByLabel('Order of the dates').selectOption({ label: 'Day first: 30/06/2025' });
    await form.getByRole('button', { name: /Read/ }).click();
    await form.waitFor({ state: 'detached' });
    await log()
      .getByText(/Dates read day first/)
      .last()
      .waitFor();
    await bot.store.drained(30_000);
  });

  it('asked again in words, it answers from what was handed in last', async () => {
    await page.getByLabel('Write in retention').fill('@ebbline has churn moved at 3 months?');
    await page.getByLabel('Write in retention').press('Enter');
    await log()
      .getByText(/I understood: has churn at 3 months moved/)
      .last()
      .waitFor();
    await bot.store.drained(30_000);
    const asked = bot.service.world.messages('retention').findLast((message) => message.text.includes('at 3 months?'))!;
    const reply = bot.service.world.thread('retention', asked.ts).at(-1)!;
    expect(reply.text).toMatch(/Churn is steady/);
  });
});
