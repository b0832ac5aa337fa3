import { isBelieved } from '../../shared/model/block.ts';
import type { CurrentValue } from '../../shared/protocol/http.ts';
import type { LiveValue } from '../../shared/protocol/socket.ts';
import type { ShownQuality } from './quality.ts';

/** What is known of a channel at this moment. */
export interface Reading {
  /** Of the last believed sample, SI; null if there has been none. */
  readonly value: number | null;
  /** Its time, UTC s. */
  readonly at: number | null;
  readonly quality: ShownQuality;
  /** Least and greatest since watching began, SI; null if there was nothing to believe. */
  readonly lowest: number | null;
  readonly highest: number | null;
}

const orNull = (value: number | undefined): number | null =>
  value !== undefined && Number.isFinite(value) ? value : null;

/**
 * The present of all channels, by their place in the site: plain columns, no
 * reactivity. Times named `heard` are of the screen's own steady clock, s.
 */
export class Values {
  readonly #value: Float64Array;
  readonly #at: Float64Array;
  readonly #heard: Float64Array;
  readonly #lowest: Float64Array;
  readonly #highest: Float64Array;
  readonly #quality: ShownQuality[];
  readonly #staleAfter: readonly number[];

  /** `staleAfter`: s without news until a channel is stale, by its place. */
  constructor(staleAfter: readonly number[]) {
    const column = (value: number) => new Float64Array(staleAfter.length).fill(value);
    this.#staleAfter = staleAfter;
    this.#value = column(NaN);
    this.#at = column(NaN);
    this.#heard = column(-Infinity);
    this.#lowest = column(Infinity);
    this.#highest = column(-Infinity);
    this.#quality = staleAfter.map(() => 'none');
  }

  get size(): number {
    return this.#value.length;
  }

  /** What the server says stands now. Extremes are kept. */
  restate(index: number, { value, at, quality }: CurrentValue, heard: number): void {
    this.#value[index] = value ?? NaN;
    this.#at[index] = at ?? NaN;
    this.#quality[index] = quality;
    this.#heard[index] = heard;
    if (isBelieved(quality) && value !== null) this.widen(index, value, value);
  }

  accept({ channel, at, last, min, max, quality }: LiveValue, heard: number): void {
    if (channel >= this.size) return;
    this.#quality[channel] = quality;
    this.#heard[channel] = heard;
    if (isBelieved(quality) && Number.isFinite(last)) {
      this.#value[channel] = last;
      this.#at[channel] = at;
    }
    this.widen(channel, min, max);
  }

  /** Extremes that came another way: what happened while the connection was lost. */
  widen(index: number, min: number, max: number): void {
    if (!Number.isFinite(min) || !Number.isFinite(max)) return;
    this.#lowest[index] = Math.min(this.#lowest[index] ?? min, min);
    this.#highest[index] = Math.max(this.#highest[index] ?? max, max);
  }

  forgetExtremes(): void {
    this.#lowest.fill(Infinity);
    this.#highest.fill(-Infinity);
  }

  read(index: number, now: number): Reading {
    const quality = this.#quality[index] ?? 'none';
    const silent = now - (this.#heard[index] ?? -Infinity) > (this.#staleAfter[index] ?? Infinity);
    return {
      value: orNull(this.#value[index]),
      at: orNull(this.#at[index]),
      quality: quality !== 'none' && silent ? 'stale' : quality,
      lowest: orNull(this.#lowest[index]),
      highest: orNull(this.#highest[index]),
    };
  }
}
