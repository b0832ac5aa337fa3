import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join } from 'node:path';
import type { AxeResults } from 'axe-core';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, onTestFinished, test } from 'vitest';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { openBrowser, openPage, startDemo, type Demo } from './scene.ts';

const AXE = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

const folder = mkdtempSync(join(tmpdir(), 'yieldward-axe-'));
let demo: Demo;
let browser: Browser;
beforeAll(async () => {
  [demo, browser] = await Promise.all([startDemo(join(folder, 'data')), openBrowser()]);
}, 180_000);
afterAll(async () => {
  await browser.close();
  await demo.end();
  rmSync(folder, { recursive: true, force: true, maxRetries: 3 });
});

/** What axe-core finds against WCAG 2.2 A and AA that it calls serious or critical. */
const seriousFaults = async (page: Page): Promise<string[]> => {
  await page.evaluate(AXE);
  const results = await page.evaluate(() =>
    (window as unknown as { axe: { run(): Promise<AxeResults> } }).axe.run(),
  );
  return results.violations
    .filter(({ impact }) => impact === 'serious' || impact === 'critical')
    .map(({ id, nodes }) => `${id}: ${nodes.map(({ target }) => target.join(' ')).join(', ')}`);
};

const PLACES = [
  ...['#/watch', '#/alarms', '#/set-up', '#/set-up/checks', '#/watch?open=B1-mid-bottom-left'],
];
const SCREENS = [
  { viewport: { width: 1440, height: 900 }, colorScheme: 'light' },
  { viewport: { width: 390, height: 844 }, colorScheme: 'dark' },
  { viewport: { width: 1440, height: 900 }, colorScheme: 'dark' },
  { viewport: { width: 390, height: 844 }, colorScheme: 'light' },
] as const;

test.each(PLACES.flatMap((place) => SCREENS.map((screen) => [place, screen] as const)))(
  '%s: axe finds nothing serious, %j',
  async (place, screen) => {
    const page = await openPage(browser, `${demo.url}/${place}`, screen);
    onTestFinished(() => page.context().close());
    if (place.includes('open=')) await page.getByRole('dialog').waitFor();
    expect(await seriousFaults(page)).toEqual([]);
  },
  180_000,
);
