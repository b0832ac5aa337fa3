import { IDENTITY } from '../../shared/model/fractional-linear.ts';
import { seconds } from '../../shared/model/units.ts';
import type { Series, Watched } from '../../shared/channel-check/series.ts';

/** Evenly spread figures from 0 to 1 of a seed, the same each time; mulberry32. */
export const chance = (seed: number): (() => number) => {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
};

/** Normal figures of mean 0 and deviation 1; Box and Muller, 1958. */
export const normal = (seed: number): (() => number) => {
  const even = chance(seed);
  return () => Math.sqrt(-2 * Math.log(1 - even())) * Math.cos(2 * Math.PI * even());
};

/** `rate` samples a second for `duration` s of what `at` gives for each time in s. */
export const sampled = (rate: number, duration: number, at: (t: number) => number): Series => ({
  values: Float64Array.from({ length: Math.round(rate * duration) }, (_, i) => at(i / rate)),
  dt: seconds(1 / rate),
});

/** A channel whose raw figures are its values. */
export const watched = ({ values, dt }: Series): Watched => ({
  raw: values,
  input: values,
  dt,
  map: IDENTITY,
});
