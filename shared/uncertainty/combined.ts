import { coverageFactor } from './student.ts';

/** One input's share in the result: sensitivity times standard uncertainty, sign kept. */
export interface Contribution {
  readonly amount: number;
  readonly degrees: number;
}

/** −1 to 1 between inputs i ≠ j, by their places. */
export type Correlation = (i: number, j: number) => number;

/**
 * u_c² = Σ(c·u)² + 2·ΣΣ c_i·c_j·u_i·u_j·r(i, j); GUM (JCGM 100:2008) 5.1.2 and 5.2.2,
 * equations (10) and (16).
 */
export const combinedVariance = (
  contributions: readonly Contribution[],
  correlation?: Correlation,
): number => {
  let variance = 0;
  contributions.forEach(({ amount }, i) => {
    variance += amount ** 2;
    if (!correlation) return;
    for (let j = i + 1; j < contributions.length; j++) {
      variance += 2 * amount * (contributions[j]?.amount ?? 0) * correlation(i, j);
    }
  });
  // Rounding may leave less than nothing of inputs that cancel.
  return Math.max(0, variance);
};

/** Σ u_i⁴/ν_i, the lower half of the Welch–Satterthwaite formula. */
const welchSum = (contributions: readonly Contribution[]): number =>
  contributions.reduce((sum, { amount, degrees }) => sum + amount ** 4 / degrees, 0);

/** u_c⁴/Σ(u_i⁴/ν_i); Infinity where the sum is 0. Takes both figures ready. */
export const welchSatterthwaite = (variance: number, sum: number): number =>
  sum > 0 ? variance ** 2 / sum : Infinity;

/** ν_eff of inputs that do not depend on each other; GUM G.4.1, equation (G.2b). */
export const effectiveDegrees = (contributions: readonly Contribution[]): number =>
  welchSatterthwaite(combinedVariance(contributions), welchSum(contributions));

/** Above it k no longer changes in its fourth digit, and three digits of ν are kept. */
const COUNTED_TO = 1000;

/**
 * The next lower integer, GUM G.6.4, above 1000 the next lower figure of three digits: k is never
 * too small. At least 1. A whole number that rounding put just below itself stays whole.
 */
export const truncatedDegrees = (degrees: number): number => {
  const whole = Math.max(1, Math.floor(degrees * (1 + 1e-9)));
  if (whole < COUNTED_TO || whole === Infinity) return whole;
  const step = 10 ** (Math.floor(Math.log10(whole)) - 2);
  return Math.floor(whole / step) * step;
};

/** Two-sided shares of the distribution that an expanded uncertainty may stand for. */
export const COVERAGES = [0.95, 0.9545, 0.99] as const;
export type Coverage = (typeof COVERAGES)[number];

/** k for ν, each worked out once; GUM G.3.2, G.6.4. */
export const factorTable = (coverage: number): ((degrees: number) => number) => {
  const known = new Map<number, number>();
  return (degrees) => {
    const truncated = truncatedDegrees(degrees);
    const before = known.get(truncated);
    if (before !== undefined) return before;
    const k = coverageFactor(coverage, truncated);
    known.set(truncated, k);
    return k;
  };
};
