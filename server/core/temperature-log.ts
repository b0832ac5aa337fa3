import type { ChannelBlock } from '../../shared/model/block.ts';
import { celsius, type Celsius } from '../../shared/model/units.ts';
import type { ChannelPlan, TemperatureAt } from '../../shared/pipeline/index.ts';
import { lastBefore } from '../../shared/series/last-before.ts';

/** Kept no closer together than this, s. */
const SPACING = 5;
/** A reading holds so long, s; steel takes minutes, and slow nodes send once in some. */
const HOLD = 900;
/** Kept of each channel: some six hours, so that a backlog finds its own temperature. */
const MOST = 4096;

interface Log {
  readonly at: number[];
  readonly value: number[];
}

const temperatureAmong = ({ at, value }: Log, t: number): Celsius | null => {
  // Before the first reading, that one: it is nearer than none.
  const i = Math.max(0, lastBefore(at, t));
  const [found, when] = [value[i], at[i]];
  if (found === undefined || when === undefined || Math.abs(t - when) > HOLD) return null;
  return celsius(found);
};

/** Temperatures of the last hours, of the channels that gauges are put right by. */
export class TemperatureLog {
  #followed = new Map<number, string>();
  readonly #logs = new Map<string, Log>();

  constructor(channels: readonly ChannelPlan[]) {
    this.replan(channels);
  }

  replan(channels: readonly ChannelPlan[]): void {
    const wanted = new Set(
      channels.flatMap(({ conversions }) =>
        conversions.flatMap(({ correction }) => correction?.channel ?? []),
      ),
    );
    this.#followed = new Map(
      channels.flatMap(({ index, channel: { id } }) => (wanted.has(id) ? [[index, id]] : [])),
    );
  }

  /** Channels that gauges are put right by. */
  get followed(): readonly string[] {
    return [...this.#followed.values()];
  }

  note(channel: string, t: number, value: number): void {
    if (!Number.isFinite(value)) return;
    const log = this.#logs.get(channel) ?? { at: [], value: [] };
    this.#logs.set(channel, log);
    if (t - (log.at.at(-1) ?? -Infinity) < SPACING) return;
    log.at.push(t);
    log.value.push(value);
    if (log.at.length > MOST) {
      log.at.splice(0, MOST / 4);
      log.value.splice(0, MOST / 4);
    }
  }

  accept(blocks: readonly ChannelBlock[]): void {
    for (const { channel, t0, dt, values, last } of blocks) {
      const id = this.#followed.get(channel);
      if (id !== undefined) this.note(id, t0 + (values.length - 1) * dt, last);
    }
  }

  readonly at: TemperatureAt = (channel, t) => {
    const log = this.#logs.get(channel);
    return log ? temperatureAmong(log, t) : null;
  };
}
