import { apply, isRising } from '../../shared/model/fractional-linear.ts';
import { epochSeconds, type EpochSeconds } from '../../shared/model/units.ts';
import { conversionAt, type ChannelPlan, type Conversion } from '../../shared/pipeline/index.ts';
import type { Range } from '../../shared/pipeline/convert.ts';
import type { Envelope, SampleStore } from '../ports.ts';

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
    const start = Math.max(from, conversion.record.validFrom);
    const end = Math.min(to, plan.conversions[i + 1]?.record.validFrom ?? Infinity);
    return start < end && i >= conversionAt(plan.conversions, from) ? [{ from: start, to: end, conversion }] : [];
  });

const within = (range: Range, min: number, max: number): boolean =>
  range === null || (min > range[0] && max < range[1]);

const appendPoints = (
  into: ChannelEnvelope,
  raw: Envelope,
  { map }: Conversion,
  range: Range,
): void => {
  const rising = isRising(map);
  raw.t.forEach((t, i) => {
    const [low, mid, high] = [raw.min[i] ?? NaN, raw.mean[i] ?? NaN, raw.max[i] ?? NaN];
    const believed = within(range, low, high);
    const at = (x: number) => (believed ? apply(map, x) : null);
    into.t.push(t);
    into.min.push(at(rising ? low : high));
    into.mean.push(at(mid));
    into.max.push(at(rising ? high : low));
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
    const raw = await store.envelope({
      series: { node, input, over: excitation },
      from: epochSeconds(window.from),
      to: epochSeconds(window.to),
      points: Math.max(1, Math.round((window.to - window.from) / step)),
    });
    appendPoints(result, raw, window.conversion, excitation === null ? plan.range : null);
  }
  return result;
};
