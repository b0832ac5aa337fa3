import { describe, expect, onTestFinished, test } from 'vitest';
import { externalBroker } from '../../server/ingest/external-broker.ts';
import type { Delivery } from '../../server/ports.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import { startAedes } from '../helpers/aedes.ts';
import { fakeClock } from '../helpers/fakes.ts';
import { openLine } from '../helpers/line.ts';
import { startMosquitto } from '../helpers/mosquitto.ts';
import { inbox, nodeClient, publish, textOf } from './frame-source.ts';

const clock = fakeClock();
const FRAME = topicOf('n1', 'frame');
/** The source's Receive Maximum (MQTT 5.0 §3.1.2.11.3). */
const WINDOW = 256;

const open = async (
  url: string,
  options: { readonly acknowledging?: boolean; readonly protocolVersion?: 4 | 5 } = {},
) => {
  const { acknowledging = false, ...rest } = options;
  const source = externalBroker({ url, clientId: 'yieldward', clock, ...rest });
  const box = inbox();
  await source.start((delivery) => {
    box.receive(delivery);
    if (acknowledging) delivery.acknowledge();
  });
  onTestFinished(() => source.stop());
  return { source, ...box };
};

const numbers = (count: number, from = 0) => Array.from({ length: count }, (_, i) => from + i);
const numberOf = (delivery: Delivery) => Number(textOf(delivery));

const publishNumbers = async (url: string, wanted: readonly number[]) => {
  const node = await nodeClient(url);
  await Promise.all(wanted.map((i) => publish(node, 'n1', String(i))));
  return node;
};

/** What the broker still holds for the session: all that comes before a message sent now. */
const leftOver = async (url: string): Promise<readonly string[]> => {
  const { until, deliveries, source } = await open(url, { acknowledging: true });
  await (await nodeClient(url)).publishAsync(FRAME, 'fence', { qos: 1 });
  const fenced = () => deliveries.some((delivery) => textOf(delivery) === 'fence');
  for (let count = 1; !fenced(); count++) await until(count);
  await source.stop();
  return deliveries.map(textOf).slice(0, -1);
};

describe('mosquitto, MQTT 5', () => {
  test('the window fills and stays full until a delivery is acknowledged', async () => {
    const { url } = await startMosquitto();
    const { until, deliveries } = await open(url);
    const node = await publishNumbers(url, numbers(WINDOW + 44));
    await until(WINDOW);
    // QoS 0 is outside the window (MQTT 5.0 §4.9) and so passes those that wait.
    node.publish(FRAME, '-1', { qos: 0 });
    await until(WINDOW + 1);
    expect(deliveries.map(numberOf)).toEqual([...numbers(WINDOW), -1]);
    deliveries[17]?.acknowledge();
    expect((await until(WINDOW + 2))[WINDOW + 1]?.payload).toEqual(Buffer.from(String(WINDOW)));
  });

  test('cut off without a word, the session gets again what was not acknowledged, and no more', async () => {
    const { url } = await startMosquitto();
    const line = await openLine(url);
    const first = await open(line.url);
    await publishNumbers(url, numbers(WINDOW + 44));
    (await first.until(WINDOW))[17]?.acknowledge();
    // One more comes in, so the broker has had the PUBACK.
    await first.until(WINDOW + 1);
    line.cut();
    const second = await open(url, { acknowledging: true });
    const expected = numbers(WINDOW + 44).filter((i) => i !== 17);
    await second.until(expected.length);
    expect(second.deliveries.map(numberOf)).toEqual(expected);
    await second.source.stop();
    expect(await leftOver(url)).toEqual([]);
  });

  test('what waited at the broker and comes in one piece with its CONNACK is acknowledged too', async () => {
    const { url } = await startMosquitto();
    await (await open(url)).source.stop();
    await publishNumbers(url, numbers(40));
    const line = await openLine(url);
    // More than CONNACK (3 bytes and properties) and less than that with forty PUBLISHes.
    line.gather(40 * FRAME.length);
    const { source, until } = await open(line.url);
    for (const { acknowledge } of await until(40)) acknowledge();
    await source.stop();
    expect(await leftOver(url)).toEqual([]);
  });

  test('an acknowledgement that outlives its connection is not sent on the next', async () => {
    const { url } = await startMosquitto();
    const line = await openLine(url);
    const { source, until, deliveries } = await open(line.url);
    await publishNumbers(url, numbers(3));
    await until(3);
    line.cut();
    for (const { acknowledge } of deliveries.slice(0, 1)) acknowledge();
    line.mend();
    await until(6);
    for (const { acknowledge } of deliveries.slice(1, 3)) acknowledge();
    deliveries[5]?.acknowledge();
    await source.stop();
    expect(deliveries.map(numberOf)).toEqual([0, 1, 2, 0, 1, 2]);
    expect(await leftOver(url)).toEqual(['0', '1']);
  });

  test('the broker ends and starts again: the source is there again, nothing is lost', async () => {
    const broker = await startMosquitto();
    const { source, until, deliveries } = await open(broker.url);
    await publishNumbers(broker.url, numbers(5));
    await until(5);
    await broker.stop();
    await broker.start();
    await publishNumbers(broker.url, numbers(3, 5));
    for (const { acknowledge } of (await until(13)).slice(5)) acknowledge();
    expect(deliveries.map(numberOf)).toEqual([...numbers(5), ...numbers(8)]);
    expect(source.connected()).toBe(true);
    await source.stop();
    expect(await leftOver(broker.url)).toEqual([]);
  });

  test('a message longer than the source takes stays at the broker and holds up none', async () => {
    const { url } = await startMosquitto();
    const { until, deliveries } = await open(url, { acknowledging: true });
    const node = await nodeClient(url);
    await publish(node, 'n1', Buffer.alloc(17 * 2 ** 20));
    await publish(node, 'n1', 'after');
    await until(1);
    expect(deliveries.map(textOf)).toEqual(['after']);
  });

  test('stopping is quick when the broker is away', async () => {
    const { url } = await startMosquitto();
    const line = await openLine(url);
    const { source } = await open(line.url);
    line.cut();
    await source.stop();
    expect(source.connected()).toBe(false);
  });

  test('no broker there: said within the time, with the reason and without the password', async () => {
    const { url, stop } = await startMosquitto();
    await stop();
    const own = fakeClock();
    const heard = { say: (_: string) => undefined as void };
    const trouble = new Promise<string>((resolve) => (heard.say = resolve));
    const source = externalBroker({
      ...{ url: url.replace('//', '//user:secret@'), clientId: 'nobody', clock: own },
      say: (line) => heard.say(line),
    });
    const started = source.start(() => undefined);
    expect(await trouble).toMatch(/ECONNREFUSED/);
    own.advance(10);
    await expect(started).rejects.toThrow(/^no connection to mqtt:\/\/127.*within 10 s: .*REFUSED/);
    expect(source.description()).not.toMatch(/secret/);
  });
});

describe.each([
  ['mosquitto', async () => (await startMosquitto()).url],
  ['aedes', async () => (await startAedes()).url],
] as const)('%s', (_, start) => {
  test('a source that starts later sees the status that the broker kept', async () => {
    const url = await start();
    const topic = topicOf('n1', 'status');
    await (await nodeClient(url)).publishAsync(topic, 'here', { qos: 1, retain: true });
    const { until } = await open(url, { acknowledging: true });
    const [delivery] = await until(1);
    expect(delivery?.topic).toBe(topic);
    expect(delivery?.retained).toBe(true);
  });
});

test('each PUBACK goes out when its own delivery is acknowledged, and in that order', async () => {
  const { url, broker } = await startAedes();
  const acknowledged: number[] = [];
  let wake = () => undefined as void;
  broker.on('ack', (packet) => {
    if ('payload' in packet) acknowledged.push(Number(packet.payload));
    wake();
  });
  const { until } = await open(url);
  await publishNumbers(url, numbers(40));
  const came = await until(40);
  const order = [17, 3, ...numbers(40).filter((i) => i !== 17 && i !== 3)];
  for (const i of order) {
    // One sent before its time would be there before this one: the connection keeps order.
    const seen = new Promise<void>((resolve) => (wake = resolve));
    came[i]?.acknowledge();
    await seen;
    expect(acknowledged.at(-1)).toBe(i);
  }
  expect(acknowledged).toEqual(order);
});

test('a broker that speaks MQTT 3.1.1 only is spoken to in that', async () => {
  const { source, until } = await open((await startAedes()).url, { acknowledging: true });
  expect(source.description()).toMatch(/MQTT 3\.1\.1/);
  expect(await until(0)).toEqual([]);
});

test('a broker that turns the source away is asked again', async () => {
  let asked = 0;
  const { url } = await startAedes({
    authenticate: (client, _user, _password, done) =>
      done(null, client.id !== 'yieldward' || asked++ > 0),
  });
  const { until } = await open(url, { acknowledging: true, protocolVersion: 4 });
  await publishNumbers(url, [7]);
  expect((await until(1)).map(numberOf)).toEqual([7]);
  expect(asked).toBe(2);
});
