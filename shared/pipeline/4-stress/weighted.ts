/** Σ wk·xk. */
export const weighted = (weights: ArrayLike<number>, figures: ArrayLike<number>): number => {
  let sum = 0;
  for (let k = 0; k < weights.length; k++) sum += (weights[k] ?? NaN) * (figures[k] ?? NaN);
  return sum;
};

/**
 * Σ wk·xk sample by sample over columns of one length, without allocation: section forces, fibre
 * stresses, means and differences of channels are all of this form. NaN where any column is.
 */
export const fillWeighted = (
  weights: ArrayLike<number>,
  columns: readonly Float64Array[],
  out: Float64Array,
): void => {
  out.fill(0);
  for (let k = 0; k < columns.length; k++) {
    const column = columns[k];
    const weight = weights[k] ?? NaN;
    for (let i = 0; i < out.length; i++) out[i] = (out[i] ?? NaN) + weight * (column?.[i] ?? NaN);
  }
};
