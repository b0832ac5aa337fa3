import { apply, type FractionalLinear } from '../model/fractional-linear.ts';
import type { Seconds } from '../model/units.ts';

/** A channel's samples over a window, evenly spaced; a place without a believed sample is NaN. */
export interface Watched {
  /** As the node gives them, over V of excitation where that is measured. */
  readonly raw: ArrayLike<number>;
  /** As the input gives them, what its range is stated in; `raw` itself but for measured excitation. */
  readonly input: ArrayLike<number>;
  /** > 0 */
  readonly dt: Seconds;
  /** `raw` to the channel's value: the conversion in force. */
  readonly map: FractionalLinear;
}

/** The channel's values, SI, evenly spaced; NaN where missing. */
export interface Series {
  readonly values: Float64Array;
  readonly dt: Seconds;
}

// Loops here and not from, map and filter: a window may hold hundreds of thousands of samples.
export const seriesOf = ({ raw, dt, map }: Watched): Series => {
  const values = new Float64Array(raw.length);
  for (let i = 0; i < raw.length; i++) values[i] = apply(map, raw[i] ?? NaN);
  return { values, dt };
};

export const finiteOf = (values: ArrayLike<number>): Float64Array => {
  const finite = new Float64Array(values.length);
  let count = 0;
  for (let i = 0; i < values.length; i++) {
    const value = values[i] ?? NaN;
    if (Number.isFinite(value)) finite[count++] = value;
  }
  return finite.subarray(0, count);
};

/** The middle figure, of an even number the mean of the two in the middle; NaN of none. */
export const median = (values: ArrayLike<number>): number => {
  const sorted = finiteOf(values).sort();
  const upper = Math.floor(sorted.length / 2);
  const [below, above] = [sorted[sorted.length - 1 - upper] ?? NaN, sorted[upper] ?? NaN];
  return below + (above - below) / 2;
};

export const durationOf = ({ values, dt }: Series): number => values.length * dt;
