/** The typed contract of the live connection. */
import type { Limit } from '../model/limit.ts';
import type { ActiveAlarm, AlarmList, CurrentValue, Health, NodeTally } from './http.ts';
import { QUALITIES, type Quality } from '../model/block.ts';

/** Everything a browser needs to stand where the server stands. Sent on every connection. */
export interface Snapshot {
  readonly now: number;
  /** Of the set-up. */
  readonly revision: number;
  readonly health: Health;
  readonly values: readonly CurrentValue[];
  readonly alarms: AlarmList;
  readonly nodes: readonly NodeTally[];
  /** Limits in force by channel id. */
  readonly limits: Readonly<Record<string, readonly Limit[]>>;
}

export interface ServerToClient {
  snapshot(snapshot: Snapshot): void;
  /** See packLive. */
  live(packed: ArrayBuffer): void;
  alarms(list: AlarmList): void;
  nodes(nodes: readonly NodeTally[]): void;
  limits(channel: string, limits: readonly Limit[]): void;
  health(health: Health): void;
  /** The set-up is another one: the site has to be read again. */
  revision(revision: number): void;
}

/** Browsers read over HTTP and change over HTTP: nothing is sent up the socket. */
export type ClientToServer = Record<string, never>;

/** What a channel did in one display interval. */
export interface LiveValue {
  /** Index into the site's channels, in site order. */
  readonly channel: number;
  /** Time of the last sample. */
  readonly at: number;
  readonly last: number;
  readonly min: number;
  readonly max: number;
  readonly quality: Quality;
}

const COLUMNS = 6;

/** Six float64 in the machine's order (little-endian on all that Node and browsers run on) a value. */
export const packLive = (values: readonly LiveValue[]): Float64Array<ArrayBuffer> => {
  const packed = new Float64Array(values.length * COLUMNS);
  values.forEach((v, i) => {
    packed.set([v.channel, v.at, v.last, v.min, v.max, QUALITIES.indexOf(v.quality)], i * COLUMNS);
  });
  return packed;
};

export const unpackLive = (bytes: ArrayBuffer): LiveValue[] => {
  const packed = new Float64Array(bytes);
  return Array.from({ length: packed.length / COLUMNS }, (_, i) => {
    const [channel = 0, at = 0, last = NaN, min = NaN, max = NaN, quality = 0] = packed.subarray(
      i * COLUMNS,
      (i + 1) * COLUMNS,
    );
    return { channel, at, last, min, max, quality: QUALITIES[quality] ?? 'missing' };
  });
};

export type { ActiveAlarm, AlarmList, CurrentValue, Health, NodeTally };
