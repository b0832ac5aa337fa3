import type { Envelope } from '../ports.ts';
import type { InputBlock } from '../../shared/model/frame.ts';

/** Extremes and sum over the finite samples of a stretch of one series. */
export interface Summary {
  min: number;
  max: number;
  sum: number;
  count: number;
}

export const SUMMARY_FIGURES = 4;

export const emptySummary = (): Summary => ({ min: Infinity, max: -Infinity, sum: 0, count: 0 });

export const merge = (into: Summary, from: Summary): void => {
  if (from.min < into.min) into.min = from.min;
  if (from.max > into.max) into.max = from.max;
  into.sum += from.sum;
  into.count += from.count;
};

type Figures = ArrayLike<number>;

/** Samples [from, to) of a series; of a pair, each divided by the other's sample. */
export const summarise = (
  raw: Figures,
  over: Figures | null,
  from: number,
  to: number,
): Summary => {
  let [min, max, sum, count] = [Infinity, -Infinity, 0, 0];
  for (let i = from; i < to; i++) {
    const x = over === null ? (raw[i] ?? NaN) : (raw[i] ?? NaN) / (over[i] ?? NaN);
    if (x - x !== 0) continue; // NaN or infinite
    if (x < min) min = x;
    if (x > max) max = x;
    sum += x;
    count++;
  }
  return { min, max, sum, count };
};

/** Samples [from, to) that lie in one whole second `second` (floor of their time). */
export interface Stretch {
  readonly from: number;
  readonly to: number;
  readonly second: number;
}

/** A frame's samples cut at whole seconds: sample i is at t0 + i·dt, to the last bit. */
export const secondsOf = (t0: number, dt: number, count: number): Stretch[] => {
  const stretches: Stretch[] = [];
  let from = 0;
  while (from < count) {
    const second = Math.floor(t0 + from * dt);
    const guess = dt > 0 ? Math.ceil((second + 1 - t0) / dt) : count;
    let to = Math.max(from + 1, Math.min(count, guess));
    while (to > from + 1 && Math.floor(t0 + (to - 1) * dt) > second) to--;
    while (to < count && Math.floor(t0 + to * dt) === second) to++;
    stretches.push({ from, to, second });
    from = to;
  }
  return stretches;
};

/** A series by the inputs that it is made of; a pair's figures are quotients. */
export interface SeriesInputs {
  readonly input: string;
  readonly over: string | null;
}

/** The series that a frame of these inputs has: each input, then each pair that is whole. */
export const seriesOf = (
  inputs: readonly { readonly input: string }[],
  pairs: readonly SeriesInputs[],
): SeriesInputs[] => {
  const has = (name: string | null) => inputs.some(({ input }) => input === name);
  return [
    ...inputs.map(({ input }) => ({ input, over: null })),
    ...pairs.filter(({ input, over }) => has(input) && has(over)),
  ];
};

export const arraysOf = (
  blocks: readonly InputBlock[],
  { input, over }: SeriesInputs,
): [raw: Figures, over: Figures | null] | null => {
  const raw = blocks.find((block) => block.input === input)?.samples;
  const by = over === null ? null : blocks.find((block) => block.input === over)?.samples;
  return raw === undefined || by === undefined ? null : [raw, by];
};

/** What points hold, by their number on the grid of `step` s, as columns ascending in time. */
export const envelopeOf = (
  by: ReadonlyMap<number, Summary>,
  step: number,
  from: number,
): Envelope => {
  const entries = [...by].sort(([a], [b]) => a - b);
  const column = (figure: (summary: Summary, point: number) => number) =>
    Float64Array.from(entries, ([point, summary]) => figure(summary, point));
  return {
    step,
    t: column((_, point) => Math.max(from, point * step)),
    min: column(({ min }) => min),
    mean: column(({ sum, count }) => sum / count),
    max: column(({ max }) => max),
    count: column(({ count }) => count),
  };
};
