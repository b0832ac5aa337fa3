import { apply, isRising } from '../../shared/model/fractional-linear.ts';
import { epochSeconds, type EpochSeconds } from '../../shared/model/units.ts';
import type { ChannelPlan, Conversion } from '../../shared/pipeline/index.ts';
import type { Range } from '../../shared/pipeline/convert.ts';
import type { Envelope, EnvelopeQuery, SampleStore } from '../ports.ts';

type Column = (number | null)[];

export interface ChannelEnvelope {
  readonly step: number;
  readonly t: number[];
  readonly min: Column;
  readonly mean: Column;
  readonly max: Column;
}

interface Window {
  readonly from: number;
  readonly to: number;
  readonly conversion: Conversion;
}

/** The window cut where the record in force changes; what lies before the first record is left out. */
const windows = (plan: ChannelPlan, from: number, to: number): Window[] =>
  plan.conversions.flatMap((conversion, i) => {
    const start = Math.max(from, conversion.from);
    const end = Math.min(to, plan.conversions[i + 1]?.from ?? Infinity);
    return start < end ? [{ from: start, to: end, conversion }] : [];
  });

/** Times of points in which a sample of the input reached an end of its range. */
const overRange = async (
  store: SampleStore,
  node: string,
  input: string,
  range: Range,
  query: Omit<EnvelopeQuery, 'series'>,
): Promise<ReadonlySet<number>> => {
  if (range === null) return new Set();
  const raw = await store.envelope({ ...query, series: { node, input, over: null } });
  const inside = (i: number) => (raw.min[i] ?? NaN) > range[0] && (raw.max[i] ?? NaN) < range[1];
  return new Set([...raw.t].filter((_, i) => !inside(i)));
};

const appendPoints = (
  into: ChannelEnvelope,
  raw: Envelope,
  { map }: Conversion,
  doubted: readonly ReadonlySet<number>[],
): void => {
  const rising = isRising(map);
  raw.t.forEach((t, i) => {
    const believed = !doubted.some((times) => times.has(t));
    const at = (x: number | undefined) => (believed && x !== undefined ? apply(map, x) : null);
    into.t.push(t);
    into.min.push(at(rising ? raw.min[i] : raw.max[i]));
    into.mean.push(at(raw.mean[i]));
    into.max.push(at(rising ? raw.max[i] : raw.min[i]));
  });
};

/**
 * A channel's past in its SI unit, derived on read by the records in force at
 * the time. Minimum and maximum are exact: a conversion keeps or turns order.
 * The mean is the value of the mean raw figure.
 */
export const channelEnvelope = async (
  store: SampleStore,
  plan: ChannelPlan,
  from: EpochSeconds,
  to: EpochSeconds,
  points: number,
): Promise<ChannelEnvelope> => {
  const step = (to - from) / points;
  const result: ChannelEnvelope = { step, t: [], min: [], mean: [], max: [] };
  const { node, input } = plan.channel;
  for (const window of windows(plan, from, to)) {
    const { excitation } = window.conversion;
    const query = {
      from: epochSeconds(window.from),
      to: epochSeconds(window.to),
      points: Math.max(1, Math.round((window.to - window.from) / step)),
    };
    const doubted = [await overRange(store, node, input, plan.range, query)];
    if (excitation !== null) {
      const range = plan.excitationRange(excitation);
      doubted.push(await overRange(store, node, excitation, range, query));
    }
    const raw = await store.envelope({ ...query, series: { node, input, over: excitation } });
    appendPoints(result, raw, window.conversion, doubted);
  }
  return result;
};
