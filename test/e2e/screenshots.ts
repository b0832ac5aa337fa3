/** `npm run screenshots [-- FOLDER]`: every page of the demo under load, and the README's picture. */
import { existsSync, mkdirSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import type { Page } from 'playwright-core';
import { openBrowser, openPage, startDemo } from './scene.ts';

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url));
if (!existsSync(here('../../dist/server/main.js'))) {
  throw new Error('dist/server: expected the built server, came nothing; npm run build makes it');
}

const { positionals } = parseArgs({ allowPositionals: true });
const folder = resolve(positionals[0] ?? here('../output/screenshots'));
mkdirSync(folder, { recursive: true });
const data = mkdtempSync(join(tmpdir(), 'yieldward-screenshots-'));

const PLACES = {
  watch: '#/watch',
  alarms: '#/alarms',
  'set-up': '#/set-up',
  channel: '#/watch?open=B1-mid-bottom-left',
} as const;
const SCREENS = [
  { name: 'desk', viewport: { width: 1440, height: 900 } },
  { name: 'phone', viewport: { width: 390, height: 844 } },
] as const;

const say = (line: string) => process.stdout.write(`${line}\n`);
const demo = await startDemo(data);
const browser = await openBrowser();

/** Past a share of the safe working load, so that there is something to see. */
const loaded = async (page: Page, percent: number) => {
  await page.waitForFunction(
    (least) => {
      const text = document.body.innerText.match(/(\d+)\s*%\s*of safe working load/);
      return Number(text?.[1]) >= least;
    },
    percent,
    { timeout: 300_000 },
  );
};

try {
  say('Waiting for the simulated proof load to pass 110 % of the safe working load …');
  const first = await openPage(browser, demo.url, { ...SCREENS[0], colorScheme: 'light' });
  await loaded(first, 110);
  await first.screenshot({ path: here('../../docs/watch.png') });
  say('docs/watch.png');
  await first.context().close();
  for (const { name, viewport } of SCREENS) {
    for (const colorScheme of ['light', 'dark'] as const) {
      for (const [place, hash] of Object.entries(PLACES)) {
        const page = await openPage(browser, `${demo.url}/${hash}`, { viewport, colorScheme });
        await page.getByText('Live', { exact: true }).first().waitFor({ state: 'attached' });
        await page.waitForTimeout(1500);
        const file = join(folder, `${place}-${name}-${colorScheme}.png`);
        await page.screenshot({ path: file, fullPage: place !== 'channel' });
        say(file);
        await page.context().close();
      }
    }
  }
} finally {
  await browser.close();
  await demo.end();
  rmSync(data, { recursive: true, force: true, maxRetries: 3 });
}
