import { createServer, type AddressInfo, type Server, type Socket } from 'node:net';
import { Aedes, type AedesPublishPacket } from 'aedes';
import { TOPIC_ROOT } from '../../shared/pipeline/1-decode/topics.ts';
import type { Clock, Delivery, FrameSource } from '../ports.ts';
import { LONGEST_MESSAGE } from './decode.ts';

export interface EmbeddedBroker extends FrameSource {
  /** The port it listens on, once started. */
  port(): number;
}

/** Messages of one client that may wait for their commit at once: what group commit feeds on. */
const UNDER_WAY = 128;
const HEADERS = 1024;

const bytesOf = (payload: AedesPublishPacket['payload']): Uint8Array =>
  typeof payload === 'string' ? Buffer.from(payload) : payload;

/**
 * An MQTT 3.1.1 broker within the process (aedes). A node's publication is handed
 * on before the broker takes it, and the broker's PUBACK waits for that: it goes
 * out when the delivery is acknowledged, that is after the commit. Wills come the
 * same way.
 */
export const embeddedBroker = async (options: {
  readonly host: string;
  readonly port: number;
  readonly clock: Clock;
}): Promise<EmbeddedBroker> => {
  const aedes = await Aedes.createBroker({ concurrency: UNDER_WAY, queueLimit: UNDER_WAY });
  const sockets = new Set<Socket>();
  let server: Server | null = null;
  let open = false;

  const listen = (receive: (delivery: Delivery) => void): Promise<void> => {
    aedes.authorizePublish = (_client, packet, done) => {
      const payload = bytesOf(packet.payload);
      if (!packet.topic.startsWith(`${TOPIC_ROOT}/`)) return done(null);
      if (payload.length > LONGEST_MESSAGE + HEADERS) return done(new Error('message too long'));
      receive({
        ...{ topic: packet.topic, payload, retained: packet.retain, arrived: options.clock.now() },
        acknowledge: () => done(null),
      });
    };
    const listening = createServer((socket) => {
      sockets.add(socket);
      socket.once('close', () => sockets.delete(socket));
      aedes.handle(socket);
    });
    server = listening;
    return new Promise((resolve, reject) => {
      listening.once('error', reject);
      listening.listen(options.port, options.host, () => {
        open = true;
        resolve();
      });
    });
  };

  return {
    start: listen,
    connected: () => open,
    port: () => (server?.address() as AddressInfo | null)?.port ?? options.port,
    stop: async () => {
      open = false;
      const closed = new Promise<void>((resolve) =>
        server ? server.close(() => resolve()) : resolve(),
      );
      for (const socket of sockets) socket.destroy();
      await closed;
      await new Promise<void>((resolve) => aedes.close(() => resolve()));
    },
  };
};
