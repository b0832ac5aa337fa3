import mqtt, { type ErrorWithReasonCode, type IClientOptions, type MqttClient } from 'mqtt';
import { TOPIC_FILTER } from '../../shared/pipeline/1-decode/topics.ts';
import type { Clock, FrameSource, NodeCommands } from '../ports.ts';
import { CommandPost } from './command-post.ts';
import { LONGEST_READ } from './decode.ts';
import { deferPubacks } from './deferred-puback.ts';

/** Unacknowledged messages that the broker may have under way to us. */
const UNDER_WAY = 256;
/** The broker keeps our session, and queues for it, while we are gone: a month, s. */
const SESSION_KEPT = 30 * 24 * 3600;
/** The first connection has to stand within, s. */
const PATIENCE = 10;
/** Between attempts to connect again, ms: doubled each time up to the longest. */
const FIRST_PAUSE = 1000;
const LONGEST_PAUSE = 8000;
/** An orderly end may take, s; then the connection is cut. */
const LAST_WAIT = 2;

/** Unsupported version, as a broker of MQTT 3.1.1 (§3.2.2.3) and of 5.0 (§3.2.2.2) says it. */
const OTHER_VERSION: readonly unknown[] = [0x01, 0x84];

const OPTIONS: IClientOptions = {
  clean: false,
  resubscribe: false,
  reconnectOnConnackError: true,
  reconnectPeriod: FIRST_PAUSE,
  connectTimeout: 5000,
  properties: {
    sessionExpiryInterval: SESSION_KEPT,
    receiveMaximum: UNDER_WAY,
    maximumPacketSize: LONGEST_READ,
  },
};

/** Tries again for ever, at growing intervals; in MQTT 3.1.1 if that is what the broker speaks. */
const persist = (client: MqttClient, mayFallBack: boolean): void => {
  const { options } = client;
  client.on('reconnect', () => {
    options.reconnectPeriod = Math.min(2 * (options.reconnectPeriod ?? 0), LONGEST_PAUSE);
  });
  client.on('connect', () => {
    options.reconnectPeriod = FIRST_PAUSE;
  });
  client.on('error', (error: Error | ErrorWithReasonCode) => {
    if (mayFallBack && 'code' in error && OTHER_VERSION.includes(error.code)) {
      options.protocolVersion = 4;
    }
  });
};

/**
 * Another broker, by a client with a persistent session of a fixed name: what
 * comes while the server is away waits at the broker. Speaks MQTT 5, and 3.1.1
 * with a broker that refuses 5; `protocolVersion` settles it beforehand.
 */
export const externalBroker = (options: {
  readonly url: string;
  readonly clientId: string;
  readonly clock: Clock;
  readonly protocolVersion?: 4 | 5;
  readonly say?: (line: string) => void;
}): FrameSource & NodeCommands => {
  const { clock, clientId, protocolVersion, say } = options;
  const { protocol, host } = new URL(options.url);
  const place = `${protocol}//${host}`;
  let client: MqttClient | null = null;
  let open = false;

  const post = new CommandPost(clock, async (topic, payload) => {
    // Kept by the client until it is connected again, a command would come when nobody expects it.
    if (!client?.connected) throw new Error(`${place} is out of reach`);
    await client.publishAsync(topic, payload, { qos: 1, retain: false });
  });

  const firstSubscription = (connecting: MqttClient): Promise<void> =>
    new Promise((resolve, reject) => {
      let trouble = '';
      /** The same trouble at every attempt is told once. */
      const tell = (text: string) => {
        if (text !== trouble) say?.(`broker: ${text}`);
        trouble = text;
      };
      const cancel = clock.after(PATIENCE, () =>
        reject(
          new Error(`no connection to ${place} within ${PATIENCE} s: ${trouble || 'silence'}`),
        ),
      );
      connecting.on('error', (error) => tell(error.message));
      connecting.on('connect', () => {
        trouble = '';
        connecting.subscribe(TOPIC_FILTER, { qos: 1 }, (error) => {
          if (error) return tell(error.message);
          cancel();
          resolve();
        });
      });
    });

  return {
    command: post.command,
    connected: () => client?.connected ?? false,
    address: () => place,
    description: () =>
      `${place}, MQTT ${(client?.options.protocolVersion ?? protocolVersion) === 4 ? '3.1.1' : '5'}`,
    start: async (receive) => {
      const connecting = mqtt.connect(options.url, {
        ...OPTIONS,
        clientId,
        protocolVersion: protocolVersion ?? 5,
      });
      client = connecting;
      open = true;
      deferPubacks(connecting, ({ topic, payload, retain }, acknowledge) => {
        if (!open) return;
        const bytes = typeof payload === 'string' ? Buffer.from(payload) : payload;
        if (post.takes(topic, bytes)) return acknowledge();
        receive({ topic, payload: bytes, retained: retain, arrived: clock.now(), acknowledge });
      });
      persist(connecting, protocolVersion === undefined);
      await firstSubscription(connecting).catch(async (error: unknown) => {
        await connecting.endAsync(true);
        throw error;
      });
    },
    stop: async () => {
      open = false;
      post.close();
      if (!client) return;
      const { stream } = client;
      const cancel = clock.after(LAST_WAIT, () => stream.destroy());
      await client.endAsync(!client.connected);
      cancel();
    },
  };
};
