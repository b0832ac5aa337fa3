import { QUALITIES, type Quality } from '../../shared/model/block.ts';
import type { LiveValue } from '../../shared/protocol/socket.ts';

/** Clocks count in steps: a due time may be missed by so much, s. */
export const CLOCK_STEP = 1e-5;

/** The later in the list the less can be believed. */
const worse = (a: Quality, b: Quality): Quality =>
  QUALITIES.indexOf(a) > QUALITIES.indexOf(b) ? a : b;

/** Two stretches of one channel as one: the newer's time and last value, all of both's extremes. */
const join = (older: LiveValue, newer: LiveValue): LiveValue => ({
  channel: newer.channel,
  at: newer.at,
  last: newer.last,
  min: newer.min < older.min ? newer.min : older.min,
  max: newer.max > older.max ? newer.max : older.max,
  quality: worse(older.quality, newer.quality),
});

/**
 * What one browser has not been sent yet: one value a channel, however long it
 * waits. A channel is due when its last was taken `gap` seconds ago or more.
 */
export class MergeBuffer {
  readonly #gap: number;
  readonly #waiting = new Map<number, LiveValue>();
  /** When a channel's value was last taken, s. */
  readonly #taken = new Map<number, number>();

  constructor(gap: number) {
    this.#gap = gap;
  }

  get size(): number {
    return this.#waiting.size;
  }

  add(value: LiveValue): void {
    const older = this.#waiting.get(value.channel);
    this.#waiting.set(value.channel, older ? join(older, value) : value);
  }

  /** Takes out what is due at `now`. */
  take(now: number): LiveValue[] {
    const due = [...this.#waiting.values()].filter(({ channel }) => this.#wait(channel, now) === 0);
    for (const { channel } of due) {
      this.#waiting.delete(channel);
      this.#taken.set(channel, now);
    }
    return due;
  }

  /** Seconds from `now` until something is due; Infinity if nothing waits. */
  untilDue(now: number): number {
    let least = Infinity;
    for (const channel of this.#waiting.keys()) least = Math.min(least, this.#wait(channel, now));
    return least;
  }

  #wait(channel: number, now: number): number {
    const elapsed = now - (this.#taken.get(channel) ?? -Infinity);
    // Time that ran backwards was set right: what waits is due.
    return elapsed < 0 || elapsed > this.#gap - CLOCK_STEP ? 0 : this.#gap - elapsed;
  }
}
