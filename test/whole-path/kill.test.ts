/** The built server killed in the midst of traffic: whatever it has acknowledged is there afterwards. */
import { join } from 'node:path';
import { connectAsync } from 'mqtt';
import { expect, onTestFinished, test } from 'vitest';
import { writeCbor } from '../../server/ingest/cbor.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { encodeFrame } from '../../shared/pipeline/1-decode/frame.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import type { History, NodeTally, TallyAnswer } from '../../shared/protocol/http.ts';
import { startMosquitto } from '../helpers/mosquitto.ts';
import { endProcess, temporaryFolder } from '../helpers/process.ts';
import { startServer, type Server } from './server.ts';
import { writeSite } from './site.ts';

const T0 = 1_790_000_000;
const FRAMES = 600;
/** So many acknowledgements, and then the end. */
const ENOUGH = 60;

/** Two seconds apart; the seq can be told from the strain: 2 mV/V at GF 2 are 1000 µε. */
const payloadOf = (seq: number) =>
  Buffer.from(
    writeCbor(
      encodeFrame({
        ...{ node: 'n1', boot: 'b1', seq, sequenced: true },
        ...{ t0: epochSeconds(T0 + 2 * seq), dt: seconds(1) },
        inputs: [{ input: 's1', samples: Float64Array.of(seq * 2e-6, seq * 2e-6) }],
      }),
    ),
  );

const argumentsOf = (folder: string, more: readonly string[]) => [
  ...['--site', writeSite(folder, false), '--data', join(folder, 'data'), ...more],
];

/** Sequence numbers of frames that are in store, with the strain that each of them carried. */
const inStore = async ({ json }: Server): Promise<number[]> => {
  const window = `from=${T0}&to=${T0 + 2 * FRAMES}&points=${FRAMES}`;
  const { step, t, min, max } = await json<History>(`history?channel=tip&${window}`);
  expect(step).toBe(2);
  return t.map((at, i) => {
    const seq = (at - T0) / 2;
    for (const value of [min[i], max[i]]) expect((value ?? NaN) * 1e6).toBeCloseTo(seq, 9);
    return seq;
  });
};

/** Sends all frames at once, kills the server when enough are acknowledged; gives those that were. */
const killUnderWay = async (first: Server, broker: string): Promise<Set<number>> => {
  const client = await connectAsync(broker, { protocolVersion: 4, reconnectPeriod: 0 });
  client.on('error', () => undefined);
  const acknowledged = new Set<number>();
  await new Promise<void>((resolve) => {
    for (let seq = 0; seq < FRAMES; seq++) {
      client.publish(topicOf('n1', 'frame'), payloadOf(seq), { qos: 1 }, (error) => {
        if (error) return;
        acknowledged.add(seq);
        if (acknowledged.size === ENOUGH) resolve();
      });
    }
  });
  await endProcess(first.child, 'SIGKILL');
  onTestFinished(() => client.endAsync(true));
  return acknowledged;
};

const tallied = async ({ json }: Server): Promise<Partial<NodeTally>> =>
  (await json<TallyAnswer>('tally')).nodes.find(({ node }) => node === 'n1') ?? {};

test('by the embedded broker: every frame acknowledged is in store, whole; the rest may come again', async () => {
  const args = argumentsOf(temporaryFolder(), ['--mqtt-port', '0']);
  const first = await startServer(args);
  const acknowledged = await killUnderWay(first, first.mqtt);
  const second = await startServer(args);
  const kept = new Set(await inStore(second));
  expect(acknowledged.size).toBeGreaterThanOrEqual(ENOUGH);
  expect([...acknowledged].filter((seq) => !kept.has(seq))).toEqual([]);
  // The node sends again what was not acknowledged (docs/wire.md, Acknowledgement).
  const again = await connectAsync(second.mqtt, { protocolVersion: 4 });
  onTestFinished(() => again.endAsync(true));
  const open = Array.from({ length: FRAMES }, (_, seq) => seq).filter(
    (seq) => !acknowledged.has(seq),
  );
  const topic = topicOf('n1', 'frame');
  await Promise.all(open.map((seq) => again.publishAsync(topic, payloadOf(seq), { qos: 1 })));
  expect(await inStore(second)).toHaveLength(FRAMES);
  const stillThere = open.filter((seq) => kept.has(seq)).length;
  expect(await tallied(second)).toMatchObject({
    ...{ received: open.length, stored: FRAMES, duplicate: stillThere, missing: 0 },
  });
}, 60_000);

test('by mosquitto: what it has taken comes to the store after all, each frame once', async () => {
  const { url } = await startMosquitto();
  const args = argumentsOf(temporaryFolder(), ['--broker', url]);
  const acknowledged = await killUnderWay(await startServer(args), url);
  expect(acknowledged.size).toBeGreaterThanOrEqual(ENOUGH);
  const second = await startServer(args);
  await expect.poll(async () => (await tallied(second)).stored, { timeout: 30_000 }).toBe(FRAMES);
  expect(await inStore(second)).toHaveLength(FRAMES);
  expect(await tallied(second)).toMatchObject({ missing: 0, refused: 0 });
}, 60_000);
