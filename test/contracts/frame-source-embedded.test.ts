import { connect } from 'node:net';
import fc from 'fast-check';
import type { MqttClient } from 'mqtt';
import { expect, onTestFinished, test } from 'vitest';
import { embeddedBroker } from '../../server/ingest/embedded-broker.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import { fakeClock } from '../helpers/fakes.ts';
import { closing, FRAME_BYTES, inbox, nodeClient, publish, textOf } from './frame-source.ts';

const FRAME = topicOf('n1', 'frame');

const scene = async ({ acknowledging }: { acknowledging: boolean }) => {
  const said: string[] = [];
  const source = embeddedBroker({
    ...{ host: '127.0.0.1', port: 0, clock: fakeClock() },
    say: (line) => said.push(line),
  });
  const box = inbox();
  await source.start((delivery) => {
    box.receive(delivery);
    if (acknowledging) delivery.acknowledge();
  });
  onTestFinished(() => source.stop());
  return { ...box, source, said, url: `mqtt://127.0.0.1:${source.port()}` };
};

/** MQTT 3.1.1 §3.1: CONNECT, clean session, client "raw". */
const CONNECT = Buffer.from([
  0x10,
  15,
  0,
  4,
  ...Buffer.from('MQTT'),
  4,
  2,
  0,
  0,
  0,
  3,
  ...Buffer.from('raw'),
]);

/** Writes raw bytes and waits until the broker has closed; `end` says first that no more comes. */
const raw = async (port: number, bytes: Uint8Array, { end }: { end: boolean }) => {
  const socket = connect(port, '127.0.0.1').resume();
  socket.on('error', () => socket.destroy());
  const closed = new Promise((resolve) => socket.once('close', () => resolve(undefined)));
  if (end) socket.end(bytes);
  else socket.write(bytes);
  await closed;
};

let exchanges = 0;
/** There and back again: a topic of its own each time, else the client answers by itself. */
const exchange = (client: MqttClient) => client.subscribeAsync(`exchange/${exchanges++}`);

test('the node has its PUBACK only once the delivery is acknowledged, each its own', async () => {
  const { url, until } = await scene({ acknowledging: false });
  const node = await nodeClient(url);
  const done: number[] = [];
  const all = Array.from({ length: 40 }, (_, i) =>
    publish(node, 'n1', Buffer.alloc(FRAME_BYTES, i)).then(() => done.push(i)),
  );
  const came = await until(40);
  // A fence: on the same connection, so a PUBACK sent before is there before it.
  await exchange(node);
  expect(done).toEqual([]);
  came[7]?.acknowledge();
  await all[7];
  await exchange(node);
  expect(done).toEqual([7]);
  for (const [i, delivery] of came.entries()) if (i !== 7) delivery.acknowledge();
  await Promise.all(all);
  expect(done).toHaveLength(40);
});

test('a node that sends on and on while nothing is acknowledged is not read without end', async () => {
  const { url, until, deliveries } = await scene({ acknowledging: false });
  const node = await nodeClient(url);
  const all = Array.from({ length: 1000 }, () => publish(node, 'n1', Buffer.alloc(FRAME_BYTES)));
  await until(128);
  // Each exchange of another client is a turn in which the broker could read the next 64 kB.
  const other = await nodeClient(url);
  for (let turn = 0; turn < 300; turn++) await exchange(other);
  expect(deliveries.length).toBeLessThan(200);
  for (let next = 0; next < 1000; next++) (await until(next + 1))[next]?.acknowledge();
  await Promise.all(all);
  expect(deliveries).toHaveLength(1000);
});

const nextMessage = (client: MqttClient): Promise<string> =>
  new Promise((resolve) => client.once('message', (_, payload) => resolve(payload.toString())));

test('ordinary subscribers get what nodes send; a status is kept for those who come later', async () => {
  const { url } = await scene({ acknowledging: true });
  const [node, early, late] = [await nodeClient(url), await nodeClient(url), await nodeClient(url)];
  const first = nextMessage(early);
  await early.subscribeAsync(FRAME, { qos: 1 });
  await publish(node, 'n1', 'seen');
  expect(await first).toBe('seen');
  const topic = topicOf('n1', 'status');
  await node.publishAsync(topic, 'here', { qos: 1, retain: true });
  const kept = nextMessage(late);
  await late.subscribeAsync(topic, { qos: 1 });
  expect(await kept).toBe('here');
});

test('topics that are not ours pass by, and the broker keeps $SYS to itself', async () => {
  const { url, deliveries } = await scene({ acknowledging: true });
  const node = await nodeClient(url);
  node.options.reconnectPeriod = 0;
  await node.publishAsync('yieldward', 'x', { qos: 1 });
  await node.publishAsync('yieldward/10/n1/frame', 'x', { qos: 1 });
  const closed = closing(node);
  node.publish('$SYS/anything', 'x', { qos: 1 });
  await closed;
  expect(deliveries).toEqual([]);
});

test('a message announced as longer than can be read is cut off before it is taken in', async () => {
  const { url, source, said, deliveries } = await scene({ acknowledging: true });
  // PUBLISH QoS 1 with a Remaining Length of 256 MiB less one (MQTT 3.1.1 §2.2.3), then nothing.
  const header = Buffer.from([0x32, 0xff, 0xff, 0xff, 0x7f, 0]);
  await raw(source.port(), Buffer.concat([CONNECT, header]), { end: false });
  expect(said.join()).toMatch(/127\.0\.0\.1.*268435455 bytes/);
  await publish(await nodeClient(url), 'n1', 'still here');
  expect(deliveries.map(textOf)).toEqual(['still here']);
});

/** Each breaks a rule of MQTT 3.1.1 after a CONNECT, or in place of it. */
const MALFORMED: Record<string, readonly number[] | string> = {
  'another protocol': 'GET / HTTP/1.1\r\nHost: x\r\n\r\n',
  'no CONNECT first [MQTT-3.1.0-1]': [0x30, 6, 0, 1, 0x61, 1, 2, 3],
  'another protocol name [MQTT-3.1.2-1]': [
    0x10, 12, 0, 4, 0x4e, 0x4f, 0x4e, 0x45, 4, 2, 0, 0, 0, 0,
  ],
  'half a CONNECT': [...CONNECT.subarray(0, 9)],
  'a second CONNECT [MQTT-3.1.0-2]': [...CONNECT, ...CONNECT],
  'QoS 3 [MQTT-3.3.1-4]': [...CONNECT, 0x36, 5, 0, 1, 0x61, 0, 1],
  'a wildcard in a topic [MQTT-3.3.2-2]': [...CONNECT, 0x32, 5, 0, 1, 0x23, 0, 1],
  'an empty topic [MQTT-4.7.3-1]': [...CONNECT, 0x32, 4, 0, 0, 0, 1],
  'a topic longer than its packet': [...CONNECT, 0x32, 4, 0xff, 0xff, 0, 1],
  'a Remaining Length without end (§2.2.3)': [...CONNECT, 0x32, 0xff, 0xff, 0xff, 0xff, 0xff],
  'an unknown packet type': [...CONNECT, 0x00, 0],
};

test.each(Object.entries(MALFORMED))(
  '%s ends its connection and nothing else',
  async (_, bytes) => {
    const { url, source, deliveries } = await scene({ acknowledging: true });
    await raw(source.port(), typeof bytes === 'string' ? Buffer.from(bytes) : Buffer.from(bytes), {
      end: true,
    });
    await publish(await nodeClient(url), 'n1', 'still here');
    expect(deliveries.map(textOf)).toEqual(['still here']);
  },
);

test('no bytes whatever after a CONNECT bring it down', async () => {
  const { url, source, until } = await scene({ acknowledging: true });
  await fc.assert(
    fc.asyncProperty(fc.uint8Array({ maxLength: 120 }), async (bytes) => {
      await raw(source.port(), Buffer.concat([CONNECT, bytes]), { end: true });
    }),
    { numRuns: 100 },
  );
  await publish(await nodeClient(url), 'n1', 'still here');
  expect((await until(1)).map(textOf)).toContain('still here');
});

test('a port that is taken is a refusal to start, and stopping is fine then', async () => {
  const { source } = await scene({ acknowledging: true });
  expect(source.description()).toContain(`mqtt://127.0.0.1:${source.port()},`);
  const clock = fakeClock();
  const second = embeddedBroker({ host: '127.0.0.1', port: source.port(), clock });
  await expect(second.start(() => undefined)).rejects.toThrow(/EADDRINUSE/);
  expect(second.connected()).toBe(false);
  await second.stop();
});
