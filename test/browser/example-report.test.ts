import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openBrowser, skipped } from './chromium.js';

const root = fileURLToPath(new URL('../../', import.meta.url));
const axeSource = createRequire(import.meta.url).resolve('axe-core/axe.min.js');

/** What the page said and asked for while it was opened. */
interface Visit {
  readonly page: Page;
  readonly messages: readonly string[];
  readonly requests: readonly string[];
}

describe.skipIf(skipped !== undefined)(`the example's report in Chromium ${skipped ?? ''}`, () => {
  let folder = '';
  let browser: Browser;

  beforeAll(async () => {
    folder = mkdtempSync(join(tmpdir(), 'sigmafolio-browser-'));
    execFileSync(process.execPath, [join(root, 'dist/cli/main.js'), 'build', join(root, 'example-runs/lensing'), '--out', join(folder, 'report')]);
    browser = await openBrowser();
  });

  afterAll(async () => {
    await browser.close();
    rmSync(folder, { recursive: true, force: true });
  });

  async function visit(options: Parameters<Browser['newPage']>[0] = {}): Promise<Visit> {
    const page = await browser.newPage(options);
    const messages: string[] = [];
    const requests: string[] = [];
    page.on('console', (message) => messages.push(message.text()));
    page.on('pageerror', (error) => messages.push(error.message));
    page.on('request', (request) => requests.push(request.url()));
    await page.goto(pathToFileURL(join(folder, 'report/report.html')).href);
    return { page, messages, requests: requests.slice(1) };
  }

  it('says nothing on the console and asks for nothing but itself', async () => {
    const { page, messages, requests } = await visit();
    await page.screenshot({ path: join(folder, 'first-screen.png') });
    expect(messages).toEqual([]);
    expect(requests).toEqual([]);
    await page.close();
  });

  it('does not scroll sideways on a phone', async () => {
    const { page } = await visit({ viewport: { width: 390, height: 844 } });
    const [content, window] = await page.evaluate('[document.documentElement.scrollWidth, innerWidth]').then((x) => x as [number, number]);
    expect(content).toBeLessThanOrEqual(window);
    await page.close();
  });

  it.each(['light', 'dark'] as const)('passes the accessibility rules of WCAG 2.2 AA in the %s scheme', async (colorScheme) => {
    const { page } = await visit({ colorScheme, bypassCSP: true });
    await page.addScriptTag({ path: axeSource });
    const violations = await page.evaluate(
      `axe.run({ runOnly: ['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa', 'best-practice'] }).then((found) =>
        found.violations.map((one) => one.id + ': ' + one.nodes.slice(0, 3).map((node) => node.target.join(' ')).join(', ')))`,
    );
    expect(violations).toEqual([]);
    await page.close();
  });

  it('prints to A4', async () => {
    const { page } = await visit();
    const pdf = await page.pdf({ format: 'A4', printBackground: true });
    expect(pdf.length).toBeGreaterThan(10_000);
    await page.close();
  });
});
