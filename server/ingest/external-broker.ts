import mqtt, { type MqttClient } from 'mqtt';
import { TOPIC_FILTER } from '../../shared/pipeline/1-decode/topics.ts';
import type { Clock, FrameSource } from '../ports.ts';
import { deferPubacks } from './deferred-puback.ts';

/** Unacknowledged messages that the broker may have under way to us. */
const UNDER_WAY = 256;
/** The broker keeps our session, and queues for it, while we are gone: a month, s. */
const SESSION_KEPT = 30 * 24 * 3600;
const FIRST_CONNECTION = 10_000;

/**
 * Another broker, by a client with a persistent session of a fixed name: what
 * comes while the server is away waits at the broker. `protocolVersion` 4 is for
 * brokers that speak MQTT 3.1.1 only.
 */
export const externalBroker = (options: {
  readonly url: string;
  readonly clientId: string;
  readonly clock: Clock;
  readonly protocolVersion?: 4 | 5;
  readonly say?: (line: string) => void;
}): FrameSource => {
  let client: MqttClient | null = null;
  const version = options.protocolVersion ?? 5;
  return {
    connected: () => client?.connected ?? false,
    start: async (receive) => {
      const connecting = mqtt.connect(options.url, {
        ...{
          protocolVersion: version,
          clientId: options.clientId,
          clean: false,
          resubscribe: false,
        },
        ...{ reconnectPeriod: 1000, connectTimeout: 5000 },
        ...(version === 5
          ? { properties: { sessionExpiryInterval: SESSION_KEPT, receiveMaximum: UNDER_WAY } }
          : {}),
      });
      client = connecting;
      deferPubacks(connecting, ({ topic, payload, retain }, release) =>
        receive({
          ...{ topic, retained: retain, arrived: options.clock.now(), acknowledge: release },
          payload: typeof payload === 'string' ? Buffer.from(payload) : payload,
        }),
      );
      connecting.on('error', (error) => options.say?.(`broker: ${error.message}`));
      const subscribed = new Promise<void>((resolve, reject) => {
        connecting.on('connect', () => {
          connecting.subscribe(TOPIC_FILTER, { qos: 1 }, (error) => {
            if (error) reject(error);
            else resolve();
          });
        });
      });
      const late = new Promise<never>((_, reject) => {
        setTimeout(
          () => reject(new Error(`no connection to ${options.url} within 10 s`)),
          FIRST_CONNECTION,
        ).unref();
      });
      await Promise.race([subscribed, late]).catch(async (error: unknown) => {
        await connecting.endAsync(true);
        throw error;
      });
    },
    stop: async () => {
      await client?.endAsync();
    },
  };
};
