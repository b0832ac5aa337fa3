import { execFile } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { chromium } from 'playwright-core';
import { expect, onTestFinished, test } from 'vitest';
import type { ChannelAnswer, TallyAnswer } from '../../shared/protocol/http.ts';
import { printed, startProcess, temporaryFolder } from '../helpers/process.ts';

const MAIN = fileURLToPath(new URL('../../dist/server/main.js', import.meta.url));
const BROWSER = [
  ...['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run'],
  ...['--disable-background-networking', '--disable-component-update', '--disable-sync'],
];

/** The demo as `npm start` runs it, on free ports. */
const startDemo = async () => {
  const server = startProcess(process.execPath, [
    ...[MAIN, '--data', temporaryFolder(), '--port', '0', '--mqtt-port', '0'],
  ]);
  const [, port = '', url = ''] = await printed(
    server,
    /mqtt:\/\/127\.0\.0\.1:(\d+)[\s\S]*Ready: (http:\S+)/,
  );
  return { port, url };
};

const openPage = async (url: string) => {
  const browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: BROWSER });
  onTestFinished(() => browser.close());
  const page = await browser.newPage();
  await page.goto(url);
  return page;
};

test('the page shows the simulated proof load, and a limit lowered by hand raises an alarm', async () => {
  const { url } = await startDemo();
  const page = await openPage(url);
  await page.getByText('SIMULATED').first().waitFor();
  await page.getByText('No alarm').first().waitFor();
  await page.getByText('of safe working load').first().waitFor();
  const limit = { basis: 'strain', value: 1e-9, deadband: 0, onDelay: 0 };
  const answer = await fetch(`${url}/api/channels/B1-mid-bottom-left/limits`, {
    method: 'PUT',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify({
      limits: [{ ...limit, level: 'stop' }],
      author: 'Test engineer',
      reason: 'to see an alarm',
    }),
  });
  expect(answer.status).toBe(200);
  await page.getByText('No alarm').first().waitFor({ state: 'detached' });
}, 60_000);

test('one line of mosquitto_pub makes a value, stored and shown by the API', async () => {
  const { url, port } = await startDemo();
  const pack = JSON.stringify([{ n: 'air', u: 'Cel', v: 18.4 }]);
  const topic = 'yieldward/1/yard/senml/json';
  await promisify(execFile)('mosquitto_pub', ['-p', port, '-q', '1', '-t', topic, '-m', pack]);
  const channel = (await (await fetch(`${url}/api/channels/air`)).json()) as ChannelAnswer;
  expect(channel.channel.current).toMatchObject({ value: 18.4, quality: 'good' });
  const wrong = JSON.stringify([{ n: 'air', u: 'K', v: 291.5 }]);
  await promisify(execFile)('mosquitto_pub', ['-p', port, '-q', '1', '-t', topic, '-m', wrong]);
  const { nodes } = (await (await fetch(`${url}/api/tally`)).json()) as TallyAnswer;
  expect(nodes.find(({ node }) => node === 'yard')).toMatchObject({
    refused: 1,
    refusals: [{ field: '[0].u', came: '"K"' }],
  });
}, 60_000);
