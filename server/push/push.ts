import type { Server as HttpServer } from 'node:http';
import type { Duplex } from 'node:stream';
import { Server, type Socket } from 'socket.io';
import { hostAllowed, sameOrigin } from '../../shared/protocol/origin.ts';
import {
  packLive,
  type ClientToServer,
  type ServerToClient,
} from '../../shared/protocol/socket.ts';
import type { Clock, Core, Feed } from '../ports.ts';
import { Outlet, type Pace, type Wire } from './outlet.ts';

export interface PushParts {
  readonly server: HttpServer;
  readonly core: Core;
  readonly clock: Clock;
  /** The address that the server will listen on: on loopback other names are not answered. */
  readonly host: string;
  readonly pace?: Pace;
}

export interface Push {
  readonly feed: Feed;
  /** Browsers connected now. */
  browsers(): number;
  /** Ends every connection; the HTTP server is left to whoever began it. */
  close(): Promise<void>;
}

/**
 * Each channel at the display rate, at once when it has been quiet so long.
 * Nodes send at different moments, so messages are more frequent than that, up
 * to five at a time and a hundred a second.
 */
export const DISPLAY_PACE: Pace = {
  channelGap: 0.05,
  messages: { gap: 0.01, burst: 5 },
};

/** Browsers have nothing to send but the connection's own packets, bytes. */
const LARGEST_MESSAGE = 1024;
/** A connection that does not end by itself within so long is cut, s. */
const PATIENCE = 1;

type Browser = Socket<ClientToServer, ServerToClient>;

/**
 * engine.io hands one message at a time to the network: `writable` turns false
 * when it does, and true, followed by `ready`, when the kernel has taken it and
 * nothing else waits.
 */
const wireTo = (socket: Browser): Wire => ({
  clear: () => socket.connected && socket.conn.transport.writable,
  live: (values) => void socket.emit('live', packLive(values).buffer),
  alarms: (list) => void socket.emit('alarms', list),
  nodes: (nodes) => void socket.emit('nodes', nodes),
  limits: (channel, limits) => void socket.emit('limits', channel, limits),
  health: (health) => void socket.emit('health', health),
  revision: (revision) => void socket.emit('revision', revision),
});

/** The live connection to browsers, over WebSocket on the server of the page. */
export const createPush = ({ server, core, clock, host, pace = DISPLAY_PACE }: PushParts): Push => {
  const outlets = new Set<Outlet>();
  const connections = new Set<Duplex>();
  const io = new Server<ClientToServer, ServerToClient>(server, {
    transports: ['websocket'],
    serveClient: false,
    perMessageDeflate: false,
    httpCompression: false,
    maxHttpBufferSize: LARGEST_MESSAGE,
    connectTimeout: 10_000,
    allowRequest: ({ headers }, decide) => {
      const { origin } = headers;
      const ours = origin === undefined || sameOrigin(origin, headers.host);
      decide(null, ours && hostAllowed(headers.host, host));
    },
  });

  server.on('upgrade', (_request, connection) => {
    connections.add(connection);
    connection.once('close', () => connections.delete(connection));
  });

  io.on('connection', (socket) => {
    socket.emit('snapshot', core.snapshot());
    const outlet = new Outlet(wireTo(socket), clock, pace);
    outlets.add(outlet);
    const { transport } = socket.conn;
    const drained = () => outlet.drained();
    transport.on('ready', drained);
    socket.onAny(() => socket.disconnect(true));
    socket.once('disconnect', () => {
      transport.off('ready', drained);
      outlet.close();
      outlets.delete(outlet);
    });
  });

  const toAll = (tell: (outlet: Outlet) => void) => outlets.forEach(tell);
  return {
    feed: {
      live: (values) => toAll((outlet) => outlet.live(values)),
      alarms: (list) => toAll((outlet) => outlet.alarms(list)),
      nodes: (nodes) => toAll((outlet) => outlet.nodes(nodes)),
      limits: (channel, limits) => toAll((outlet) => outlet.limits(channel, limits)),
      health: (health) => toAll((outlet) => outlet.health(health)),
      revision: (revision) => toAll((outlet) => outlet.revision(revision)),
    },
    browsers: () => outlets.size,
    close: async () => {
      io.disconnectSockets(true);
      const engine: { close(): unknown } = io.engine;
      engine.close();
      const ended = Promise.all(
        [...connections].map(
          (connection) => new Promise((resolve) => connection.once('close', resolve)),
        ),
      );
      const cancel = clock.after(PATIENCE, () => connections.forEach((c) => c.destroy()));
      await ended;
      cancel();
    },
  };
};
