/** The way of a frame, in the order the data meets it: decode → ratio → strain → stress → alarm. */
import type { ChannelBlock, Quality } from '../model/block.ts';
import type { BridgeResponse, ZeroRecord } from '../model/calibration.ts';
import { apply, compose, type FractionalLinear } from '../model/fractional-linear.ts';
import { sampleCount, type Frame, type InputBlock } from '../model/frame.ts';
import { inForce, type InForce } from '../model/in-force.ts';
import type { LimitContext } from '../model/limit.ts';
import { channelsOf, type Channel, type Member, type Site } from '../model/site.ts';
import { ratio, type Celsius } from '../model/units.ts';
import { excitationInput, signalMap } from './2-ratio/signal.ts';
import { bridgeStrain, linearValue } from './3-strain/bridge.ts';
import { thermalMap } from './3-strain/thermal-output.ts';
import { stressPerStrain, yieldFor } from './4-stress/stress.ts';
import { convert, convertOver, type Range, type Stretch } from './convert.ts';

/** Records made ready: raw figure (over excitation, if measured) → channel's SI value. */
export interface Conversion extends InForce {
  readonly excitation: string | null;
  /** As if at the temperature of the zero state. */
  readonly map: FractionalLinear;
  /** null: not put right for temperature. */
  readonly correction: Correction | null;
}

interface Correction {
  /** Id of the channel whose temperature it is. */
  readonly channel: string;
  readonly at: (temperature: Celsius) => FractionalLinear;
}

/** A channel's temperature at time `t` (s), °C; null where it is not known. */
export type TemperatureAt = (channel: string, t: number) => Celsius | null;

/** A channel with all that is worked out once for it. */
export interface ChannelPlan {
  /** Place among the site's channels, in site order. */
  readonly index: number;
  readonly channel: Channel;
  readonly member: Member;
  readonly context: LimitContext;
  readonly conversions: readonly Conversion[];
  readonly range: Range;
  readonly excitationRange: (input: string) => Range;
}

export interface SitePlan {
  readonly channels: readonly ChannelPlan[];
  /** Channels that read an input, by node and input. */
  readonly readers: ReadonlyMap<string, ReadonlyMap<string, readonly ChannelPlan[]>>;
}

export const conversionOf = (governing: InForce): Conversion => {
  const { record, zero } = governing;
  const { signal, response } = record;
  const toSignal = signalMap(signal);
  const own = zero === null ? response.zero : apply(toSignal, zero.raw);
  const toValue =
    response.kind === 'bridge'
      ? bridgeStrain({ ...response, zero: ratio(own) })
      : linearValue({ ...response, zero: own });
  const correction = response.kind === 'bridge' ? correctionOf(response, zero) : null;
  return {
    ...governing,
    excitation: excitationInput(signal),
    map: compose(toSignal, toValue),
    correction,
  };
};

const correctionOf = (response: BridgeResponse, zero: ZeroRecord | null): Correction | null => {
  const { temperature, gaugeFactor } = response;
  if (!temperature) return null;
  const zeroAt = zero?.temperature ?? temperature.zeroAt;
  const gauge = { ...temperature, gaugeFactor };
  return {
    channel: temperature.channel,
    at: (t) => thermalMap(gauge, gaugeFactor, zeroAt, t),
  };
};

export const conversionsOf = ({ calibration, zeros }: Channel): readonly Conversion[] =>
  inForce(calibration, zeros).map(conversionOf);

export const limitContextOf = (channel: Channel, member: Member, site: Site): LimitContext => ({
  measurand: channel.measurand,
  stressPerStrain: stressPerStrain(channel.measurand, member.material),
  yieldStrength: yieldFor(channel.measurand, member.material),
  highestLimit: site.highestLimit,
});

export const planSite = (site: Site): SitePlan => {
  const ranges = new Map(
    site.nodes.map((node) => [node.id, new Map(node.inputs.map((i) => [i.name, i.range]))]),
  );
  const rangeOf = (node: string, input: string): Range => ranges.get(node)?.get(input) ?? null;
  const channels = channelsOf(site).map(({ channel, member }, index): ChannelPlan => ({
    index,
    channel,
    member,
    context: limitContextOf(channel, member, site),
    conversions: conversionsOf(channel),
    range: rangeOf(channel.node, channel.input),
    excitationRange: (input) => rangeOf(channel.node, input),
  }));
  const readers = new Map<string, Map<string, ChannelPlan[]>>();
  for (const plan of channels) {
    const inputs = readers.get(plan.channel.node) ?? new Map<string, ChannelPlan[]>();
    readers.set(plan.channel.node, inputs);
    inputs.set(plan.channel.input, [...(inputs.get(plan.channel.input) ?? []), plan]);
  }
  return { channels, readers };
};

/** Place of the conversion in force at time `t` (s); −1 before the first. */
export const conversionAt = (conversions: readonly Conversion[], t: number): number =>
  conversions.findLastIndex(({ from }) => from <= t);

/** End of the samples from `from` on that one conversion governs. */
const stretchBounds = (conversions: readonly Conversion[], frame: Frame, from: number): number => {
  const count = sampleCount(frame);
  const at = conversionAt(conversions, frame.t0 + from * frame.dt);
  const next = conversions[at + 1];
  if (!next || !(frame.dt > 0)) return count;
  return Math.min(count, Math.ceil((next.from - frame.t0) / frame.dt));
};

const convertStretch = (
  plan: ChannelPlan,
  frame: Frame,
  { samples }: InputBlock,
  from: number,
  to: number,
  values: Float64Array,
  temperatureAt: TemperatureAt,
): Stretch => {
  const none = (quality: Quality) => {
    values.fill(NaN, from, to);
    return { min: Infinity, max: -Infinity, last: NaN, quality };
  };
  const conversion = plan.conversions[conversionAt(plan.conversions, frame.t0 + from * frame.dt)];
  if (!conversion) return none('uncalibrated');
  const { excitation, correction } = conversion;
  const temperature =
    correction && temperatureAt(correction.channel, frame.t0 + ((from + to - 1) / 2) * frame.dt);
  const map =
    correction && temperature !== null
      ? compose(conversion.map, correction.at(temperature))
      : conversion.map;
  const settled = (stretch: Stretch): Stretch =>
    correction && temperature === null && stretch.quality === 'good'
      ? { ...stretch, quality: 'uncorrected' }
      : stretch;
  if (excitation === null) return settled(convert(samples, map, plan.range, from, to, values));
  const over = frame.inputs.find(({ input }) => input === excitation)?.samples;
  if (!over) return none('excitation');
  const { range } = plan;
  const overRange = plan.excitationRange(excitation);
  return settled(convertOver(samples, over, map, range, overRange, from, to, values));
};

const blockOf = (
  plan: ChannelPlan,
  frame: Frame,
  block: InputBlock,
  temperatureAt: TemperatureAt,
): ChannelBlock => {
  const count = block.samples.length;
  const values = new Float64Array(count);
  let [min, max, last, from] = [Infinity, -Infinity, NaN, 0];
  let quality: Quality = 'missing';
  while (from < count) {
    const to = Math.max(from + 1, stretchBounds(plan.conversions, frame, from));
    const stretch = convertStretch(plan, frame, block, from, to, values, temperatureAt);
    min = Math.min(min, stretch.min);
    max = Math.max(max, stretch.max);
    ({ last, quality } = stretch);
    from = to;
  }
  return { channel: plan.index, t0: frame.t0, dt: frame.dt, values, min, max, last, quality };
};

/**
 * Every channel that the frame feeds, each sample by the records in force at its time. The gauges'
 * temperature is that of the middle of a frame: frames are seconds, steel takes minutes.
 */
export const channelBlocks = (
  frame: Frame,
  plan: SitePlan,
  temperatureAt: TemperatureAt,
): ChannelBlock[] => {
  const readers = plan.readers.get(frame.node);
  if (!readers) return [];
  const blocks: ChannelBlock[] = [];
  for (const block of frame.inputs) {
    for (const reader of readers.get(block.input) ?? []) {
      blocks.push(blockOf(reader, frame, block, temperatureAt));
    }
  }
  return blocks;
};
