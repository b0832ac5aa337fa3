import type { ChannelBlock } from '../../shared/model/block.ts';
import type { Frame } from '../../shared/model/frame.ts';
import {
  epochSeconds,
  seconds,
  type Celsius,
  type EpochSeconds,
} from '../../shared/model/units.ts';
import {
  channelBlocks,
  VirtualStream,
  type ChannelPlan,
  type PlannedChannel,
  type SitePlan,
  type TemperatureAt,
  type VirtualPlan,
} from '../../shared/pipeline/index.ts';
import { grouped } from '../../shared/series/group.ts';
import type { RawRun, SampleStore } from '../ports.ts';
import { channelEnvelope, temperaturesAt, type ChannelEnvelope } from './history.ts';

/** So many samples of all sources together are worked through one by one; more as means of points. */
const MOST_SAMPLES = 6_000_000;
/** And so many are read at once. */
const AT_ONCE = 500_000;

export interface Past {
  readonly store: SampleStore;
  readonly plan: SitePlan;
}

export interface DerivedEnvelope extends ChannelEnvelope {
  readonly derived: 'samples' | 'means';
}

const isMeasured = (plan: PlannedChannel): plan is ChannelPlan => plan.channel.kind === 'measured';
const isVirtual = (plan: PlannedChannel): plan is VirtualPlan => plan.channel.kind === 'virtual';

/** A virtual channel with all that it comes from, each once, in the order of their working out. */
const ancestry = ({ channels, virtual }: SitePlan, of: VirtualPlan) => {
  const wanted = new Set<number>();
  const visit = (index: number): void => {
    if (wanted.has(index)) return;
    wanted.add(index);
    const plan = channels[index];
    if (plan && isVirtual(plan)) plan.sources.forEach(visit);
  };
  visit(of.index);
  return {
    measured: [...wanted].flatMap((i) => channels[i] ?? []).filter(isMeasured),
    virtual: virtual.filter(({ index }) => wanted.has(index)),
  };
};

const measuredPast = ({ store, plan }: Past) => ({
  store,
  planOf: (id: string) => plan.measured.find(({ channel }) => channel.id === id),
});

/** What gauges are put right by, over the window. */
const temperaturesOf = async (
  past: Past,
  measured: readonly ChannelPlan[],
  query: { readonly from: EpochSeconds; readonly to: EpochSeconds; readonly points: number },
): Promise<TemperatureAt> => {
  const ids = new Set(
    measured.flatMap(({ conversions }) => conversions.flatMap((c) => c.correction?.channel ?? [])),
  );
  const lookups = new Map<string, (t: number) => Celsius | null>();
  for (const id of ids) lookups.set(id, await temperaturesAt(measuredPast(past), id, query));
  return (id, t) => lookups.get(id)?.(t) ?? null;
};

/** Inputs that have to be read for a channel, by node. */
const inputsOf = (plans: readonly ChannelPlan[]): Map<string, Set<string>> => {
  const inputs = new Map<string, Set<string>>();
  for (const { channel, conversions } of plans) {
    const known = inputs.get(channel.node) ?? new Set();
    inputs.set(channel.node, known.add(channel.input));
    for (const { excitation } of conversions) if (excitation !== null) known.add(excitation);
  }
  return inputs;
};

/** Runs of several inputs of a node, put together into the frames that they came in. */
const framesOf = (node: string, runs: readonly RawRun[]): Frame[] => {
  const frames = grouped(runs, ({ boot, t0, dt, samples }) =>
    [boot, t0, dt, samples.length].join(' '),
  );
  return [...frames.values()].flatMap((parts, seq): Frame[] => {
    const [first] = parts;
    if (!first) return [];
    const { boot, t0, dt } = first;
    return [{ node, boot, seq, sequenced: true, t0, dt: seconds(dt), inputs: parts }];
  });
};

/** Bins of the grid of `step`, as columns. */
class Bins {
  readonly #by = new Map<number, { min: number; max: number; sum: number; count: number }>();
  readonly #step: number;
  readonly #from: number;
  readonly #to: number;

  constructor(step: number, from: number, to: number) {
    this.#step = step;
    this.#from = from;
    this.#to = to;
  }

  add({ t0, dt, values }: ChannelBlock): void {
    values.forEach((value, i) => {
      const t = t0 + i * dt;
      if (t < this.#from || t >= this.#to || Number.isNaN(value)) return;
      const place = Math.floor(t / this.#step);
      const bin = this.#by.get(place);
      if (!bin) return void this.#by.set(place, { min: value, max: value, sum: value, count: 1 });
      if (value < bin.min) bin.min = value;
      if (value > bin.max) bin.max = value;
      bin.sum += value;
      bin.count++;
    });
  }

  envelope(): ChannelEnvelope {
    const bins = [...this.#by].sort(([a], [b]) => a - b);
    return {
      step: this.#step,
      t: bins.map(([place]) => Math.max(this.#from, place * this.#step)),
      min: bins.map(([, { min }]) => min),
      mean: bins.map(([, { sum, count }]) => sum / count),
      max: bins.map(([, { max }]) => max),
    };
  }
}

/** Every sample, by the way that what comes takes. */
const bySamples = async (
  past: Past,
  of: VirtualPlan,
  from: EpochSeconds,
  to: EpochSeconds,
  points: number,
  step: number,
  pieces: number,
): Promise<ChannelEnvelope> => {
  const { measured, virtual } = ancestry(past.plan, of);
  const temperatureAt = await temperaturesOf(past, measured, { from, to, points });
  const wanted = new Set(measured.map(({ index }) => index));
  const inputs = inputsOf(measured);
  const stream = new VirtualStream(virtual);
  const bins = new Bins(step, from, to);
  const seen = new Set<string>();
  for (let piece = 0; piece < pieces; piece++) {
    const window = {
      from: epochSeconds(from + (piece * (to - from)) / pieces),
      to: epochSeconds(from + ((piece + 1) * (to - from)) / pieces),
    };
    const frames: Frame[] = [];
    for (const [node, names] of inputs) {
      const runs: RawRun[] = [];
      for (const input of names) {
        const query = { ...window, node, input, atMost: Infinity };
        // A run that reaches into two pieces comes with both.
        for (const run of await past.store.samples(query)) {
          const key = [node, input, run.boot, run.t0].join(' ');
          if (!seen.has(key)) runs.push(run);
          seen.add(key);
        }
      }
      frames.push(...framesOf(node, runs));
    }
    frames.sort((a, b) => a.t0 - b.t0);
    const isLast = piece === pieces - 1;
    const blocks = frames.flatMap((frame) =>
      channelBlocks(frame, past.plan, temperatureAt).filter(({ channel }) => wanted.has(channel)),
    );
    for (const block of stream.accept(blocks, isLast)) {
      if (block.channel === of.index) bins.add(block);
    }
  }
  return bins.envelope();
};

/** The values of the points' means: of a window too long for its samples. */
const byMeans = async (
  past: Past,
  of: VirtualPlan,
  from: EpochSeconds,
  to: EpochSeconds,
  points: number,
): Promise<ChannelEnvelope> => {
  const sources = await Promise.all(
    of.sources.map(async (index) => {
      const plan = past.plan.channels[index];
      return plan ? pastOf(past, plan, from, to, points) : null;
    }),
  );
  const [base] = sources;
  if (!base) return { step: (to - from) / points, t: [], min: [], mean: [], max: [] };
  const columns = sources.map((source) => {
    const at = new Map(source?.t.map((t, i) => [t, source.mean[i] ?? NaN]));
    return Float64Array.from(base.t, (t) => at.get(t) ?? NaN);
  });
  const values = new Float64Array(base.t.length);
  of.evaluate(columns, values);
  const mean = Array.from(values, (value) => (Number.isNaN(value) ? null : value));
  return { step: base.step, t: base.t, min: mean, mean, max: mean };
};

const virtualEnvelope = async (
  past: Past,
  of: VirtualPlan,
  from: EpochSeconds,
  to: EpochSeconds,
  points: number,
): Promise<DerivedEnvelope> => {
  const { measured } = ancestry(past.plan, of);
  const [base] = measured;
  if (!base) return { step: 0, t: [], min: [], mean: [], max: [], derived: 'samples' };
  const { node, input } = base.channel;
  const series = { node, input, over: null };
  const raw = await past.store.envelope({ series, from, to, points });
  const samples = raw.count.reduce((sum, n) => sum + n, 0) * measured.length;
  if (samples > MOST_SAMPLES) {
    return { ...(await byMeans(past, of, from, to, points)), derived: 'means' };
  }
  const pieces = Math.max(1, Math.ceil(samples / AT_ONCE));
  return { ...(await bySamples(past, of, from, to, points, raw.step, pieces)), derived: 'samples' };
};

/** The past of any channel in its SI unit; see `channelEnvelope`. */
export const pastOf = async (
  past: Past,
  channel: PlannedChannel,
  from: EpochSeconds,
  to: EpochSeconds,
  points: number,
): Promise<DerivedEnvelope> => {
  if (isVirtual(channel)) return virtualEnvelope(past, channel, from, to, points);
  if (!isMeasured(channel)) throw new TypeError('a channel is measured or virtual');
  const envelope = await channelEnvelope(measuredPast(past), channel, from, to, points);
  return { ...envelope, derived: 'samples' };
};
