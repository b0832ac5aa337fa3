/**
 * The straight line y = intercept + slope·x by least squares, all points with equal weight.
 * Source: GUM (JCGM 100:2008) H.3.2, with sums taken about the means so that times since 1970
 * keep their digits.
 */
export interface Line {
  readonly slope: number;
  readonly intercept: number;
  /** Of the residuals, n − 2 degrees of freedom; y's unit. NaN with two points. */
  readonly residualDeviation: number;
  /** Standard errors of slope and intercept for independent residuals; NaN with two points. */
  readonly slopeError: number;
  readonly interceptError: number;
  /** Share of y's variance that the line accounts for, 0 to 1; NaN where y does not vary. */
  readonly determination: number;
  /** Pairs used: those with both figures finite. */
  readonly count: number;
}

export const lineAt = (line: Line, x: number): number => line.intercept + line.slope * x;

/** Mean of `of` where the pair counts; twice, so that it is right to the last digit far from zero. */
const meanOf = (of: ArrayLike<number>, counts: Uint8Array, count: number): number => {
  let mean = 0;
  for (let pass = 0; pass < 2; pass++) {
    let rest = 0;
    for (let i = 0; i < counts.length; i++) if (counts[i] === 1) rest += (of[i] ?? NaN) - mean;
    mean += rest / count;
  }
  return mean;
};

/** null with fewer than two different x. Pairs in which a figure is not finite are left out. */
export const fitLine = (x: ArrayLike<number>, y: ArrayLike<number>): Line | null => {
  const counts = new Uint8Array(Math.min(x.length, y.length));
  let count = 0;
  for (let i = 0; i < counts.length; i++) {
    if (Number.isFinite(x[i]) && Number.isFinite(y[i])) count += counts[i] = 1;
  }
  const meanX = meanOf(x, counts, count);
  const meanY = meanOf(y, counts, count);
  let [sxx, sxy, syy] = [0, 0, 0];
  for (let i = 0; i < counts.length; i++) {
    if (counts[i] === 0) continue;
    const [dx, dy] = [(x[i] ?? NaN) - meanX, (y[i] ?? NaN) - meanY];
    sxx += dx * dx;
    sxy += dx * dy;
    syy += dy * dy;
  }
  if (!(sxx > 0)) return null;
  const slope = sxy / sxx;
  let squares = 0;
  for (let i = 0; i < counts.length; i++) {
    if (counts[i] === 0) continue;
    squares += ((y[i] ?? NaN) - meanY - slope * ((x[i] ?? NaN) - meanX)) ** 2;
  }
  const residualDeviation = count > 2 ? Math.sqrt(squares / (count - 2)) : NaN;
  return {
    slope,
    intercept: meanY - slope * meanX,
    residualDeviation,
    slopeError: residualDeviation / Math.sqrt(sxx),
    interceptError: residualDeviation * Math.sqrt(1 / count + meanX ** 2 / sxx),
    determination: syy > 0 ? 1 - squares / syy : NaN,
    count,
  };
};
