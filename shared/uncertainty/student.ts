import { logBeta, regularisedBeta } from './incomplete-beta.ts';

/** P(|X| ≤ k) of the normal distribution, all terms positive; NIST DLMF 7.6.2 with z = k/√2. */
const normalCoverage = (k: number): number => {
  let [term, sum] = [1, 1];
  for (let n = 1; term > sum * Number.EPSILON; n++) {
    term *= (k * k) / (2 * n + 1);
    sum += term;
  }
  return Math.sqrt(2 / Math.PI) * k * Math.exp((-k * k) / 2) * sum;
};

/** e⁻⁴⁰ is less than a double can hold beside 1: of such tails nothing is left. */
const NO_TAIL = 40;

/**
 * P(|T| ≤ k) of Student's distribution with `degrees` > 0 degrees of freedom, Infinity for the
 * normal one; k ≥ 0. GUM (JCGM 100:2008) G.3; I_{k²/(ν+k²)}(½, ν/2), DLMF 8.17.
 */
export const studentCoverage = (k: number, degrees: number): number => {
  const square = k * k;
  if (degrees === Infinity) return square / 2 > NO_TAIL ? 1 : normalCoverage(k);
  const half = degrees / 2;
  const inside = square / (degrees + square);
  if (inside > 0.5) return 1 - regularisedBeta(degrees / (degrees + square), half, 0.5);
  // The tails hold less than (1 − x)^(ν/2).
  return -half * Math.log1p(-inside) > NO_TAIL ? 1 : regularisedBeta(inside, 0.5, half);
};

/** Twice the density at k, the slope of the coverage; GUM G.3.1, equation (G.1). */
const coverageSlope = (k: number, degrees: number): number =>
  degrees === Infinity
    ? Math.sqrt(2 / Math.PI) * Math.exp((-k * k) / 2)
    : 2 *
      Math.exp(
        -((degrees + 1) / 2) * Math.log1p((k * k) / degrees) -
          Math.log(degrees) / 2 -
          logBeta(0.5, degrees / 2),
      );

/** Newton's steps, kept between bounds that close in: more than enough from any start. */
const MOST_STEPS = 200;

/**
 * The k for which P(|T| ≤ k) = `coverage`, 0 < coverage < 1: t_p(ν) of GUM Table G.2, to about
 * 13 digits. `degrees` > 0, not rounded; Infinity for the normal distribution. NaN outside.
 */
export const coverageFactor = (coverage: number, degrees: number): number => {
  if (!(coverage > 0 && coverage < 1 && degrees > 0)) return NaN;
  let [low, high] = [0, 1];
  while (studentCoverage(high, degrees) < coverage) [low, high] = [high, 2 * high];
  let k = (low + high) / 2;
  for (let step = 0; step < MOST_STEPS; step++) {
    const excess = studentCoverage(k, degrees) - coverage;
    if (excess > 0) high = k;
    else low = k;
    const newton = k - excess / coverageSlope(k, degrees);
    const next = newton > low && newton < high ? newton : (low + high) / 2;
    if (Math.abs(next - k) <= 4 * Number.EPSILON * k) return next;
    k = next;
  }
  return k;
};
