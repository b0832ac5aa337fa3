import { io, type Socket } from 'socket.io-client';
import type { Limit } from '../../shared/model/limit.ts';
import type { AlarmList, Health, NodeTally } from '../../shared/protocol/http.ts';
import {
  unpackLive,
  type ClientToServer,
  type LiveValue,
  type ServerToClient,
  type Snapshot,
} from '../../shared/protocol/socket.ts';

export interface LiveHandlers {
  disconnected(): void;
  /** Comes first on every connection. */
  snapshot(snapshot: Snapshot): void;
  live(values: readonly LiveValue[]): void;
  alarms(list: AlarmList): void;
  nodes(nodes: readonly NodeTally[]): void;
  limits(channel: string, limits: readonly Limit[]): void;
  health(health: Health): void;
  /** The set-up is another one than at first: what is known of the site no longer holds. */
  outdated(): void;
}

/** Connects, and connects again for as long as it is open; the returned function closes. */
export const openLive = (handlers: LiveHandlers): (() => void) => {
  const { origin, pathname } = new URL('socket.io', document.baseURI);
  const socket: Socket<ServerToClient, ClientToServer> = io(origin, {
    path: pathname,
    transports: ['websocket'],
    reconnectionDelay: 500,
    reconnectionDelayMax: 3000,
  });
  socket.on('disconnect', () => handlers.disconnected());
  let first: number | null = null;
  const standsAt = (revision: number): boolean => (first ??= revision) === revision;
  socket.on('snapshot', (snapshot) => {
    if (standsAt(snapshot.revision)) handlers.snapshot(snapshot);
    else handlers.outdated();
  });
  socket.on('revision', (revision) => {
    if (!standsAt(revision)) handlers.outdated();
  });
  socket.on('live', (packed) => handlers.live(unpackLive(packed)));
  socket.on('alarms', (list) => handlers.alarms(list));
  socket.on('nodes', (nodes) => handlers.nodes(nodes));
  socket.on('limits', (channel, limits) => handlers.limits(channel, limits));
  socket.on('health', (health) => handlers.health(health));
  return () => socket.close();
};
