/** A SampleStore in memory, each answer worked out of the plain samples. */
import type {
  BootTally,
  Envelope,
  EnvelopeQuery,
  ExcitationPairs,
  RawRun,
  SampleStore,
  Stored,
  StoredFrame,
} from '../../server/ports.ts';
import { sampleCount } from '../../shared/model/frame.ts';
import { grouped } from '../../shared/series/group.ts';
import { include, type Ranges } from '../../shared/series/ranges.ts';

export type Memory = Map<string, StoredFrame>;

interface Sample {
  readonly t: number;
  readonly x: number;
}

const keyOf = (node: string, boot: string, seq: number) => JSON.stringify([node, boot, seq]);

const seriesOf = (frames: readonly StoredFrame[], { series }: EnvelopeQuery): Sample[] =>
  frames.flatMap(({ frame }) => {
    const samplesOf = (name: string) =>
      frame.node === series.node
        ? frame.inputs.find(({ input }) => input === name)?.samples
        : undefined;
    const raw = samplesOf(series.input);
    const over = series.over === null ? null : samplesOf(series.over);
    if (!raw || over === undefined) return [];
    return Array.from(raw, (x, i) => ({
      t: frame.t0 + i * frame.dt,
      x: over === null ? x : x / (over[i] ?? NaN),
    })).filter(({ x }) => Number.isFinite(x));
  });

const envelopeOf = (frames: readonly StoredFrame[], query: EnvelopeQuery): Envelope => {
  const { from, to, points } = query;
  // A power of two, so that a sample's place is the same however it is reckoned.
  const step = 2 ** Math.ceil(Math.log2((to - from) / points));
  const inWindow = seriesOf(frames, query).filter(({ t }) => t >= from && t < to);
  const places = [...grouped(inWindow, ({ t }) => String(Math.floor(t / step)))]
    .map(([place, samples]) => ({ place: Number(place), values: samples.map(({ x }) => x) }))
    .sort((a, b) => a.place - b.place);
  const column = (of: (values: number[], place: number) => number) =>
    Float64Array.from(places, ({ values, place }) => of(values, place));
  return {
    step,
    t: column((_, place) => Math.max(from, place * step)),
    min: column((values) => values.reduce((low, x) => Math.min(low, x), Infinity)),
    mean: column((values) => values.reduce((sum, x) => sum + x, 0) / values.length),
    max: column((values) => values.reduce((high, x) => Math.max(high, x), -Infinity)),
    count: column((values) => values.length),
  };
};

const tallyOf = (frames: readonly StoredFrame[]): BootTally[] => {
  const boots = grouped(frames, ({ frame }) => JSON.stringify([frame.node, frame.boot]));
  return [...boots.values()].flatMap((own): BootTally[] => {
    const [first] = own;
    if (!first) return [];
    const { node, boot, sequenced } = first.frame;
    const arrivals = own.map(({ arrived }) => arrived).sort((a, b) => a - b);
    const ranges = own.reduce<Ranges>((all, { frame }) => include(all, frame.seq), []);
    return [
      {
        ...{ node, boot, sequenced, frames: own.length, ranges: sequenced ? ranges : [] },
        samples: own.reduce((sum, { frame }) => sum + sampleCount(frame) * frame.inputs.length, 0),
        firstArrived: arrivals[0] ?? first.arrived,
        lastArrived: arrivals.at(-1) ?? first.arrived,
      },
    ];
  });
};

const copied = ({ frame, arrived }: StoredFrame): StoredFrame => ({
  arrived,
  frame: {
    ...frame,
    inputs: frame.inputs.map(({ input, samples }) => ({ input, samples: samples.slice() })),
  },
});

/** `memory`: what was stored before; it outlives the store, as a disk does. */
export const memorySamples = (memory: Memory = new Map()): SampleStore => ({
  commit: async (frames) =>
    frames.map((stored): Stored => {
      const { node, boot, seq } = stored.frame;
      const key = keyOf(node, boot, seq);
      if (memory.has(key)) return 'duplicate';
      memory.set(key, copied(stored));
      return 'stored';
    }),
  // Every pair can be worked out of what is there.
  follow: async (_: ExcitationPairs) => undefined,
  has: async (node, boot, seq) => memory.has(keyOf(node, boot, seq)),
  tally: async () => tallyOf([...memory.values()]),
  envelope: async (query) => envelopeOf([...memory.values()], query),
  samples: async ({ node, input, from, to, atMost }) => {
    const runs = [...memory.values()].flatMap(({ frame }): RawRun[] => {
      const { boot, t0, dt } = frame;
      const last = t0 + (sampleCount(frame) - 1) * dt;
      const touches = frame.node === node && t0 < to && last >= from;
      const block = touches ? frame.inputs.find((one) => one.input === input) : undefined;
      return block ? [{ ...block, boot, t0, dt }] : [];
    });
    const count = runs.reduce((sum, { samples }) => sum + samples.length, 0);
    if (count > atMost) throw new RangeError(`samples: expected at most ${atMost}, came ${count}`);
    return runs.sort((a, b) => a.t0 - b.t0 || (a.boot < b.boot ? -1 : 1));
  },
  close: async () => undefined,
});
