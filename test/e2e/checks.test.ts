import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, expect, onTestFinished, test } from 'vitest';
import { openBrowser, openPage, startDemo, type Demo } from './scene.ts';

const folder = mkdtempSync(join(tmpdir(), 'yieldward-checks-'));
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

test('a technician checks all channels, enters, shunts, is refused a zero under load, reloads and goes on', async () => {
  const page = await openPage(browser, `${demo.url}/#/set-up`);
  onTestFinished(() => page.context().close());
  await page.getByRole('link', { name: 'Channel checks and zeros' }).click();

  // Without a name nothing is put on record.
  await page.getByRole('button', { name: 'Check all 30' }).click();
  await page.getByText('Expected 1 to 500 characters; came 0.').waitFor();
  await page.getByLabel('Your name').fill('Instrumentation technician');
  // By keyboard alone.
  await page.getByRole('button', { name: 'Check all 30' }).focus();
  await page.keyboard.press('Enter');
  await page.getByText('Done, and on record.').waitFor();

  const entry = page.locator('details', {
    has: page.getByText('B1-mid-bottom-right', { exact: true }),
  });
  const row = (name: string) => entry.getByRole('row', { name: new RegExp(`^${name}`) });
  await entry.locator('summary').focus();
  await page.keyboard.press('Enter');
  await row('Noise').getByText('µε').first().waitFor();
  await row('Insulation').getByText('Not judged').waitFor();

  // −Rg/(GF·(Rg + Ri)) of 350 Ω, GF 2.11 and 1 MΩ: parallel resistors, computed.
  await entry.getByLabel('Measured from gauge to ground, MΩ').fill('1');
  await entry.getByRole('button', { name: 'Judge and put on record' }).first().click();
  await row('Insulation').getByText('Fail', { exact: true }).waitFor();
  await row('Insulation').getByText('-166 µε').waitFor();

  await entry.getByLabel('Its resistance, Ω').fill('350000');
  await entry.getByRole('button', { name: 'Have it laid and read' }).click();
  await entry.getByText('The shunt is on: reading').waitFor();
  // The same resistor across the same gauge, 350 kΩ; the load may move meanwhile.
  await row('Shunt check').getByText('-473 µε are due').waitFor({ timeout: 60_000 });

  await page.reload();
  await entry.locator('summary').click();
  await row('Insulation').getByText('Fail', { exact: true }).waitFor();
  await row('Insulation').getByText('Instrumentation technician').waitFor();
  await row('Shunt check').getByText('-473 µε are due').waitFor();
  expect(await page.getByLabel('Your name').inputValue()).toBe('Instrumentation technician');

  const zero = page.getByRole('region', { name: 'Zero' });
  await zero.getByRole('checkbox', { name: 'B1-mid-top-left' }).check();
  await zero.getByLabel('Reason').fill('Before the first load step');
  const take = zero.getByRole('button', { name: 'Take the zero of 1 channel' });
  await take.click();
  await zero.getByText('Nobody may be under the load').waitFor();
  await zero.getByLabel('Nobody is under the load.').check();
  await zero.getByLabel('The engineer in charge has declared').check();
  await take.click();
  await zero.getByText(/at most 2 kN at hook-load/).waitFor();

  await page.emulateMedia({ media: 'print' });
  expect(await page.getByRole('button', { name: 'Check all 30' }).isVisible()).toBe(false);
  expect(await page.locator('header').isVisible()).toBe(false);
  expect(await page.getByText('SIMULATED').first().isVisible()).toBe(true);
}, 180_000);
