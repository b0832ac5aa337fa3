/** Type A evaluation of one quantity read several times; GUM (JCGM 100:2008) 4.2. */
export interface Readings {
  readonly count: number;
  readonly mean: number;
  /** Of single readings, n − 1 below; GUM 4.2.2. NaN with one. */
  readonly deviation: number;
  /** Of the mean, for readings that do not depend on each other; GUM 4.2.3. NaN with one. */
  readonly standardError: number;
}

/** Figures that are not finite are left out; NaN throughout where none is left. */
export const readingsOf = (values: ArrayLike<number>): Readings => {
  const finite = Array.from(values).filter(Number.isFinite);
  const count = finite.length;
  const first = finite[0] ?? NaN;
  // About the first, so that a small scatter on a large figure keeps its digits.
  const mean = first + finite.reduce((sum, value) => sum + (value - first), 0) / count;
  const squares = finite.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  const deviation = count > 1 ? Math.sqrt(squares / (count - 1)) : NaN;
  return { count, mean, deviation, standardError: deviation / Math.sqrt(count) };
};
