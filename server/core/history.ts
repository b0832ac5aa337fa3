import { apply, compose, isRising } from '../../shared/model/fractional-linear.ts';
import {
  celsius,
  epochSeconds,
  type Celsius,
  type EpochSeconds,
} from '../../shared/model/units.ts';
import type { ChannelPlan, Conversion } from '../../shared/pipeline/index.ts';
import { lastBefore } from '../../shared/series/last-before.ts';
import { isWithin, type Range } from '../../shared/pipeline/convert.ts';
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

/** Times of points in which a sample reached an end of its range. */
const overRange = (raw: Envelope, range: Range): ReadonlySet<number> => {
  const inside = (i: number) => [raw.min[i], raw.max[i]].every((x) => isWithin(x ?? NaN, range));
  return new Set([...raw.t].filter((_, i) => !inside(i)));
};

/** The gauges' temperature in each point, by its time; where none came, that of the point before. */
export const temperaturesAt = async (
  past: Past,
  id: string,
  query: Omit<EnvelopeQuery, 'series'>,
): Promise<(t: number) => Celsius | null> => {
  const plan = past.planOf(id);
  if (!plan) return () => null;
  const { t, mean } = await channelEnvelope(past, plan, query.from, query.to, query.points);
  const known = t.flatMap((at, i) => {
    const value = mean[i];
    return typeof value === 'number' ? [{ at, value }] : [];
  });
  const times = known.map(({ at }) => at);
  return (at) => {
    const found = known[Math.max(0, lastBefore(times, at))];
    return found ? celsius(found.value) : null;
  };
};

const appendPoints = (
  into: ChannelEnvelope,
  raw: Envelope,
  { map, correction }: Conversion,
  temperature: (t: number) => Celsius | null,
  doubted: readonly ReadonlySet<number>[],
): void => {
  raw.t.forEach((t, i) => {
    const warmth = correction && temperature(t);
    const whole = correction && warmth !== null ? compose(map, correction.at(warmth)) : map;
    const rising = isRising(whole);
    const believed = !doubted.some((times) => times.has(t));
    const at = (x: number | undefined) => (believed && x !== undefined ? apply(whole, x) : null);
    into.t.push(t);
    into.min.push(at(rising ? raw.min[i] : raw.max[i]));
    into.mean.push(at(raw.mean[i]));
    into.max.push(at(rising ? raw.max[i] : raw.min[i]));
  });
};

/** Where the past is, and the channels that others are put right by. */
export interface Past {
  readonly store: SampleStore;
  readonly planOf: (id: string) => ChannelPlan | undefined;
}

/**
 * A channel's past in its SI unit, derived on read by the records in force at the time. Minimum and
 * maximum are exact: a conversion keeps or turns order; with a correction for temperature they are
 * those at the point's mean temperature. The mean is the value of the mean raw figure.
 */
export const channelEnvelope = async (
  past: Past,
  plan: ChannelPlan,
  from: EpochSeconds,
  to: EpochSeconds,
  points: number,
): Promise<ChannelEnvelope> => {
  const { store } = past;
  const width = (to - from) / points;
  let step = 0;
  const result: Omit<ChannelEnvelope, 'step'> = { t: [], min: [], mean: [], max: [] };
  const { node, input } = plan.channel;
  for (const window of windows(plan, from, to)) {
    const { excitation, correction } = window.conversion;
    const query = {
      from: epochSeconds(window.from),
      to: epochSeconds(window.to),
      points: Math.max(1, Math.round((window.to - window.from) / width)),
    };
    const raw = await store.envelope({ ...query, series: { node, input, over: excitation } });
    const own =
      excitation === null
        ? raw
        : await store.envelope({ ...query, series: { node, input, over: null } });
    const doubted = [overRange(own, plan.range)];
    if (excitation !== null) {
      const supply = await store.envelope({
        ...query,
        series: { node, input: excitation, over: null },
      });
      doubted.push(overRange(supply, plan.excitationRange(excitation)));
    }
    const temperature = correction
      ? await temperaturesAt(past, correction.channel, query)
      : () => null;
    appendPoints({ step, ...result }, raw, window.conversion, temperature, doubted);
    step = Math.max(step, raw.step);
  }
  return { step: step || width, ...result };
};
