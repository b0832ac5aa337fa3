/** The built server as a person starts it, on real brokers and real stores: a frame in, all of it out. */
import { execFile } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { connectAsync } from 'mqtt';
import { describe, expect, onTestFinished, test } from 'vitest';
import { writeCbor } from '../../server/ingest/cbor.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { encodeFrame } from '../../shared/pipeline/1-decode/frame.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import type {
  AlarmsAnswer,
  ChannelAnswer,
  History,
  TallyAnswer,
} from '../../shared/protocol/http.ts';
import { startInfluxd } from '../helpers/influxd.ts';
import { startMosquitto } from '../helpers/mosquitto.ts';
import { endProcess, temporaryFolder } from '../helpers/process.ts';
import { startServer, type Server } from './server.ts';
import { writeSite } from './site.ts';

const T0 = Math.floor(Date.now() / 1e3) - 60;

/** A full bending bridge is linear: r = GF·ε (Dally & Riley), so 2 mV/V at GF 2 are 1000 µε. */
const ratioOf = (microstrain: number) => 2e-6 * microstrain;

const payloadOf = (seq: number, microstrain: readonly number[]) =>
  Buffer.from(
    writeCbor(
      encodeFrame({
        ...{ node: 'n1', boot: 'b1', seq, sequenced: true },
        ...{ t0: epochSeconds(T0 + seq), dt: seconds(0.25) },
        inputs: [{ input: 's1', samples: Float64Array.from(microstrain, ratioOf) }],
      }),
    ),
  );

interface Place {
  readonly name: string;
  /** Arguments for broker and store. */
  readonly open: () => Promise<readonly string[]>;
  readonly simulated: boolean;
}

const PLACES: readonly Place[] = [
  {
    name: 'the embedded broker (aedes) and SQLite, a simulated site',
    open: async () => ['--mqtt-port', '0'],
    simulated: true,
  },
  {
    name: 'mosquitto and SQLite',
    open: async () => ['--broker', (await startMosquitto()).url],
    simulated: false,
  },
  {
    name: 'mosquitto and InfluxDB',
    open: async () => {
      const influxd = await startInfluxd();
      onTestFinished(() => influxd.close());
      const store = `influx+http://${influxd.host}/samples`;
      return ['--broker', (await startMosquitto()).url, '--store', store];
    },
    simulated: false,
  },
];

describe.each(PLACES)('$name', ({ open, simulated }) => {
  test('a frame becomes value, history, export, alarm and tally; kill -9 loses nothing acknowledged', async () => {
    const folder = temporaryFolder();
    const places = ['--site', writeSite(folder, simulated), '--data', join(folder, 'data')];
    const args = [...places, ...(await open())];
    const first = await startServer(args);
    expect(first.text).not.toContain('Simulated nodes');

    const client = await connectAsync(first.mqtt, { protocolVersion: 4 });
    onTestFinished(() => client.endAsync(true));
    const send = (seq: number, ...microstrain: number[]) =>
      client.publishAsync(topicOf('n1', 'frame'), payloadOf(seq, microstrain), { qos: 1 });
    await send(0, 100, 200, 950, 300);
    await send(1, 300, 310, 320, 330);
    await send(1, 300, 310, 320, 330);
    await send(3, 400, 410, 420, 430);
    await client.publishAsync(topicOf('n1', 'frame'), Buffer.from('ff', 'hex'), { qos: 1 });
    const pack = JSON.stringify([{ n: 'steel', u: 'Cel', v: 18.4 }]);
    const port = new URL(first.mqtt).port;
    const topic = topicOf('n1', 'senml/json');
    await promisify(execFile)('mosquitto_pub', ['-p', port, '-q', '1', '-t', topic, '-m', pack]);

    const window = `from=${T0}&to=${T0 + 10}&points=10`;
    const look = async ({ json, url }: Server) => {
      const history = await json<History>(`history?channel=tip&${window}`);
      const csv = await (await fetch(`${url}/api/history?channel=tip&${window}&format=csv`)).text();
      return { history, csv };
    };
    await expect
      .poll(async () => {
        const { nodes } = await first.json<TallyAnswer>('tally');
        const { received, stored, duplicate, missing, refused } = nodes[0] ?? {};
        return { received, stored, duplicate, missing, refused };
      })
      .toEqual({ received: 5, stored: 4, duplicate: 1, missing: 1, refused: 1 });
    const before = await look(first);
    expect(before.history.simulated).toBe(simulated);
    expect(before.history.max.map((x) => Math.round((x ?? NaN) * 1e6))).toEqual([950, 330, 430]);
    expect(before.history.min.map((x) => Math.round((x ?? NaN) * 1e6))).toEqual([100, 300, 400]);
    const [header = '', ...lines] = before.csv.trim().split('\r\n');
    expect(header.endsWith(',simulated')).toBe(true);
    for (const line of lines) expect(line.endsWith(simulated ? ',yes' : ',no')).toBe(true);
    const { channel } = await first.json<ChannelAnswer>('channels/tip');
    expect((channel.current.value ?? NaN) * 1e6).toBeCloseTo(430, 9);
    const steel = await first.json<ChannelAnswer>('channels/steel');
    expect(steel.channel.current.value).toBe(18.4);
    const alarms = await first.json<AlarmsAnswer>('alarms');
    expect(alarms.simulated).toBe(simulated);
    expect(alarms.recent.map(({ kind, at }) => [kind, at])).toEqual([
      ['returned', T0 + 0.75],
      ['raised', T0 + 0.5],
    ]);
    const limits = await fetch(`${first.url}/api/channels/tip/limits`, {
      method: 'PUT',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify({ limits: [], author: 'Engineer', reason: 'none for now' }),
    });
    expect(limits.status).toBe(200);

    await endProcess(first.child, 'SIGKILL');
    const second = await startServer(args);
    const after = await look(second);
    expect(after.history.t).toEqual(before.history.t);
    expect(after.history.max).toEqual(before.history.max);
    expect(after.csv).toBe(before.csv);
    const recent = (await second.json<AlarmsAnswer>('alarms')).recent;
    expect(recent).toEqual(alarms.recent);
    const again = await second.json<ChannelAnswer>('channels/tip');
    expect(again.channel.limits).toEqual([]);
    const { nodes } = await second.json<TallyAnswer>('tally');
    expect(nodes[0]).toMatchObject({ stored: 4, missing: 1 });
  }, 60_000);
});

test('no simulated node is started for a site file, not even for a simulated one', async () => {
  const folder = temporaryFolder();
  const site = writeSite(folder, true);
  const { child } = await startServer([
    '--site',
    site,
    '--data',
    join(folder, 'd'),
    '--mqtt-port',
    '0',
  ]);
  const children = readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .filter((name) => {
      try {
        const stat = readFileSync(`/proc/${name}/stat`, 'utf8');
        return Number(stat.slice(stat.lastIndexOf(')') + 2).split(' ')[1]) === child.pid;
      } catch (error) {
        if (error instanceof Error && 'code' in error) return false;
        throw error;
      }
    });
  expect(children).toEqual([]);
}, 30_000);
