/** Place of the last of ascending times that is not after `t`; −1 where all are. */
export const lastBefore = (times: ArrayLike<number>, t: number): number => {
  let [low, high] = [0, times.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((times[middle] ?? Infinity) <= t) low = middle + 1;
    else high = middle;
  }
  return low - 1;
};
