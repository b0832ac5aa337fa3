import { spawn, type ChildProcess } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { chromium, type Browser, type BrowserContextOptions, type Page } from 'playwright-core';
import { endProcess, printed } from '../helpers/process.ts';

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url));
const MAIN = here('../../dist/server/main.js');
const NODE = here('../../dist/server/demo/node.js');
const DEMO_SITE = here('../../server/demo/site.json');

const CHROMIUM = {
  executablePath: '/usr/bin/chromium',
  args: [
    ...['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run'],
    ...['--disable-background-networking', '--disable-component-update', '--disable-sync'],
  ],
};

/** A busy machine may be this slow, ms. */
const PATIENCE = 60_000;

export const openBrowser = (): Promise<Browser> => chromium.launch(CHROMIUM);

export interface Demo {
  readonly url: string;
  readonly mqttPort: number;
  readonly server: ChildProcess;
  /** Process id of a simulated node. */
  readonly nodePid: (node: string) => number;
  /** Starts a simulated node anew, as somebody who switches it on again. */
  readonly startNode: (node: string) => ChildProcess;
  readonly end: () => Promise<void>;
}

/** Processes begun by another, with their command lines. */
const childrenOf = (parent: number): { pid: number; command: string }[] =>
  readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .flatMap((name) => {
      try {
        const stat = readFileSync(`/proc/${name}/stat`, 'utf8');
        const of = Number(stat.slice(stat.lastIndexOf(')') + 2).split(' ')[1]);
        const command = readFileSync(`/proc/${name}/cmdline`, 'utf8').replaceAll('\0', ' ');
        return of === parent ? [{ pid: Number(name), command }] : [];
      } catch (error) {
        // It ended while it was looked at.
        if (error instanceof Error && 'code' in error) return [];
        throw error;
      }
    });

/** The demo as `npm start` runs it. Ports 0: free ones. */
export const startDemo = async (data: string, port = 0, mqttPort = 0): Promise<Demo> => {
  const server = spawn(
    process.execPath,
    [MAIN, '--data', data, '--port', String(port), '--mqtt-port', String(mqttPort)],
    { stdio: ['ignore', 'pipe', 'pipe'] },
  );
  const [, mqtt = '', url = ''] = await printed(
    server,
    /mqtt:\/\/127\.0\.0\.1:(\d+)[\s\S]*Ready: (http:\S+)/,
  );
  const nodes: ChildProcess[] = [];
  return {
    ...{ url, server, mqttPort: Number(mqtt) },
    nodePid: (node) => {
      const found = childrenOf(server.pid ?? -1).find(({ command }) =>
        command.includes(`--node ${node} `),
      );
      if (!found) throw new Error(`no process of node ${node}`);
      return found.pid;
    },
    startNode: (node) => {
      const broker = `mqtt://127.0.0.1:${mqtt}`;
      const child = spawn(
        process.execPath,
        [NODE, '--node', node, '--broker', broker, '--site', DEMO_SITE],
        { stdio: 'ignore' },
      );
      nodes.push(child);
      return child;
    },
    end: async () => {
      await Promise.all(nodes.map((node) => endProcess(node, 'SIGKILL')));
      await endProcess(server, 'SIGKILL');
    },
  };
};

export const openPage = async (
  browser: Browser,
  url: string,
  options: BrowserContextOptions = {},
): Promise<Page> => {
  const page = await (await browser.newContext(options)).newPage();
  page.setDefaultTimeout(PATIENCE);
  await page.goto(url);
  await page.getByText('SIMULATED').first().waitFor();
  return page;
};
