import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { endProcess, printed } from './process.ts';

export interface Influxd {
  /** `127.0.0.1:port`. */
  readonly host: string;
  /** Ends it without notice, as a fault would; `start` begins it again on the same files. */
  readonly kill: () => Promise<void>;
  readonly start: () => Promise<void>;
  /** Ends it and removes its files. */
  readonly close: () => Promise<void>;
}

const settings = (folder: string, http: string) => `
reporting-disabled = true
bind-address = "127.0.0.1:0"
[meta]
  dir = "${folder}/meta"
[data]
  dir = "${folder}/data"
  wal-dir = "${folder}/wal"
  query-log-enabled = false
[http]
  bind-address = "${http}"
  log-enabled = false
[monitor]
  store-enabled = false
`;

/** Debian's influxd on free ports, with settings and files of its own. For `beforeAll`. */
export const startInfluxd = async (): Promise<Influxd> => {
  const folder = mkdtempSync(join(tmpdir(), 'yieldward-influxd-'));
  const file = join(folder, 'influxd.conf');
  const launch = async (http: string) => {
    writeFileSync(file, settings(folder, http));
    const child = spawn('/usr/bin/influxd', ['-config', file], {
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    const listening = /Listening on HTTP.*addr=(127\.0\.0\.1:\d+)/;
    const [, host = ''] = await printed(child, listening);
    const answer = await fetch(`http://${host}/ping`);
    if (answer.status !== 204) throw new Error(`influxd: expected 204, came ${answer.status}`);
    return { child, host };
  };
  let { child, host } = await launch('127.0.0.1:0');
  return {
    host,
    kill: () => endProcess(child, 'SIGKILL'),
    start: async () => {
      ({ child, host } = await launch(host));
    },
    close: async () => {
      await endProcess(child, 'SIGKILL');
      rmSync(folder, { recursive: true, force: true, maxRetries: 3 });
    },
  };
};
