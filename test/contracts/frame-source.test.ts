import { Aedes } from 'aedes';
import { createServer, type AddressInfo } from 'node:net';
import { expect, onTestFinished, test } from 'vitest';
import { embeddedBroker } from '../../server/ingest/embedded-broker.ts';
import { externalBroker } from '../../server/ingest/external-broker.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import { fakeClock } from '../helpers/fakes.ts';
import { startMosquitto } from '../helpers/mosquitto.ts';
import { describeFrameSource, inbox, nodeClient } from './frame-source.ts';

const clock = fakeClock();
const FRAME = topicOf('n1', 'frame');
let names = 0;

const embedded = async () => {
  const source = await embeddedBroker({ host: '127.0.0.1', port: 0, clock });
  return { source, url: () => `mqtt://127.0.0.1:${source.port()}` };
};

const onMosquitto = async () => {
  const { url } = await startMosquitto();
  return {
    url: () => url,
    source: externalBroker({ url, clientId: `yieldward-${names++}`, clock }),
  };
};

const onAedes = async () => {
  const broker = await Aedes.createBroker();
  const server = createServer((socket) => void broker.handle(socket)).listen(0, '127.0.0.1');
  await new Promise((resolve) => server.once('listening', () => resolve(undefined)));
  onTestFinished(() => {
    broker.close();
    server.close();
  });
  const url = `mqtt://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const clientId = `yieldward-${names++}`;
  return { url: () => url, source: externalBroker({ url, clientId, clock, protocolVersion: 4 }) };
};

describeFrameSource('embedded broker', embedded);
describeFrameSource('client of mosquitto, MQTT 5', onMosquitto);
describeFrameSource('client of aedes, MQTT 3.1.1', onAedes);

test('embedded: the node has its PUBACK only once the delivery is acknowledged, in any order', async () => {
  const { source } = await embedded();
  const box = inbox();
  await source.start(box.receive);
  onTestFinished(() => source.stop());
  const client = await nodeClient(`mqtt://127.0.0.1:${source.port()}`);
  const done: number[] = [];
  const all = Array.from({ length: 40 }, (_, i) =>
    client.publishAsync(FRAME, String(i), { qos: 1 }).then(() => done.push(i)),
  );
  // All forty are under way at once, none is acknowledged, and the broker answers otherwise:
  const came = await box.until(40);
  const other = await nodeClient(`mqtt://127.0.0.1:${source.port()}`);
  await other.subscribeAsync('elsewhere', { qos: 0 });
  expect(done).toEqual([]);
  came[7]?.acknowledge();
  await all[7];
  expect(done).toEqual([7]);
  for (const [i, delivery] of came.entries()) if (i !== 7) delivery.acknowledge();
  await Promise.all(all);
  expect(done).toHaveLength(40);
});

test('embedded: a status is retained for others, and the will comes when a node is cut off', async () => {
  const { source } = await embedded();
  const box = inbox();
  await source.start((delivery) => {
    box.receive(delivery);
    delivery.acknowledge();
  });
  onTestFinished(() => source.stop());
  const url = `mqtt://127.0.0.1:${source.port()}`;
  const topic = topicOf('n1', 'status');
  const node = await nodeClient(url, { topic, payload: 'gone' });
  await node.publishAsync(topic, 'here', { qos: 1, retain: true });
  const other = await nodeClient(url);
  const retained = new Promise<string>((resolve) => {
    other.once('message', (_, payload) => resolve(payload.toString()));
  });
  await other.subscribeAsync(topic, { qos: 1 });
  expect(await retained).toBe('here');
  node.stream.destroy();
  const came = await box.until(2);
  expect(came.map(({ payload }) => Buffer.from(payload).toString())).toEqual(['here', 'gone']);
});

test('embedded: a message that is too long ends its connection and nothing else', async () => {
  const { source } = await embedded();
  const box = inbox();
  await source.start((delivery) => {
    box.receive(delivery);
    delivery.acknowledge();
  });
  onTestFinished(() => source.stop());
  const url = `mqtt://127.0.0.1:${source.port()}`;
  const [bad, good] = [await nodeClient(url), await nodeClient(url)];
  bad.options.reconnectPeriod = 0;
  const ended = new Promise((resolve) => bad.once('close', () => resolve(undefined)));
  bad.publish(FRAME, Buffer.alloc(2_000_000), { qos: 1 });
  await ended;
  await good.publishAsync(FRAME, 'still here', { qos: 1 });
  expect(box.deliveries.map(({ payload }) => payload.length)).toEqual([10]);
});

/** QoS 1 publications of a node to mosquitto are its own affair; what counts is ours to mosquitto. */
test('mosquitto: what was not acknowledged comes again to the same session, what was does not', async () => {
  const { url } = await startMosquitto();
  const clientId = `yieldward-${names++}`;
  const first = externalBroker({ url, clientId, clock });
  const box = inbox();
  await first.start(box.receive);
  const node = await nodeClient(url);
  for (let i = 0; i < 30; i++) await node.publishAsync(FRAME, String(i), { qos: 1 });
  const came = await box.until(30);
  // Thirty at hand without one acknowledged: a commit can take them together.
  for (const i of [0, 1, 2, 17]) came[i]?.acknowledge();
  // A later packet on the same connection is a fence: the four PUBACKs went before it.
  await first.stop();
  const second = externalBroker({ url, clientId, clock });
  const again = inbox();
  await second.start(again.receive);
  onTestFinished(() => second.stop());
  const redelivered = await again.until(26);
  for (const { acknowledge } of redelivered) acknowledge();
  const expected = Array.from({ length: 30 }, (_, i) => i).filter(
    (i) => ![0, 1, 2, 17].includes(i),
  );
  expect(redelivered.map(({ payload }) => Number(Buffer.from(payload).toString()))).toEqual(
    expected,
  );
});

test('mosquitto: gone and back, the source is there again, and what came meanwhile comes', async () => {
  const broker = await startMosquitto();
  const source = externalBroker({ url: broker.url, clientId: `yieldward-${names++}`, clock });
  const box = inbox();
  await source.start((delivery) => {
    box.receive(delivery);
    delivery.acknowledge();
  });
  onTestFinished(() => source.stop());
  await broker.stop();
  await broker.start();
  const node = await nodeClient(broker.url);
  await node.publishAsync(FRAME, 'after', { qos: 1 });
  const [delivery] = await box.until(1);
  expect(Buffer.from(delivery?.payload ?? []).toString()).toBe('after');
  expect(source.connected()).toBe(true);
});

test('no broker there: said within the time, not waited for without end', async () => {
  const { url, stop } = await startMosquitto();
  await stop();
  const source = externalBroker({ url, clientId: 'nobody', clock });
  await expect(source.start(() => undefined)).rejects.toThrow(/no connection to mqtt:/);
}, 20_000);
