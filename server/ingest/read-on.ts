import type { Client } from 'aedes';

/** The part of aedes' client that reads; not public, held to by contract tests. */
interface Reader {
  /** Takes one packet off the count of those being handled and at none reads the next chunk. */
  resume(): void;
  readonly _parser: { readonly packet: { readonly length: number } };
}

/**
 * aedes reads a client's next chunk when every packet of the last has been
 * handled. A publication that waits for its commit would thus hold up those
 * behind it, five frames of 13 kB to a commit. This lets it pass: reading goes on
 * while it waits. In the next turn of the event loop, since the parser is at work.
 */
export const readOn = (client: Client): void => {
  setImmediate(() => {
    if (!client.closed) (client as unknown as Reader).resume();
  });
};

/** Remaining Length of the packet that is coming in (MQTT 3.1.1 §2.2.3), bytes; −1 between packets. */
export const announcedLength = (client: Client): number =>
  (client as unknown as Reader)._parser.packet.length;
