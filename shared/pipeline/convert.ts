import type { Quality } from '../model/block.ts';
import type { FractionalLinear } from '../model/fractional-linear.ts';
import type { RawArray } from '../model/frame.ts';

export type Range = readonly [low: number, high: number] | null;

/** What came of a stretch of samples: extremes over the believed ones, the state of the last. */
export interface Stretch {
  min: number;
  max: number;
  last: number;
  quality: Quality;
}

/** The ends of a range as float32 or wider samples hold them: a float32 at the rail is at the rail. */
const ends = (range: Range, isFloat32: boolean): readonly [low: number, high: number] => {
  const [low, high] = range ?? [-Infinity, Infinity];
  return isFloat32 ? [Math.fround(low), Math.fround(high)] : [low, high];
};

/** Is a single sample within its range? One that a float32 can hold is taken for a float32. */
export const isWithin = (sample: number, range: Range): boolean => {
  const [low, high] = ends(range, Math.fround(sample) === sample);
  return sample > low && sample < high;
};

/**
 * Converts samples [from, to) of `raw` into `out` by one fractional-linear map,
 * and their extremes with it, in one pass. At or beyond either end of `range`
 * a sample is not believed and becomes NaN.
 */
export const convert = (
  raw: RawArray,
  map: FractionalLinear,
  range: Range,
  from: number,
  to: number,
  out: Float64Array,
): Stretch => {
  const { a, b, c, d } = map;
  const [low, high] = ends(range, raw instanceof Float32Array);
  let min = Infinity;
  let max = -Infinity;
  for (let i = from; i < to; i++) {
    const x = raw[i] ?? NaN;
    const value = x > low && x < high ? (a * x + b) / (c * x + d) : NaN;
    out[i] = value;
    if (value < min) min = value;
    if (value > max) max = value;
  }
  const last = raw[to - 1] ?? NaN;
  const quality = Number.isNaN(last)
    ? 'missing'
    : last > low && last < high
      ? 'good'
      : 'over-range';
  return { min, max, last: out[to - 1] ?? NaN, quality };
};

/** As `convert`, of `raw` divided sample by sample by the input that measures its excitation. */
export const convertOver = (
  raw: RawArray,
  excitation: RawArray,
  map: FractionalLinear,
  range: Range,
  excitationRange: Range,
  from: number,
  to: number,
  out: Float64Array,
): Stretch => {
  const ratios = new Float64Array(to);
  const [low, high] = ends(excitationRange, excitation instanceof Float32Array);
  const [rawLow, rawHigh] = ends(range, raw instanceof Float32Array);
  for (let i = from; i < to; i++) {
    const x = raw[i] ?? NaN;
    const over = excitation[i] ?? NaN;
    const believed = x > rawLow && x < rawHigh && over > low && over < high && over !== 0;
    ratios[i] = believed ? x / over : NaN;
  }
  const stretch = convert(ratios, map, null, from, to, out);
  if (stretch.quality === 'missing') {
    const x = raw[to - 1] ?? NaN;
    const over = excitation[to - 1] ?? NaN;
    if (!(over > low && over < high) || over === 0) stretch.quality = 'excitation';
    else if (!Number.isNaN(x)) stretch.quality = 'over-range';
  }
  return stretch;
};
