import { epochSeconds } from '../../shared/model/units.ts';
import { conversionAt, type ChannelPlan, type SitePlan } from '../../shared/pipeline/index.ts';
import type { ChannelChange, PreviewLine } from '../../shared/protocol/http.ts';
import type { SampleStore } from '../ports.ts';
import { channelEnvelope, type ChannelEnvelope } from './history.ts';

/** A channel's window is looked at in so many pieces, each of so many points. */
const PIECES = 20;
const POINTS = 50;

/** All that a channel's value at time `t` depends on, as text. */
const governing = (plan: ChannelPlan, t: number): string => {
  const conversion = plan.conversions[conversionAt(plan.conversions, t)];
  if (!conversion) return 'none';
  const { record, zero } = conversion;
  const { range, channel, context } = plan;
  return JSON.stringify([
    ...[channel.node, channel.input, range, context.stressPerStrain, context.yieldStrength],
    ...[record.signal, record.response, zero?.raw ?? null],
  ]);
};

/** From where to where the two plans of a channel differ; null: nowhere. */
const changedWindow = (
  before: ChannelPlan,
  after: ChannelPlan,
  now: number,
): readonly [from: number, to: number] | null => {
  const bounds = [...before.conversions, ...after.conversions]
    .map(({ from }) => from as number)
    .filter((from) => from < now)
    .sort((a, b) => a - b);
  const changed = bounds.flatMap((from, i): [number, number][] =>
    governing(before, from) === governing(after, from) ? [] : [[from, bounds[i + 1] ?? now]],
  );
  const [first, last] = [changed[0], changed.at(-1)];
  return first && last ? [first[0], last[1]] : null;
};

class Comparison {
  readonly #change: {
    -readonly [K in keyof ChannelChange]: ChannelChange[K];
  };

  constructor(channel: string, from: number, to: number) {
    this.#change = { channel, from, to, points: 0, before: null, after: null, largest: null };
  }

  add(before: ChannelEnvelope, after: ChannelEnvelope): void {
    this.#change.before = widest(this.#change.before, before);
    this.#change.after = widest(this.#change.after, after);
    const was = new Map(before.t.map((t, i) => [t, before.mean[i]]));
    after.t.forEach((t, i) => {
      const [old, now] = [was.get(t), after.mean[i]];
      this.#change.points++;
      if (typeof old !== 'number' || typeof now !== 'number') return;
      const { largest } = this.#change;
      if (!largest || Math.abs(now - old) > Math.abs(largest.after - largest.before)) {
        this.#change.largest = { at: t, before: old, after: now };
      }
    });
  }

  get change(): ChannelChange {
    return this.#change;
  }
}

type Extremes = ChannelChange['before'];

const widest = (so: Extremes, { min, max }: ChannelEnvelope): Extremes => {
  let [low, high] = [so?.min ?? Infinity, so?.max ?? -Infinity];
  for (const x of min) if (x !== null && x < low) low = x;
  for (const x of max) if (x !== null && x > high) high = x;
  return low <= high ? { min: low, max: high } : null;
};

const planIn = (site: SitePlan) => (id: string) =>
  site.measured.find(({ channel }) => channel.id === id);

/**
 * What a new set-up would make of the past: each channel whose value would be another one, with
 * its window, its extremes before and after and the largest change of a point's mean. Derived on
 * read from the raw figures by either set-up; nothing is written.
 */
export async function* previewChange(
  store: SampleStore,
  before: SitePlan,
  after: SitePlan,
  now: number,
): AsyncGenerator<PreviewLine> {
  const known = new Map(before.measured.map((plan) => [plan.channel.id, plan]));
  const work = after.measured.flatMap((plan) => {
    const was = known.get(plan.channel.id);
    const window = was && changedWindow(was, plan, now);
    return was && window ? [{ was, plan, from: window[0], to: window[1] }] : [];
  });
  const of = work.length * PIECES;
  const channels: ChannelChange[] = [];
  let done = 0;
  for (const { was, plan, from, to } of work) {
    const comparison = new Comparison(plan.channel.id, from, to);
    for (let piece = 0; piece < PIECES; piece++) {
      const start = epochSeconds(from + (piece * (to - from)) / PIECES);
      const end = epochSeconds(from + ((piece + 1) * (to - from)) / PIECES);
      comparison.add(
        await channelEnvelope({ store, planOf: planIn(before) }, was, start, end, POINTS),
        await channelEnvelope({ store, planOf: planIn(after) }, plan, start, end, POINTS),
      );
      done++;
      yield { kind: 'progress', done, of };
    }
    channels.push(comparison.change);
  }
  yield { kind: 'result', channels };
}
