import { existsSync } from 'node:fs';
import { type Browser, chromium } from 'playwright-core';

const CHROMIUM = '/usr/bin/chromium';

/** True where there is no browser: such tests are skipped with this visible reason on a laptop, and fail in CI, which installs one. */
export const browserMissing = !existsSync(CHROMIUM);
if (browserMissing && process.env['CI'])
  throw new Error(`the browser tests need ${CHROMIUM}: apt-get install -y chromium`);
if (browserMissing) console.warn(`browser tests are skipped: there is no ${CHROMIUM} (apt-get install -y chromium)`);

/** A browser that stays on this machine: it asks nothing of anybody in the background. */
export function launchBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: CHROMIUM,
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}
