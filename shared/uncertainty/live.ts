import type { Term } from './budget.ts';
import { factorTable, welchSatterthwaite } from './combined.ts';
import { scaled, type Quadratic } from './quadratic.ts';

/** Coefficients, the constant first. */
export type Polynomial = readonly number[];

const product = (p: Polynomial, q: Polynomial): number[] => {
  const out = new Array<number>(p.length + q.length - 1).fill(0);
  p.forEach((pi, i) => q.forEach((qj, j) => (out[i + j] = (out[i + j] ?? 0) + pi * qj)));
  return out;
};

const total = (all: readonly Polynomial[]): number[] => {
  const out = [0];
  for (const each of all) each.forEach((c, i) => (out[i] = (out[i] ?? 0) + c));
  // Powers that no term has cost nothing later.
  return out.slice(0, out.findLastIndex((c) => c !== 0) + 1);
};

const at = (p: Polynomial, x: number): number => {
  let sum = 0;
  for (let i = p.length - 1; i >= 0; i--) sum = sum * x + (p[i] ?? 0);
  return sum;
};

/** A channel's uncertainty for any strain at the price of a few products. */
export interface LiveUncertainty {
  /**
   * u_c² of the strain: c0 + c1·ε + c2·ε² where the circuit is linear; with the bridge's own
   * non-linearity in an input's sensitivity up to ε⁴. Exact in both.
   */
  readonly variance: Polynomial;
  /** Σ u_i⁴/ν_i; empty where every input is known for certain, and k is constant. */
  readonly doubt: Polynomial;
  /** u_c at a strain. */
  readonly standard: (strain: number) => number;
  /** U = k·u_c at a strain, k by the effective degrees of freedom there. */
  readonly expanded: (strain: number) => number;
}

/** The same figures as `budgetAt`, made ready once for many strains. */
export const liveUncertainty = (terms: readonly Term[], coverage: number): LiveUncertainty => {
  const amounts = terms.map(({ sensitivity, standard }): Quadratic =>
    scaled(sensitivity, standard),
  );
  const squares = amounts.map((amount) => product(amount, amount));
  const variance = total(squares);
  const doubt = total(
    squares.flatMap((square, i) => {
      const degrees = terms[i]?.degrees ?? Infinity;
      return degrees === Infinity ? [] : [product(square, square).map((c) => c / degrees)];
    }),
  );
  const factor = factorTable(coverage);
  // A sum of squares, but for rounding.
  const varianceAt = (strain: number) => Math.max(0, at(variance, strain));
  return {
    variance,
    doubt,
    standard: (strain) => Math.sqrt(varianceAt(strain)),
    expanded: (strain) => {
      const u2 = varianceAt(strain);
      return factor(welchSatterthwaite(u2, at(doubt, strain))) * Math.sqrt(u2);
    },
  };
};
