import { once } from 'node:events';
import { createServer, type Server } from 'node:http';
import { connect, createServer as createRelay, type AddressInfo, type Socket } from 'node:net';
import { io, type Socket as Client } from 'socket.io-client';
import { onTestFinished } from 'vitest';
import { createPush, type Push } from '../../server/push/push.ts';
import type { Clock, Core } from '../../server/ports.ts';
import {
  unpackLive,
  type ClientToServer,
  type LiveValue,
  type ServerToClient,
} from '../../shared/protocol/socket.ts';
import { plainCore } from '../helpers/core.ts';

export interface Pushing {
  readonly server: Server;
  readonly port: number;
  readonly push: Push;
  /** What waits inside the server for all of its connections, bytes. */
  readonly held: () => number;
}

/** The real push on a free port, over a plain core. */
export const startPush = async (
  clock: Clock,
  over: Partial<Core> = {},
  host = '127.0.0.1',
): Promise<Pushing> => {
  const server = createServer((_request, response) => void response.end('page'));
  const push = createPush({ server, core: plainCore(over), clock, host });
  const sockets = new Set<Socket>();
  server.on('connection', (socket) => {
    sockets.add(socket);
    socket.once('close', () => sockets.delete(socket));
  });
  server.listen(0, '127.0.0.1');
  await once(server, 'listening');
  onTestFinished(async () => {
    sockets.forEach((socket) => socket.destroy());
    await push.close();
    server.close();
  });
  return {
    server,
    port: (server.address() as AddressInfo).port,
    push,
    held: () => [...sockets].reduce((sum, socket) => sum + socket.writableLength, 0),
  };
};

export type Browser = Client<ServerToClient, ClientToServer>;

/** A real client that has not connected yet. */
export const browserFor = (port: number, options: object = {}): Browser => {
  const client: Browser = io(`http://127.0.0.1:${port}`, {
    transports: ['websocket'],
    forceNew: true,
    autoConnect: false,
    reconnectionDelay: 1,
    ...options,
  });
  onTestFinished(() => void client.disconnect());
  return client;
};

/** Node's client gives a Buffer where a browser gives an ArrayBuffer. */
export const valuesOf = (packed: ArrayBuffer | Uint8Array): LiveValue[] =>
  unpackLive(new Uint8Array(packed).slice().buffer);

/** Resolves with the next event of that name. */
export const next = <E extends keyof ServerToClient>(
  client: Browser,
  event: E,
): Promise<Parameters<ServerToClient[E]>> =>
  new Promise((resolve) => {
    const hear = (...heard: unknown[]) => resolve(heard as Parameters<ServerToClient[E]>);
    client.once(event as 'connect', hear);
  });

/** Resolves with the next values. */
export const nextValues = async (client: Browser): Promise<LiveValue[]> =>
  valuesOf((await next(client, 'live'))[0]);

/** A stretch of network between browser and server whose browser can stop reading. */
export const startRelay = async (to: number) => {
  const towardServer = new Set<Socket>();
  const relay = createRelay((near) => {
    const far = connect(to, '127.0.0.1');
    towardServer.add(far);
    near.pipe(far);
    far.on('data', (chunk) => near.write(chunk));
    for (const socket of [near, far]) {
      socket.on('error', () => socket.destroy());
      socket.once('close', () => {
        near.destroy();
        far.destroy();
        towardServer.delete(far);
      });
    }
  }).listen(0, '127.0.0.1');
  await once(relay, 'listening');
  onTestFinished(() => {
    towardServer.forEach((socket) => socket.destroy());
    relay.close();
  });
  return {
    port: (relay.address() as AddressInfo).port,
    stopReading: () => towardServer.forEach((far) => far.pause()),
    readOn: () => towardServer.forEach((far) => far.resume()),
    cut: () => towardServer.forEach((far) => far.destroy()),
  };
};
