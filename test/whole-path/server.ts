import { fileURLToPath } from 'node:url';
import { printed, startProcess } from '../helpers/process.ts';

const MAIN = fileURLToPath(new URL('../../dist/server/main.js', import.meta.url));

/** The built server on a free port for page and API, ready. It ends with the test at the latest. */
export const startServer = async (args: readonly string[]) => {
  const child = startProcess(process.execPath, [MAIN, '--port', '0', ...args]);
  const [text = '', mqtt = '', url = ''] = await printed(
    child,
    /Broker: (mqtt:\/\/[\w.]+:\d+)[\s\S]*Ready: (http:\S+)/,
  );
  const json = async <T>(path: string): Promise<T> =>
    (await (await fetch(`${url}/api/${path}`)).json()) as T;
  return { child, text, mqtt, url, json };
};

export type Server = Awaited<ReturnType<typeof startServer>>;
