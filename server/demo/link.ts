import mqtt from 'mqtt';
import { encodeStatus } from '../../shared/pipeline/1-decode/status.ts';
import { commandTopic } from '../../shared/pipeline/1-decode/command.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import { DEMO_FILTER } from './fault-request.ts';

/** A node's connection to the broker: an ordinary MQTT 3.1.1 client. */
export interface Link {
  /** QoS 1; kept and sent again until the broker has acknowledged it. */
  publish(topic: string, payload: Uint8Array | string): void;
  /** Messages that the broker has not acknowledged yet. */
  pending(): number;
  /** Breaks the connection, so that the will goes out, and comes back after `seconds`. */
  dropOut(seconds: number): void;
  stop(): Promise<void>;
}

const RECONNECT = 500;
const SOFTWARE = 'Yieldward simulated node';
/** An orderly end waits so long for outstanding acknowledgements, ms. */
const LAST_WAIT = 1000;

export const openLink = (options: {
  readonly broker: string;
  readonly node: string;
  readonly boot: string;
  readonly connected: () => void;
  readonly heard: (topic: string, payload: Uint8Array) => void;
  readonly say: (line: string) => void;
}): Link => {
  const { node, boot } = options;
  const topic = topicOf(node, 'status');
  const status = (online: boolean) =>
    JSON.stringify(encodeStatus({ online, boot, software: SOFTWARE }));
  const client = mqtt.connect(options.broker, {
    ...{ protocolVersion: 4, clean: true, keepalive: 10, reconnectPeriod: RECONNECT },
    clientId: `simulated-${node}-${boot}`,
    will: { topic, payload: Buffer.from(status(false)), qos: 1, retain: true },
  });
  let pending = 0;
  let stopping = false;
  const publish = (to: string, payload: Uint8Array | string, retain = false) => {
    pending++;
    const bytes = typeof payload === 'string' ? payload : Buffer.from(payload);
    client.publish(to, bytes, { qos: 1, retain }, (error) => {
      pending--;
      if (error && !stopping) options.say(`not published: ${error.message}`);
    });
  };
  client.on('connect', () => {
    client.options.reconnectPeriod = RECONNECT;
    publish(topic, status(true), true);
    client.subscribe([DEMO_FILTER, commandTopic(node)], { qos: 1 });
    options.connected();
  });
  client.on('message', options.heard);
  client.on('error', (error) => options.say(`broker: ${error.message}`));
  return {
    publish: (to, payload) => publish(to, payload),
    pending: () => pending,
    dropOut: (seconds) => {
      client.options.reconnectPeriod = seconds * 1e3;
      client.stream.destroy();
    },
    stop: async () => {
      stopping = true;
      if (client.connected) publish(topic, status(false), true);
      const late = new Promise<void>((resolve) => {
        setTimeout(resolve, LAST_WAIT).unref();
      });
      await Promise.race([client.endAsync(!client.connected), late]);
    },
  };
};
