/** Evenly spread over [0, 1), the same run for the same seed. */
export type Random = () => number;

/** mulberry32, a generator of 32 bits of state (Tommy Ettinger, public domain). */
export const seededRandom = (seed: number): Random => {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
};

/** Normally distributed, mean 0 and standard deviation 1. Box and Muller, Ann. Math. Stat. 29 (1958). */
export const normalRandom =
  (random: Random): Random =>
  () =>
    Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
