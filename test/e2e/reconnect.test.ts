import { join } from 'node:path';
import { expect, onTestFinished, test } from 'vitest';
import type { History } from '../../shared/protocol/http.ts';
import { endProcess, freePort, temporaryFolder } from '../helpers/process.ts';
import { openBrowser, openPage, startDemo } from './scene.ts';

test('a page that loses its server says so, and shows what it missed when it is back', async () => {
  const [data, port, mqttPort] = [
    join(temporaryFolder(), 'data'),
    await freePort(),
    await freePort(),
  ];
  const first = await startDemo(data, port, mqttPort);
  onTestFinished(() => first.end());
  const browser = await openBrowser();
  onTestFinished(() => browser.close());
  const page = await openPage(browser, first.url);
  await page.getByText('Live', { exact: true }).first().waitFor();
  const asked: string[] = [];
  page.on('request', (request) => asked.push(request.url()));
  await endProcess(first.server, 'SIGKILL');
  await page.getByText('Live', { exact: true }).first().waitFor({ state: 'detached' });
  await page
    .getByText(/not live|connection lost/i)
    .first()
    .waitFor();
  // What is not known must not look like rest.
  await page.getByText('Alarms not known now').first().waitFor();
  const lost = Date.now() / 1e3;
  const second = await startDemo(data, port, mqttPort);
  onTestFinished(() => second.end());
  await page.getByText('Live', { exact: true }).first().waitFor({ timeout: 60_000 });
  await expect
    .poll(() => asked.filter((url) => url.includes('/api/history?')).length, { timeout: 60_000 })
    .toBeGreaterThan(0);
  const windows = asked
    .filter((url) => url.includes('/api/history?'))
    .map((url) => new URL(url).searchParams);
  expect(windows.some((query) => Number(query.get('from')) <= lost)).toBe(true);
  const query = `channel=hook-load&from=${lost - 20}&to=${Date.now() / 1e3}&points=50`;
  const history = (await (await fetch(`${second.url}/api/history?${query}`)).json()) as History;
  expect(history.t.length).toBeGreaterThan(1);
}, 180_000);
