import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { AxeResults } from 'axe-core';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, onTestFinished, test, vi } from 'vitest';
import type { History, SetUpAnswer } from '../../shared/protocol/http.ts';
import { openBrowser, openPage, startDemo, type Demo } from './scene.ts';

const AXE = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

const folder = mkdtempSync(join(tmpdir(), 'yieldward-set-up-'));
let demo: Demo;
let browser: Browser;
beforeAll(async () => {
  [demo, browser] = await Promise.all([startDemo(join(folder, 'data')), openBrowser()]);
}, 60_000);
afterAll(async () => {
  await browser.close();
  await demo.end();
  rmSync(folder, { recursive: true, force: true, maxRetries: 3 });
});

const CHANNEL = 'B1-mid-bottom-left';
const PLACE = 'structures/0/members/0/stations/2/channels/2';

const open = async (path: string, options = {}): Promise<Page> => {
  const page = await openPage(browser, `${demo.url}/#/set-up/${path}`, options);
  onTestFinished(() => page.context().close());
  return page;
};

const ask = async <T>(path: string): Promise<T> =>
  (await (await fetch(`${demo.url}/api/${path}`)).json()) as T;

/** Mean of a stretch of the past, m/m. */
const meanOver = async (from: number, to: number): Promise<number> => {
  const query = `channel=${CHANNEL}&from=${from}&to=${to}&points=1`;
  const { mean } = await ask<History>(`history?${query}`);
  return mean[0] ?? NaN;
};

/** Some seconds of stored samples, all of them in the past. */
const storedStretch = (): Promise<{ from: number; to: number }> =>
  vi.waitFor(
    async () => {
      const now = Date.now() / 1e3;
      const query = `channel=${CHANNEL}&from=${now - 60}&to=${now}&points=60`;
      const { t } = await ask<History>(`history?${query}`);
      const [from = NaN, to = NaN] = [t[0], t.at(-1)];
      expect(to - from).toBeGreaterThan(3);
      return { from, to };
    },
    { timeout: 20_000, interval: 250 },
  );

const typeFactor = async (page: Page, factor: string) => {
  await page.getByRole('button', { name: `Correct ${CHANNEL}` }).click();
  await page.getByLabel('Gauge factor', { exact: true }).fill(factor);
};

test('a wrong gauge factor is asked about, put right, previewed, saved; the second to save is told, and loses nothing', async () => {
  const second = await open(`part/${PLACE}`);
  await second.getByLabel('Name', { exact: true }).fill('Bottom flange, left tip');

  const page = await open(`part/${PLACE}`);
  const { from, to } = await storedStretch();
  const before = await meanOver(from, to);
  await typeFactor(page, '21.1');
  await page.getByText(/Foil gauges have a gauge factor of 1.8 to 2.3; this is 21.1/).waitFor();
  await page.reload();
  expect(await page.getByLabel('Gauge factor', { exact: true }).inputValue()).toBe('21.1');
  await page.getByLabel('Gauge factor', { exact: true }).fill('2.2');
  await page.getByText(/Foil gauges/).waitFor({ state: 'detached' });
  await page
    .getByRole('img', { name: /^Quarter bridge\. Round the ring arm 1 is a gauge/ })
    .waitFor();

  await page.getByRole('link', { name: 'Preview and save …' }).click();
  await page.getByLabel('Your name').fill('First engineer');
  await page.getByLabel('Reason').fill('Factor was read off another packet');
  await page.getByRole('button', { name: 'Check and preview' }).click();
  const row = page.getByRole('row', { name: /B1 midspan, bottom flange, left tip/ });
  await row.waitFor();
  expect(await row.getByRole('cell').count()).toBe(5);
  await page.getByRole('button', { name: 'Save', exact: true }).click();
  await page.getByRole('heading', { name: 'In force now' }).waitFor();

  // ε = d/GF: the strain of the same raw figures falls as the factor rises, but for the zero's
  // share in the bridge's sensitivity, which is the same for both (ASTM E251).
  expect((await meanOver(from, to)) / before).toBeCloseTo(2.11 / 2.2, 6);

  await second.getByRole('heading', { name: 'Somebody else has changed the set-up' }).waitFor();
  await second.getByRole('link', { name: 'Preview and save', exact: true }).click();
  await second.getByLabel('Your name').fill('Second engineer');
  await second.getByLabel('Reason').fill('A shorter name');
  await second.getByRole('button', { name: /^Save/ }).click();
  await second.getByText(/Not saved: somebody else has changed the set-up meanwhile/).waitFor();
  await second.getByText('First engineer').first().waitFor();
  await second
    .getByText(/Factor was read off another packet/)
    .first()
    .waitFor();
  await second.getByRole('button', { name: 'Carry my changes over to theirs' }).click();
  await second.getByRole('button', { name: /^Save/ }).click();
  await second.getByRole('heading', { name: 'In force now' }).waitFor();

  const { document, author } = await ask<SetUpAnswer>('set-up');
  const text = JSON.stringify(document);
  expect(author).toBe('Second engineer');
  for (const part of ['Bottom flange, left tip', `"corrects":"${CHANNEL}-cal1"`]) {
    expect(text).toContain(part);
  }
}, 120_000);

test('the server itself refuses the second of two that save at once', async () => {
  const page = await open(`part/${PLACE}`);
  await page.getByLabel('Name', { exact: true }).fill('Mine');
  const stands = await ask<SetUpAnswer>('set-up');
  // Nothing of the other's change reaches this page before its own request does.
  await page.route('**/api/set-up', async (route) => {
    if (route.request().method() !== 'PUT') return route.continue();
    await fetch(`${demo.url}/api/set-up`, {
      method: 'PUT',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify({
        ...{ document: stands.document, basedOn: stands.revision },
        ...{ author: 'Third engineer', reason: 'a moment before' },
      }),
    });
    await route.continue();
  });
  await page.goto(`${demo.url}/#/set-up/save`);
  await page.getByLabel('Your name').fill('Fourth engineer');
  await page.getByLabel('Reason').fill('a moment after');
  await page.getByRole('button', { name: /^Save/ }).click();
  await page.getByRole('heading', { name: 'Somebody else has changed the set-up' }).waitFor();
  await page.getByText('Third engineer').first().waitFor();
  await page.getByText('→ Mine').first().waitFor();
}, 60_000);

test('the site file goes out and comes in unchanged; a faulty one is told by place', async () => {
  const page = await open('files');
  const download = page.waitForEvent('download');
  await page.getByRole('button', { name: 'Export the site file' }).click();
  const path = await (await download).path();
  const { document } = await ask<SetUpAnswer>('set-up');
  expect(readFileSync(path, 'utf8')).toBe(`${JSON.stringify(document, null, 2)}\n`);
  const choose = (text: string) =>
    page.getByLabel('Import a site file').setInputFiles({
      name: 'site.json',
      mimeType: 'application/json',
      buffer: Buffer.from(text),
    });
  await choose(readFileSync(path, 'utf8'));
  await page.getByText('Taken into the draft. No fault.').waitFor();
  await page.getByText('0 changes').waitFor();
  await choose(readFileSync(path, 'utf8').replace('"gauge_factor": 2.08', '"gauge_factor": "two"'));
  await page.getByText('Expected a number; came "two".').waitFor();
  await choose('{ "a": ');
  await page.getByText(/expected JSON \(RFC 8259\)/).waitFor();
}, 60_000);

describe('axe-core finds nothing serious', () => {
  const PLACES = [
    ...['part', `part/${PLACE}`, `part/${PLACE}/calibration/0`, 'part/structures/0/members/0'],
    ...['part/nodes/0', 'save', 'files', 'revisions'],
  ];
  const SCREENS = [
    { viewport: { width: 1440, height: 900 }, colorScheme: 'light' },
    { viewport: { width: 390, height: 844 }, colorScheme: 'dark' },
  ] as const;
  const seriousFaults = async (page: Page): Promise<string[]> => {
    await page.evaluate(AXE);
    const results = await page.evaluate(() =>
      (window as unknown as { axe: { run(): Promise<AxeResults> } }).axe.run(),
    );
    return results.violations
      .filter(({ impact }) => impact === 'serious' || impact === 'critical')
      .map(({ id, nodes }) => `${id}: ${nodes.map(({ target }) => target.join(' ')).join(', ')}`);
  };

  test.each(SCREENS)(
    'on a screen of %j',
    async (screen) => {
      const page = await open(`part/${PLACE}`, screen);
      await typeFactor(page, '21.1');
      for (const place of [`part/${PLACE}/calibration/2`, ...PLACES]) {
        await page.goto(`${demo.url}/#/set-up/${place}`);
        await page.locator('main h2').first().waitFor();
        expect([place, await seriousFaults(page)]).toEqual([place, []]);
      }
    },
    60_000,
  );
});
