import { existsSync } from 'node:fs';
import type { Browser } from 'playwright-core';
import { chromium } from 'playwright-core';

const executablePath = '/usr/bin/chromium';

/** Why the tests in a real browser are skipped; undefined where there is one, and in CI, where they must run. */
export const skipped: string | undefined =
  existsSync(executablePath) || process.env.CI !== undefined ? undefined : `skipped: no Chromium at ${executablePath}`;

/** A headless browser that asks nothing of the network by itself. */
export async function openBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath,
    args: [
      '--headless',
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
