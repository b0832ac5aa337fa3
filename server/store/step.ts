/** Steps are whole multiples of a power of 4 s, down to 2⁻²⁰ s: few times what a time resolves. */
const SMALLEST = -10;
const LARGEST = 12;
/** How much longer than asked for a step may come out. */
const WASTE = 4 / 3;

const rounded = (asked: number, k: number): number => Math.ceil(asked / 4 ** k) * 4 ** k;

/**
 * The width of an envelope's points, s, for points of at least `asked` s. It
 * depends on nothing else, is exact in binary, so that a time belongs to one
 * point however it is reckoned, and is whole above 1 s: what is summed up by
 * whole seconds serves.
 */
export const stepFor = (asked: number): number => {
  for (let k = LARGEST; k >= SMALLEST; k--) {
    const step = rounded(asked, k);
    if (step <= asked * WASTE || (k === 0 && asked > 1)) return step;
  }
  return rounded(asked, SMALLEST);
};
