import { once, type EventEmitter } from 'node:events';
import { createServer, type AddressInfo, type Server, type Socket } from 'node:net';
import { Aedes, type AedesPublishPacket, type Client } from 'aedes';
import { TOPIC_ROOT } from '../../shared/pipeline/1-decode/topics.ts';
import type { Clock, Delivery, FrameSource, NodeCommands } from '../ports.ts';
import { CommandPost } from './command-post.ts';
import { LONGEST_READ } from './decode.ts';
import { announcedLength, readOn } from './read-on.ts';

export interface EmbeddedBroker extends FrameSource, NodeCommands {
  /** The port it listens on, once started. */
  port(): number;
}

/** While fewer messages of a connection wait for their commit, reading goes on. */
const UNDER_WAY = 128;

const bytesOf = (payload: AedesPublishPacket['payload']): Uint8Array =>
  typeof payload === 'string' ? Buffer.from(payload) : payload;

/**
 * An MQTT 3.1.1 broker within the process (aedes). A node's publication is handed
 * on before the broker takes it, and the broker's PUBACK waits for that: it goes
 * out when the delivery is acknowledged, that is after the commit. Wills come the
 * same way. Nothing retained outlives the process.
 */
export const embeddedBroker = (options: {
  readonly host: string;
  readonly port: number;
  readonly clock: Clock;
  readonly say?: (line: string) => void;
}): EmbeddedBroker => {
  const { host, clock, say } = options;
  const sockets = new Set<Socket>();
  const waiting = new WeakMap<Client, number>();
  let broker: Aedes | null = null;
  let server: Server | null = null;
  let open = false;

  const post = new CommandPost(
    clock,
    (topic, payload) =>
      new Promise((resolve, reject) => {
        if (!broker || !open) return reject(new Error('the broker is not running'));
        const packet = {
          cmd: 'publish',
          topic,
          payload,
          qos: 1,
          retain: false,
          dup: false,
        } as const;
        broker.publish(packet, (error) => (error ? reject(error) : resolve()));
      }),
  );

  /** Counts a publication that waits; answers how to count it off. */
  const countIn = (client: Client | null): (() => void) => {
    if (!client) return () => undefined;
    const before = waiting.get(client) ?? 0;
    waiting.set(client, before + 1);
    if (before + 1 < UNDER_WAY) readOn(client);
    return () => waiting.set(client, (waiting.get(client) ?? 1) - 1);
  };

  const handOver = (aedes: Aedes, receive: (delivery: Delivery) => void) => {
    /** What aedes itself allows: everything but its own $SYS. */
    const allow = aedes.authorizePublish;
    aedes.authorizePublish = (client, packet, done) => {
      if (!packet.topic.startsWith(`${TOPIC_ROOT}/`)) return allow(client, packet, done);
      if (!open) return done(new Error('stopping'));
      if (post.takes(packet.topic, bytesOf(packet.payload))) return done(null);
      const countOff = countIn(client);
      receive({
        topic: packet.topic,
        payload: bytesOf(packet.payload),
        retained: false,
        arrived: clock.now(),
        acknowledge: () => {
          countOff();
          if (open) done(null);
        },
      });
    };
  };

  const attend = (aedes: Aedes, socket: Socket) => {
    sockets.add(socket);
    socket.once('close', () => sockets.delete(socket));
    const client = aedes.handle(socket);
    socket.on('readable', () => {
      const length = announcedLength(client);
      if (length <= LONGEST_READ) return;
      const from = socket.remoteAddress ?? 'unknown';
      say?.(`broker: cut off ${from}: a message of ${length} bytes is longer than can be read`);
      socket.destroy();
    });
  };

  const port = () => (server?.address() as AddressInfo | null)?.port ?? options.port;

  const address = () => `mqtt://${host.includes(':') ? `[${host}]` : host}:${port()}`;

  const stop = async () => {
    open = false;
    post.close();
    const listening = server;
    if (listening?.listening) {
      const closed = new Promise<void>((resolve) => listening.close(() => resolve()));
      for (const socket of sockets) socket.destroy();
      await closed;
    }
    const aedes = broker;
    if (aedes) await new Promise<void>((resolve) => aedes.close(() => resolve()));
  };

  return {
    start: async (receive) => {
      const aedes = await Aedes.createBroker({ queueLimit: UNDER_WAY });
      broker = aedes;
      (aedes as EventEmitter).on('error', (error: Error) => say?.(`broker: ${error.message}`));
      handOver(aedes, receive);
      const listening = createServer((socket) => attend(aedes, socket));
      server = listening;
      try {
        await once(listening.listen(options.port, host), 'listening');
      } catch (error) {
        await stop();
        throw error;
      }
      listening.on('error', (error) => say?.(`broker: ${error.message}`));
      open = true;
    },
    command: post.command,
    connected: () => open,
    port,
    address,
    description: () => `${address()}, embedded, MQTT 3.1.1`,
    stop,
  };
};
