/** The way of a frame, in the order the data meets it: decode → ratio → strain → stress → alarm. */
import type { ChannelBlock, Quality } from '../model/block.ts';
import { compose } from '../model/fractional-linear.ts';
import { sampleCount, type Frame, type InputBlock } from '../model/frame.ts';
import type { Celsius } from '../model/units.ts';
import { convert, convertOver, type Stretch } from './convert.ts';
import type { ChannelPlan, Conversion, SitePlan } from './plan.ts';

export * from './plan.ts';
export { VirtualStream } from './virtual-stream.ts';

/** A channel's temperature at time `t` (s), °C; null where it is not known. */
export type TemperatureAt = (channel: string, t: number) => Celsius | null;

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
