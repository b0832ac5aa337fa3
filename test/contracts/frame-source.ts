import { connectAsync, type MqttClient } from 'mqtt';
import { describe, expect, onTestFinished, test } from 'vitest';
import type { Delivery, FrameSource } from '../../server/ports.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';

/** A broker with a source on it. */
export interface SourceUnderTest {
  /** Where nodes connect; known once the source has started. */
  readonly url: () => string;
  readonly source: FrameSource;
}

/** Deliveries in the order they came, and waiting for them without sleeping. */
export const inbox = () => {
  const deliveries: Delivery[] = [];
  let wake = () => undefined as void;
  return {
    deliveries,
    receive: (delivery: Delivery) => {
      deliveries.push(delivery);
      wake();
    },
    until: async (count: number) => {
      while (deliveries.length < count) await new Promise<void>((resolve) => (wake = resolve));
      return deliveries;
    },
  };
};

export const nodeClient = async (url: string, will?: { topic: string; payload: string }) => {
  const client = await connectAsync(url, {
    protocolVersion: 4,
    ...(will
      ? { will: { ...will, payload: Buffer.from(will.payload), qos: 1, retain: true } }
      : {}),
  });
  onTestFinished(() => client.endAsync(true));
  return client;
};

export const textOf = ({ payload }: Delivery) => Buffer.from(payload).toString();

export const publish = (client: MqttClient, node: string, payload: string | Buffer) =>
  client.publishAsync(topicOf(node, 'frame'), payload, { qos: 1 });

/** Resolves when the client's connection has ended. */
export const closing = (client: MqttClient): Promise<void> =>
  new Promise((resolve) => client.once('close', resolve));

/** A frame of 32 inputs × 100 float32 is this long, bytes. */
export const FRAME_BYTES = 12_900;
const MANY = 100;

export const describeFrameSource = (name: string, open: () => Promise<SourceUnderTest>) =>
  describe(`FrameSource: ${name}`, () => {
    const scene = async () => {
      const { url, source } = await open();
      const box = inbox();
      await source.start(box.receive);
      onTestFinished(() => source.stop());
      return { url: url(), source, ...box };
    };

    test('each message comes once, whole, on its topic', async () => {
      const { url, until, deliveries, source } = await scene();
      const client = await nodeClient(url);
      const sent = Array.from({ length: 50 }, (_, i) => `n1-${i}`);
      const all = Promise.all(sent.map((text) => publish(client, 'n1', text)));
      (await until(50)).forEach(({ acknowledge }) => acknowledge());
      await all;
      const last = publish(client, 'n1', 'fence');
      (await until(51)).at(-1)?.acknowledge();
      await last;
      expect(deliveries.map(textOf)).toEqual([...sent, 'fence']);
      expect(new Set(deliveries.map(({ topic }) => topic))).toEqual(
        new Set([topicOf('n1', 'frame')]),
      );
      expect(source.connected()).toBe(true);
    });

    test('bytes are bytes, at QoS 0 too', async () => {
      const { url, until } = await scene();
      const client = await nodeClient(url);
      const payload = Buffer.from(Array.from({ length: 4096 }, (_, i) => i % 256));
      await client.publishAsync(topicOf('n1', 'frame'), payload, { qos: 0 });
      const [delivery] = await until(1);
      delivery?.acknowledge();
      expect(Buffer.from(delivery?.payload ?? [])).toEqual(payload);
    });

    test(`${MANY} frames of one node are at hand before the first is acknowledged, in any order then`, async () => {
      const { url, until, deliveries } = await scene();
      const client = await nodeClient(url);
      const frame = (i: number) => Buffer.alloc(FRAME_BYTES, i);
      const all = Array.from({ length: MANY }, (_, i) => publish(client, 'n1', frame(i)));
      await until(MANY);
      expect(deliveries.map(({ payload }) => payload[0])).toEqual(
        Array.from({ length: MANY }, (_, i) => i),
      );
      for (const { acknowledge } of deliveries.toReversed()) acknowledge();
      await Promise.all(all);
      const more = publish(client, 'n1', 'more');
      const came = await until(MANY + 1);
      came.at(-1)?.acknowledge();
      await more;
      expect(came.map(({ payload }) => payload.length)).toEqual([
        ...Array.from({ length: MANY }, () => FRAME_BYTES),
        4,
      ]);
    });

    test("each node's messages keep their order, whatever other nodes send", async () => {
      const { url, until } = await scene();
      const names = ['n1', 'n2', 'n3'];
      const clients = await Promise.all(names.map(() => nodeClient(url)));
      const all: Promise<unknown>[] = [];
      for (let i = 0; i < 40; i++) {
        clients.forEach((client, c) => all.push(publish(client, names[c] ?? '', String(i))));
      }
      const came = await until(120);
      came.forEach(({ acknowledge }) => acknowledge());
      await Promise.all(all);
      const inOrder = Array.from({ length: 40 }, (_, i) => String(i));
      for (const node of names) {
        const own = came.filter(({ topic }) => topic === topicOf(node, 'frame'));
        expect(own.map(textOf)).toEqual(inOrder);
      }
    });

    test('a node that is cut off leaves its will, once, after what it sent', async () => {
      const { url, until, deliveries } = await scene();
      const topic = topicOf('n1', 'status');
      const node = await nodeClient(url, { topic, payload: 'gone' });
      node.options.reconnectPeriod = 0;
      const here = node.publishAsync(topic, 'here', { qos: 1, retain: true });
      (await until(1))[0]?.acknowledge();
      await here;
      node.stream.destroy();
      (await until(2))[1]?.acknowledge();
      const other = await nodeClient(url);
      const fence = publish(other, 'n2', 'fence');
      (await until(3))[2]?.acknowledge();
      await fence;
      expect(deliveries.map(textOf)).toEqual(['here', 'gone', 'fence']);
      // Live messages, though published to be retained [MQTT-3.3.1-9].
      expect(deliveries.map(({ retained }) => retained)).toEqual([false, false, false]);
    });

    test('acknowledging after the node has gone harms nobody', async () => {
      const { url, until, source } = await scene();
      const [gone, other] = [await nodeClient(url), await nodeClient(url)];
      gone.options.reconnectPeriod = 0;
      const closed = closing(gone);
      for (let i = 0; i < 20; i++) gone.publish(topicOf('n1', 'frame'), `${i}`, { qos: 1 });
      const came = [...(await until(20))];
      gone.stream.destroy();
      await closed;
      for (const { acknowledge } of came) acknowledge();
      const fence = publish(other, 'n2', 'fence');
      (await until(21)).at(-1)?.acknowledge();
      await fence;
      expect(source.connected()).toBe(true);
    });

    test('a message longer than allowed is handed on to be refused, and holds up none', async () => {
      const { url, until } = await scene();
      const node = await nodeClient(url);
      const long = publish(node, 'n1', Buffer.alloc(2 ** 20 + 1));
      const short = publish(node, 'n1', 'short');
      const came = await until(2);
      came.forEach(({ acknowledge }) => acknowledge());
      await Promise.all([long, short]);
      expect(came.map(({ payload }) => payload.length)).toEqual([2 ** 20 + 1, 5]);
    });

    test('nothing is handed over once stopping has begun, acknowledging still harms nobody', async () => {
      const { url, source } = await open();
      const box = inbox();
      const stopped: Promise<void>[] = [];
      await source.start((delivery) => {
        box.receive(delivery);
        // Others are right behind this one.
        stopped.push(source.stop());
      });
      const status = { topic: topicOf('n1', 'status'), payload: 'gone' };
      const node = await nodeClient(url(), status);
      node.options.reconnectPeriod = 0;
      const closed = closing(node);
      const all = Array.from({ length: 100 }, (_, i) => publish(node, 'n1', String(i)));
      await box.until(1);
      await Promise.all(stopped);
      // The embedded broker has gone; another has all of them.
      await Promise.race([Promise.all(all), closed]);
      box.deliveries[0]?.acknowledge();
      expect(box.deliveries.map(textOf)).toEqual(['0']);
      expect(source.connected()).toBe(false);
    });
  });
