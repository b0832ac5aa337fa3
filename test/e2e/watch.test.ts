import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, onTestFinished, test } from 'vitest';
import type { ChannelAnswer, TallyAnswer } from '../../shared/protocol/http.ts';
import { openBrowser, openPage, startDemo, type Demo } from './scene.ts';

const folder = mkdtempSync(join(tmpdir(), 'yieldward-e2e-'));
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

const open = async (path = '', options = {}): Promise<Page> => {
  const page = await openPage(browser, `${demo.url}/${path}`, options);
  onTestFinished(() => page.context().close());
  return page;
};

const rowOf = (page: Page, name: string) =>
  page.locator('tr', { has: page.getByText(name, { exact: true }) });

test('the page shows the simulated proof load, by member, and marks it on every page', async () => {
  const page = await open();
  await page.getByText('of safe working load').first().waitFor();
  for (const member of ['Main beam 1', 'Main beam 2', 'Leg 1']) {
    await page.getByText(member).first().waitFor();
  }
  for (const name of ['Alarms', 'Set-up', 'Watch']) {
    await page.getByRole('link', { name: new RegExp(`^${name}`) }).click();
    await page.getByText('SIMULATED').first().waitFor();
  }
}, 180_000);

describe('limits through the form', () => {
  test('one at yield is refused with the reason; one lowered raises the alarm', async () => {
    const page = await open('#/watch?open=B1-mid-bottom-left');
    const dialog = page.getByRole('dialog');
    const stop = dialog.getByRole('group', { name: 'Stop limit' });
    const caution = dialog.getByRole('group', { name: 'Caution limit' });
    await caution.getByRole('checkbox').uncheck();
    await stop.getByRole('combobox').selectOption('share');
    const [value, deadband, onDelay] = ['Limit', 'Deadband', 'On-delay'].map((label) =>
      stop.getByLabel(new RegExp(`^${label},`)),
    );
    if (!value || !deadband || !onDelay) throw new Error('no fields');
    await value.fill('110');
    await dialog.getByLabel('Your name').fill('Test engineer');
    await dialog.getByLabel('Reason').fill('to see an alarm');
    await dialog.getByRole('button', { name: 'Put in force' }).click();
    await dialog.getByText('below yield').first().waitFor();

    await value.fill('0.01');
    await deadband.fill('0.001');
    await onDelay.fill('0');
    await dialog.getByRole('button', { name: 'Put in force' }).click();
    await dialog.getByText('In force now.').waitFor();
    await dialog.getByRole('button', { name: 'Close' }).first().click();
    await page.getByText('No alarm').first().waitFor({ state: 'detached' });
    await page.getByRole('link', { name: 'Alarms (1)' }).click();
    await page.getByText('B1 midspan, bottom flange, left tip').first().waitFor();
    await page
      .getByText(/stop limit/i)
      .first()
      .waitFor();
  }, 180_000);
});

describe('a node that dies', () => {
  test('its channels go stale in words, what comes of them too, and it returns', async () => {
    const page = await open();
    const name = 'B1 midspan, bottom flange, left tip';
    const row = rowOf(page, name);
    await row.getByText('good').first().waitFor();
    process.kill(demo.nodePid('n1'), 'SIGKILL');
    await row.getByText('stale').first().waitFor({ timeout: 60_000 });
    await rowOf(page, 'B1 at midspan, bending moment My').getByText('stale').first().waitFor();
    demo.startNode('n1');
    await row.getByText('good').first().waitFor({ timeout: 60_000 });
  }, 180_000);
});

test('one line of mosquitto_pub makes a value, stored and shown', async () => {
  const page = await open();
  const pack = JSON.stringify([{ n: 'air', u: 'Cel', v: -7.25 }]);
  const topic = 'yieldward/1/yard/senml/json';
  const args = ['-p', String(demo.mqttPort), '-q', '1', '-t', topic, '-m'];
  await promisify(execFile)('mosquitto_pub', [...args, pack]);
  await page
    .getByText(/−7\.[23]/)
    .first()
    .waitFor();
  const wrong = JSON.stringify([{ n: 'air', u: 'K', v: 291.5 }]);
  await promisify(execFile)('mosquitto_pub', [...args, wrong]);
  const { nodes } = (await (await fetch(`${demo.url}/api/tally`)).json()) as TallyAnswer;
  expect(nodes.find(({ node }) => node === 'yard')).toMatchObject({
    refused: 1,
    refusals: [{ field: '[0].u', came: '"K"' }],
  });
  await page.getByRole('link', { name: /^Set-up/ }).click();
  await page
    .getByText(/1 refused|refused 1/)
    .first()
    .waitFor();
}, 180_000);

test('US customary units are those of the trade', async () => {
  const page = await open('#/set-up');
  await page.getByLabel(/US customary/).check();
  await page.getByRole('link', { name: /^Watch/ }).click();
  for (const unit of ['kip', 'ksi', '°F']) await page.getByText(unit).first().waitFor();
  const channel = (await (
    await fetch(`${demo.url}/api/channels/hook-load`)
  ).json()) as ChannelAnswer;
  expect(channel.channel.unit).toBe('N');
}, 180_000);

test('pages, a channel and its limits are reached by keyboard alone, and left again', async () => {
  const page = await open();
  const focused = () =>
    page.evaluate(() => {
      const { tagName = '', textContent = '' } = document.activeElement ?? {};
      return `${tagName} ${textContent?.trim() ?? ''}`;
    });
  const tabTo = async (text: RegExp) => {
    for (let i = 0; i < 400; i++) {
      await page.keyboard.press('Tab');
      if (text.test(await focused())) return;
    }
    throw new Error(`nothing like ${String(text)} takes the focus`);
  };
  await tabTo(/^A Alarms/);
  await page.keyboard.press('Enter');
  await page.waitForURL(/#\/alarms/);
  await tabTo(/^A Watch/);
  await page.keyboard.press('Enter');
  await page.waitForURL(/#\/watch/);
  await tabTo(/^A B1 midspan, bottom flange, left tip/);
  await page.keyboard.press('Enter');
  await page.getByRole('dialog').waitFor();
  await tabTo(/^BUTTON Put in force$/);
  await page.keyboard.press('Escape');
  await page.getByRole('dialog').waitFor({ state: 'detached' });
}, 180_000);
