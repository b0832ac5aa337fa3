/**
 * The order of the headroom ladder without flicker. A channel's rung follows its
 * share of the stop limit only when the share has moved by more than `MARGIN`
 * from where the rung was put, so noise below it moves nothing, and no channel
 * stands further than 2 · MARGIN out of its true place.
 */
export const MARGIN = 0.01;

/**
 * Follows `shares` with `held`, in place; NaN is a channel that cannot be judged.
 * True if any rung moved.
 */
export const holdShares = (held: Float64Array, shares: Float64Array, margin = MARGIN): boolean => {
  let moved = false;
  for (let i = 0; i < held.length; i++) {
    const [was, is] = [held[i] ?? NaN, shares[i] ?? NaN];
    const judged = !Number.isNaN(is);
    if (judged === !Number.isNaN(was) && !(Math.abs(is - was) > margin)) continue;
    held[i] = is;
    moved = true;
  }
  return moved;
};

/** Places of the judged channels, the one nearest to its stop limit first; ties in site order. */
export const ladderOrder = (held: Float64Array): number[] =>
  [...held.keys()]
    .filter((i) => !Number.isNaN(held[i]))
    .sort((a, b) => (held[b] ?? 0) - (held[a] ?? 0) || a - b);
