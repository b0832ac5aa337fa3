import { once } from 'node:events';
import { createServer, type RequestListener, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';

export interface WebServer {
  readonly server: Server;
  /** Rejects if the port is taken. */
  listen(port: number, host: string): Promise<void>;
  /** The port it listens on. */
  port(): number;
  /** Cuts what is still open. */
  close(): Promise<void>;
}

/** The HTTP server that page, API and live connection share. */
export const createWebServer = (answer: RequestListener): WebServer => {
  const server = createServer(answer);
  return {
    server,
    listen: async (port, host) => {
      await once(server.listen(port, host), 'listening');
    },
    port: () => (server.address() as AddressInfo).port,
    close: async () => {
      server.closeAllConnections();
      await new Promise<void>((resolve) => server.close(() => resolve()));
    },
  };
};
