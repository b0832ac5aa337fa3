/** Virtual channels of what comes: values of several channels brought to one time base. */
import { isBelieved, type ChannelBlock, type Quality } from '../model/block.ts';
import { grouped } from '../series/group.ts';
import type { VirtualPlan } from './plan.ts';

/** Samples of another node may come so much later than those of the first source, s. */
const WAIT = 2;
/** A single reading holds so long, s. */
const HOLD = 900;
/** Between samples further apart than this nothing is taken to lie, s. */
const GAP = 1;

const endOf = ({ t0, dt, values }: ChannelBlock): number => t0 + (values.length - 1) * dt;

const sameTimes = (a: ChannelBlock, b: ChannelBlock): boolean =>
  a.t0 === b.t0 && a.dt === b.dt && a.values.length === b.values.length;

/** The value at time t of blocks in order of time, between two samples on the straight line. */
const valueAt = (track: readonly ChannelBlock[], t: number): number => {
  let k = track.length - 1;
  while (k > 0 && (track[k]?.t0 ?? 0) > t) k--;
  const block = track[k];
  if (!block || block.t0 > t) return NaN;
  const { t0, dt, values } = block;
  if (!(dt > 0)) return t - t0 <= HOLD ? (values[values.length - 1] ?? NaN) : NaN;
  const place = (t - t0) / dt;
  const i = Math.min(values.length - 1, Math.floor(place));
  const here = values[i] ?? NaN;
  const before = t0 + i * dt;
  if (t === before) return here;
  const next = track[k + 1];
  const isLast = i === values.length - 1;
  const there = isLast ? (next?.values[0] ?? NaN) : (values[i + 1] ?? NaN);
  const after = isLast ? (next?.t0 ?? NaN) : t0 + (i + 1) * dt;
  if (!(after - before <= Math.max(GAP, 2 * dt))) return NaN;
  return here + ((there - here) * (t - before)) / (after - before);
};

const columnOf = (track: readonly ChannelBlock[], base: ChannelBlock): Float64Array => {
  const same = track.find((block) => sameTimes(block, base));
  if (same) return same.values;
  return base.values.map((_, i) => valueAt(track, base.t0 + i * base.dt));
};

/** Covers all of `base`, so that nothing has to be waited for. */
const reaches = (track: readonly ChannelBlock[], base: ChannelBlock): boolean => {
  const last = track.at(-1);
  return last !== undefined && (endOf(last) >= endOf(base) || !(last.dt > 0));
};

/** The value is as good as the worst that it comes from. */
const qualityOf = (last: number, sources: readonly (ChannelBlock | undefined)[]): Quality => {
  const qualities = sources.map((block) => block?.quality ?? 'missing');
  const doubted = qualities.find((quality) => !isBelieved(quality));
  if (Number.isNaN(last)) return doubted ?? 'missing';
  return qualities.includes('uncorrected') ? 'uncorrected' : 'good';
};

const blockOf = (
  plan: VirtualPlan,
  base: ChannelBlock,
  tracks: readonly (readonly ChannelBlock[])[],
): ChannelBlock => {
  const columns = tracks.map((track) => columnOf(track, base));
  const values = new Float64Array(base.values.length);
  plan.evaluate(columns, values);
  let [min, max] = [Infinity, -Infinity];
  for (const value of values) {
    if (value < min) min = value;
    if (value > max) max = value;
  }
  const last = values[values.length - 1] ?? NaN;
  const newest = tracks.map((track) => track.find((b) => sameTimes(b, base)) ?? track.at(-1));
  const { t0, dt } = base;
  return { channel: plan.index, t0, dt, values, min, max, last, quality: qualityOf(last, newest) };
};

/** One virtual channel under way. */
class Strand {
  readonly #plan: VirtualPlan;
  readonly #tracks: ChannelBlock[][];
  #waiting: ChannelBlock[] = [];

  constructor(plan: VirtualPlan) {
    this.#plan = plan;
    this.#tracks = plan.sources.map(() => []);
  }

  take(blocks: ReadonlyMap<number, readonly ChannelBlock[]>): void {
    this.#plan.sources.forEach((source, k) => {
      const came = blocks.get(source) ?? [];
      this.#tracks[k]?.push(...came);
      if (k === 0) this.#waiting.push(...came);
    });
  }

  /** What can be said now: all sources have come so far, or are not waited for any more. */
  *ready(isLast: boolean): Generator<ChannelBlock> {
    const newest = this.#waiting.at(-1);
    while (this.#waiting.length > 0 && newest) {
      const base = this.#waiting[0];
      if (!base) return;
      const complete = this.#tracks.every((track) => reaches(track, base));
      if (!complete && !isLast && endOf(newest) - endOf(base) <= WAIT) return;
      this.#waiting.shift();
      yield blockOf(this.#plan, base, this.#tracks);
      this.#prune(this.#waiting[0]?.t0 ?? endOf(base));
    }
  }

  /** What lies before the next block is not asked for again; the last before it holds. */
  #prune(from: number): void {
    for (const track of this.#tracks) {
      const keep = track.findLastIndex((block) => block.t0 <= from);
      if (keep > 1) track.splice(0, keep - 1);
    }
  }
}

/**
 * Turns blocks of channels into those of the virtual ones that come from them. Time comes from the
 * first source of each; others are brought to it, sample for sample where they are of the same
 * frame, else along the straight line between samples.
 */
export class VirtualStream {
  readonly #plans: readonly VirtualPlan[];
  readonly #strands: readonly Strand[];

  constructor(plans: readonly VirtualPlan[]) {
    this.#plans = plans;
    this.#strands = plans.map((plan) => new Strand(plan));
  }

  /** In the order of the plans: virtual channels may come from others before them. */
  accept(blocks: readonly ChannelBlock[], isLast = false): ChannelBlock[] {
    if (this.#plans.length === 0) return [];
    const by = grouped(blocks, ({ channel }) => channel);
    const made: ChannelBlock[] = [];
    this.#plans.forEach(({ index }, k) => {
      const strand = this.#strands[k];
      strand?.take(by);
      const own = strand ? [...strand.ready(isLast)] : [];
      if (own.length > 0) by.set(index, own);
      made.push(...own);
    });
    return made;
  }
}
