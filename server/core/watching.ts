import { finiteOf, type Watched } from '../../shared/channel-check/series.ts';
import { IDENTITY } from '../../shared/model/fractional-linear.ts';
import type { RawArray } from '../../shared/model/frame.ts';
import { epochSeconds, seconds, type Seconds } from '../../shared/model/units.ts';
import { convert, convertOver } from '../../shared/pipeline/convert.ts';
import { conversionAt, type ChannelPlan, type Conversion } from '../../shared/pipeline/index.ts';
import type { TimeWindow } from '../../shared/protocol/checks.ts';
import type { RawRun, SampleStore } from '../ports.ts';

/** A window of so many samples at most, 80 s at 2,000 a second; a longer one is cut to its end. */
const MOST_SAMPLES = 160_000;
/** One sample a second is due of an input of which nothing is known. */
const UNKNOWN_STEP = seconds(1);

export interface ChannelWindow {
  readonly watched: Watched;
  /** In force at its end. */
  readonly conversion: Conversion;
  /** Mean of the input that measures the excitation, V; null: none does, or nothing came. */
  readonly excitation: number | null;
  readonly window: TimeWindow;
}

interface Read {
  readonly runs: readonly RawRun[];
  readonly from: number;
}

/** The runs of an input that touch the window; half of it, and half again, where they are too many. */
const readRuns = async (
  store: SampleStore,
  node: string,
  input: string,
  from: number,
  to: number,
): Promise<Read> => {
  try {
    const window = { from: epochSeconds(from), to: epochSeconds(to) };
    const runs = await store.samples({ node, input, ...window, atMost: MOST_SAMPLES });
    return { runs, from };
  } catch (error) {
    if (!(error instanceof RangeError)) throw error;
    return readRuns(store, node, input, from + (to - from) / 2, to);
  }
};

/** The commonest step within runs, or that between runs of one sample; null of a single one. */
const stepOf = (runs: readonly RawRun[]): Seconds | null => {
  const counts = new Map<number, number>();
  for (const { dt, samples } of runs) {
    if (samples.length > 1) counts.set(dt, (counts.get(dt) ?? 0) + samples.length);
  }
  const [commonest] = [...counts].sort((a, b) => b[1] - a[1]);
  if (commonest) return seconds(commonest[0]);
  const gaps = runs
    .flatMap(({ t0 }, i) => (i === 0 ? [] : [t0 - (runs[i - 1]?.t0 ?? t0)]))
    .filter((gap) => gap > 0)
    .sort((a, b) => a - b);
  const middle = gaps[Math.floor(gaps.length / 2)];
  return middle === undefined ? null : seconds(middle);
};

const endOf = (run: RawRun, step: number): number =>
  run.t0 + (run.samples.length - 1) * run.dt + step;

const placeOf = ({ boot, t0, samples }: RawRun): string => [boot, t0, samples.length].join(' ');

/** What is believed of a run, over its excitation where that is measured; else NaN. */
const believed = (
  plan: ChannelPlan,
  run: RawRun,
  excitation: { readonly input: string; readonly samples: RawArray | undefined } | null,
): Float64Array => {
  const count = run.samples.length;
  const out = new Float64Array(count);
  if (!excitation) convert(run.samples, IDENTITY, plan.range, 0, count, out);
  else if (!excitation.samples) out.fill(NaN);
  else {
    const range = plan.excitationRange(excitation.input);
    convertOver(run.samples, excitation.samples, IDENTITY, plan.range, range, 0, count, out);
  }
  return out;
};

/**
 * A channel's samples of [from, to) on an even grid, by its record in force at the end. A window
 * that reaches to the present ends with the last sample, unless the node has been silent for
 * longer than it may. null before the first calibration record.
 */
export const watchChannel = async (
  store: SampleStore,
  plan: ChannelPlan,
  window: TimeWindow,
  staleAfter: number,
): Promise<ChannelWindow | null> => {
  const conversion = plan.conversions[conversionAt(plan.conversions, window.to)];
  if (!conversion) return null;
  const { node, input } = plan.channel;
  const asked = Math.max(window.from, conversion.from);
  const { runs, from } = await readRuns(store, node, input, asked, window.to);
  const over = conversion.excitation;
  const supplies = over === null ? [] : (await readRuns(store, node, over, from, window.to)).runs;
  const supplyOf = new Map(supplies.map((run) => [placeOf(run), run.samples]));
  const step = stepOf(runs) ?? UNKNOWN_STEP;
  const [first, last] = [runs[0], runs.at(-1)];
  const end = last ? endOf(last, step) : -Infinity;
  const to = window.to - end < staleAfter ? Math.min(end, window.to) : window.to;
  // Slots in step with the first run, so that no sample shares one with the next.
  const phase = first ? first.t0 - Math.ceil((first.t0 - from) / step) * step : from;
  const origin = phase < from - step / 2 ? phase + step : phase;
  const slots = Math.max(0, Math.round((to - origin) / step));
  const raw = new Float64Array(slots).fill(NaN);
  const own = new Float64Array(slots).fill(NaN);
  for (const run of runs) {
    const supply = over === null ? null : { input: over, samples: supplyOf.get(placeOf(run)) };
    const figures = believed(plan, run, supply);
    const begin = (run.t0 - origin) / step;
    for (let i = 0; i < figures.length; i++) {
      const slot = Math.round(begin + (i * run.dt) / step);
      if (slot < 0 || slot >= slots) continue;
      raw[slot] = figures[i] ?? NaN;
      own[slot] = run.samples[i] ?? NaN;
    }
  }
  const volts = finiteOf(supplies.flatMap(({ samples }) => Array.from(samples)));
  const excitation = volts.length > 0 ? volts.reduce((sum, v) => sum + v, 0) / volts.length : null;
  return {
    watched: { raw, input: own, dt: step, map: conversion.map },
    ...{ conversion, excitation, window: { from, to } },
  };
};
