import { connectAsync, type MqttClient } from 'mqtt';
import { describe, expect, onTestFinished, test } from 'vitest';
import type { Delivery, FrameSource } from '../../server/ports.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';

/** A broker with a source on it; a second source on the same broker where there can be one. */
export interface SourceUnderTest {
  /** Known once the source has started. */
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

const textOf = ({ payload }: Delivery) => Buffer.from(payload).toString();

const publish = (client: MqttClient, node: string, text: string) =>
  client.publishAsync(topicOf(node, 'frame'), text, { qos: 1 });

export const describeFrameSource = (name: string, open: () => Promise<SourceUnderTest>) =>
  describe(`FrameSource: ${name}`, () => {
    const scene = async () => {
      const { url, source } = await open();
      const box = inbox();
      await source.start(box.receive);
      onTestFinished(() => source.stop());
      return { url: url(), source, ...box };
    };

    test('each message comes once, whole, on its topic, in its order', async () => {
      const { url, until, source } = await scene();
      const client = await nodeClient(url);
      const sent = Array.from({ length: 50 }, (_, i) => `n1-${i}`);
      const all = Promise.all(sent.map((text) => publish(client, 'n1', text)));
      const came = await until(50);
      came.forEach(({ acknowledge }) => acknowledge());
      await all;
      expect(came.map(textOf)).toEqual(sent);
      expect(new Set(came.map(({ topic }) => topic))).toEqual(new Set([topicOf('n1', 'frame')]));
      expect(source.connected()).toBe(true);
    });

    test('bytes are bytes', async () => {
      const { url, until } = await scene();
      const client = await nodeClient(url);
      const payload = Buffer.from(Array.from({ length: 4096 }, (_, i) => i % 256));
      await client.publishAsync(topicOf('n1', 'frame'), payload, { qos: 0 });
      const [delivery] = await until(1);
      delivery?.acknowledge();
      expect(Buffer.from(delivery?.payload ?? [])).toEqual(payload);
    });
  });
