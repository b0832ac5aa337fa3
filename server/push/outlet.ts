import type { LiveValue } from '../../shared/protocol/socket.ts';
import type { Clock, Feed } from '../ports.ts';
import { MergeBuffer } from './merge.ts';
import { Meter, type Rate } from './meter.ts';

/** The way to one browser. */
export interface Wire extends Feed {
  /** Nothing that was handed over still waits for the network. */
  clear(): boolean;
}

export interface Pace {
  /** Seconds between two values of one channel, at least: the display rate. */
  readonly channelGap: number;
  readonly messages: Rate;
}

/**
 * One browser's share of the feed. Nothing is handed over before the network
 * has taken what went before; until then values merge and of all else the
 * newest is kept. So its memory is bounded by the number of channels, nobody
 * waits for it, and no peak is lost.
 */
export class Outlet implements Feed {
  readonly #wire: Wire;
  readonly #clock: Clock;
  readonly #merged: MergeBuffer;
  readonly #meter: Meter;
  /** By kind, each sending the newest of it, in the order in which the kinds came up. */
  readonly #news = new Map<string, () => void>();
  #cancel: (() => void) | null = null;
  #closed = false;

  constructor(wire: Wire, clock: Clock, pace: Pace) {
    this.#wire = wire;
    this.#clock = clock;
    this.#merged = new MergeBuffer(pace.channelGap);
    this.#meter = new Meter(pace.messages);
  }

  live(values: readonly LiveValue[]): void {
    for (const value of values) this.#merged.add(value);
    this.#pump();
  }

  alarms(...list: Parameters<Feed['alarms']>): void {
    this.#put('alarms', () => this.#wire.alarms(...list));
  }

  nodes(...nodes: Parameters<Feed['nodes']>): void {
    this.#put('nodes', () => this.#wire.nodes(...nodes));
  }

  limits(...[channel, limits]: Parameters<Feed['limits']>): void {
    this.#put(`limits ${channel}`, () => this.#wire.limits(channel, limits));
  }

  health(...health: Parameters<Feed['health']>): void {
    this.#put('health', () => this.#wire.health(...health));
  }

  revision(...revision: Parameters<Feed['revision']>): void {
    this.#put('revision', () => this.#wire.revision(...revision));
  }

  /** To be called when the network has taken what was handed over. */
  drained(): void {
    this.#pump();
  }

  close(): void {
    this.#closed = true;
    this.#cancel?.();
    this.#cancel = null;
    this.#news.clear();
  }

  #put(kind: string, send: () => void): void {
    this.#news.set(kind, send);
    this.#pump();
  }

  #pump(): void {
    while (!this.#closed && this.#wire.clear()) {
      if (!this.#sendNews() && !this.#sendLive()) return;
    }
  }

  #sendNews(): boolean {
    const [next] = this.#news;
    if (!next) return false;
    const [kind, send] = next;
    this.#news.delete(kind);
    send();
    return true;
  }

  #sendLive(): boolean {
    this.#cancel?.();
    this.#cancel = null;
    const now = this.#clock.now();
    const wait = Math.max(this.#merged.untilDue(now), this.#meter.wait(now));
    if (wait === 0) {
      this.#meter.count(now);
      this.#wire.live(this.#merged.take(now));
      return true;
    }
    if (wait < Infinity) this.#cancel = this.#clock.after(wait, () => this.#pump());
    return false;
  }
}
