import { once } from 'node:events';
import { connect, createServer, type AddressInfo, type Socket } from 'node:net';
import { onTestFinished } from 'vitest';

/** A TCP line to a broker that a test can break. */
export interface Line {
  readonly url: string;
  /** Breaks every connection at once and lets none through until mended. */
  readonly cut: () => void;
  readonly mend: () => void;
  /** Of each later connection, the broker's first so many bytes arrive in one piece. */
  readonly gather: (bytes: number) => void;
}

export const openLine = async (brokerUrl: string): Promise<Line> => {
  const { hostname, port } = new URL(brokerUrl);
  const ends = new Set<Socket>();
  let whole = true;
  let least = 0;
  // Half-open: the client has its end only when the broker has given its own.
  const server = createServer({ allowHalfOpen: true }, (near) => {
    if (!whole) return near.destroy();
    const far = connect({ port: Number(port), host: hostname, allowHalfOpen: true });
    const pair = [near, far] as const;
    for (const end of pair) {
      ends.add(end);
      end.on('error', () => end.destroy());
      end.once('close', () => {
        ends.delete(end);
        // What was sent before the close still arrives.
        for (const other of pair) other.end();
      });
    }
    near.pipe(far);
    far.once('end', () => near.end());
    let held: Buffer[] | null = [];
    far.on('data', (chunk) => {
      if (held === null) return near.write(chunk);
      held.push(chunk);
      const first = Buffer.concat(held);
      if (first.length < least) return;
      held = null;
      near.write(first);
    });
  }).listen(0, '127.0.0.1');
  await once(server, 'listening');
  const breakAll = () => {
    for (const end of ends) end.destroy();
  };
  onTestFinished(() => {
    breakAll();
    server.close();
  });
  return {
    url: `mqtt://127.0.0.1:${(server.address() as AddressInfo).port}`,
    cut: () => {
      whole = false;
      breakAll();
    },
    mend: () => {
      whole = true;
    },
    gather: (bytes) => {
      least = bytes;
    },
  };
};
