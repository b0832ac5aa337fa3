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

/** null with fewer than two different x. Pairs in which a figure is not finite are left out. */
export const fitLine = (x: ArrayLike<number>, y: ArrayLike<number>): Line | null => {
  const pairs: (readonly [x: number, y: number])[] = [];
  for (let i = 0; i < Math.min(x.length, y.length); i++) {
    const [xi, yi] = [x[i] ?? NaN, y[i] ?? NaN];
    if (Number.isFinite(xi) && Number.isFinite(yi)) pairs.push([xi, yi]);
  }
  const count = pairs.length;
  // Twice, so that the mean of figures far from zero is right to the last digit.
  const meanOf = (figure: (pair: readonly [number, number]) => number) => {
    const rough = pairs.reduce((sum, pair) => sum + figure(pair), 0) / count;
    return rough + pairs.reduce((sum, pair) => sum + (figure(pair) - rough), 0) / count;
  };
  const meanX = meanOf(([xi]) => xi);
  const meanY = meanOf(([, yi]) => yi);
  let [sxx, sxy, syy] = [0, 0, 0];
  for (const [xi, yi] of pairs) {
    sxx += (xi - meanX) ** 2;
    sxy += (xi - meanX) * (yi - meanY);
    syy += (yi - meanY) ** 2;
  }
  if (!(sxx > 0)) return null;
  const slope = sxy / sxx;
  const squares = pairs.reduce(
    (sum, [xi, yi]) => sum + (yi - meanY - slope * (xi - meanX)) ** 2,
    0,
  );
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
