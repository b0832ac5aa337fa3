import { resolve } from 'node:path';
import { parseArgs } from 'node:util';
import type { Fault } from '../shared/model/fault.ts';

/** What the process was asked to do; checked once, then frozen. */
export interface Config {
  /** The site file; null runs the demo site with its simulated nodes. */
  readonly siteFile: string | null;
  readonly dataFolder: string;
  readonly host: string;
  readonly port: number;
  /** Port of the embedded broker; unused with `broker`. */
  readonly mqttPort: number;
  /** Another broker's address; null starts the embedded one. */
  readonly broker: string | null;
  /** InfluxDB's address; null keeps samples in SQLite in the data folder. */
  readonly store: string | null;
}

export type ConfigResult =
  | { readonly ok: true; readonly config: Config }
  | { readonly ok: false; readonly faults: readonly Fault[] };

export const USAGE = `Usage: npm start -- [--site FILE] [--data DIR] [--host ADDRESS] [--port N]
                    [--mqtt-port N] [--store URL] [--broker URL]

  --site FILE      the structure to watch; without it, the simulated demo
  --data DIR       where samples and records are kept       (data/site, demo: data/demo)
  --host ADDRESS   address to listen on                     (127.0.0.1: this machine only)
  --port N         web page and API                         (8080; 0 takes a free one)
  --mqtt-port N    embedded MQTT broker                     (1883; 0 takes a free one)
  --store URL      influx+http://host:8086/database for samples instead of SQLite
  --broker URL     mqtt://host:1883 or mqtts://… instead of the embedded broker`;

const OPTIONS = {
  site: { type: 'string' },
  data: { type: 'string' },
  host: { type: 'string' },
  port: { type: 'string' },
  'mqtt-port': { type: 'string' },
  store: { type: 'string' },
  broker: { type: 'string' },
  help: { type: 'boolean' },
} as const;

const HIGHEST_PORT = 65535;

const portOf = (text: string | undefined, fallback: number): number => {
  if (text === undefined) return fallback;
  return /^\d+$/.test(text) && Number(text) <= HIGHEST_PORT ? Number(text) : NaN;
};

const hasScheme = (text: string, schemes: readonly string[]): boolean =>
  URL.canParse(text) && schemes.includes(new URL(text).protocol);

/** Command-line arguments to a configuration, or everything that is wrong with them at once. */
export const readConfig = (args: readonly string[], folder: string): ConfigResult => {
  const { values, tokens } = parseArgs({
    args: [...args],
    options: OPTIONS,
    strict: false,
    allowPositionals: true,
    tokens: true,
  });
  const faults: Fault[] = [];
  const fault = (path: string, expected: string, came: string) =>
    faults.push({ path, expected, came });
  for (const token of tokens) {
    if (token.kind === 'positional') fault(token.value, 'an option', 'a bare word');
    else if (token.kind === 'option' && !(token.name in OPTIONS)) {
      fault(
        token.rawName,
        `one of ${Object.keys(OPTIONS)
          .map((n) => `--${n}`)
          .join(' ')}`,
        'unknown',
      );
    }
  }
  const text = (name: Exclude<keyof typeof OPTIONS, 'help'>): string | undefined => {
    const value = values[name];
    if (value === undefined || typeof value === 'string') return value;
    fault(`--${name}`, 'a value after it', 'none');
    return undefined;
  };
  const port = portOf(text('port'), 8080);
  const mqttPort = portOf(text('mqtt-port'), 1883);
  const [site, broker, store] = [text('site'), text('broker'), text('store')];
  const expectedPort = `a port, 0 to ${HIGHEST_PORT}`;
  if (Number.isNaN(port)) fault('--port', expectedPort, String(values.port));
  if (Number.isNaN(mqttPort)) fault('--mqtt-port', expectedPort, String(values['mqtt-port']));
  if (broker !== undefined && !hasScheme(broker, ['mqtt:', 'mqtts:'])) {
    fault('--broker', 'mqtt://host:port or mqtts://host:port', broker);
  }
  if (broker !== undefined && site === undefined) {
    fault('--site', 'a site file: simulated nodes are kept off other brokers', 'none');
  }
  if (store !== undefined && !hasScheme(store, ['influx+http:', 'influx+https:'])) {
    fault('--store', 'influx+http://host:port/database', store);
  }
  const data = text('data') ?? (site === undefined ? 'data/demo' : 'data/site');
  const host = text('host') ?? '127.0.0.1';
  if (faults.length > 0) return { ok: false, faults };
  return {
    ok: true,
    config: Object.freeze({
      siteFile: site === undefined ? null : resolve(folder, site),
      dataFolder: resolve(folder, data),
      host,
      port,
      mqttPort,
      broker: broker ?? null,
      store: store ?? null,
    }),
  };
};
