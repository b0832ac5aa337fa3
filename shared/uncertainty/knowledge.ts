/**
 * What is known of an input of the measurement, and so its standard uncertainty. Figures are in
 * the input's own unit. GUM is JCGM 100:2008.
 */
export type Knowledge =
  /** Anywhere within ± halfWidth alike; GUM 4.3.7. */
  | { readonly kind: 'rectangular'; readonly halfWidth: number; readonly doubt?: number }
  /** Likelier towards the middle; GUM 4.3.9. */
  | { readonly kind: 'triangular'; readonly halfWidth: number; readonly doubt?: number }
  /** Even within ± topHalfWidth, then falling to ± halfWidth; GUM 4.3.9, β = top over base. */
  | {
      readonly kind: 'trapezoidal';
      readonly halfWidth: number;
      readonly topHalfWidth: number;
      readonly doubt?: number;
    }
  /** Swings between ± halfWidth as a sine; GUM H.1.3.4. */
  | { readonly kind: 'u-shaped'; readonly halfWidth: number; readonly doubt?: number }
  /** A certificate's ± expanded for its factor k; GUM 4.3.3. */
  | {
      readonly kind: 'normal';
      readonly expanded: number;
      readonly k: number;
      readonly doubt?: number;
    }
  /** Type A: deviation of single readings, found from `readings`, each value a mean of `averaged`. */
  | {
      readonly kind: 'readings';
      readonly deviation: number;
      readonly readings: number;
      readonly averaged: number;
    };

/** One standard deviation of an input and how well it is known itself. */
export interface Standard {
  readonly uncertainty: number;
  /** Infinity where the bounds are certain. */
  readonly degrees: number;
}

const deviationOf = (known: Knowledge): number => {
  switch (known.kind) {
    case 'rectangular':
      return known.halfWidth / Math.sqrt(3);
    case 'triangular':
      return known.halfWidth / Math.sqrt(6);
    case 'trapezoidal':
      return Math.sqrt((known.halfWidth ** 2 + known.topHalfWidth ** 2) / 6);
    case 'u-shaped':
      return known.halfWidth / Math.SQRT2;
    case 'normal':
      return known.expanded / known.k;
    case 'readings':
      return known.deviation / Math.sqrt(known.averaged);
  }
};

/**
 * Standard uncertainty and degrees of freedom: n − 1 of readings (GUM 4.2.6), and
 * ½·doubt⁻² where a bound itself is in doubt by that share (GUM G.4.2, equation (G.3)).
 */
export const standardOf = (known: Knowledge): Standard => {
  const uncertainty = deviationOf(known);
  if (known.kind === 'readings') return { uncertainty, degrees: known.readings - 1 };
  const doubt = known.doubt ?? 0;
  return { uncertainty, degrees: doubt > 0 ? 1 / (2 * doubt ** 2) : Infinity };
};

/** A figure shown in steps of `step`: ± half of one; GUM F.2.2.1. */
export const inSteps = (step: number): Knowledge => ({ kind: 'rectangular', halfWidth: step / 2 });

const MAGNITUDE = 'a finite figure of 0 or more';
const isMagnitude = (figure: number) => figure >= 0 && figure < Infinity;

/** What a statement of knowledge cannot be, or null. */
export const knowledgeFault = (
  known: Knowledge,
): { field: string; expected: string; came: string } | null => {
  const unless = (good: boolean, field: string, expected: string, came: number | undefined) =>
    good ? null : { field, expected, came: String(came) };
  if (known.kind === 'readings') {
    const { deviation, readings, averaged } = known;
    return (
      unless(isMagnitude(deviation), 'deviation', MAGNITUDE, deviation) ??
      unless(Number.isInteger(readings) && readings > 1, 'readings', '2 or more', readings) ??
      unless(Number.isInteger(averaged) && averaged > 0, 'averaged', '1 or more', averaged)
    );
  }
  const doubt = known.doubt ?? 0;
  const doubtFault = unless(
    doubt >= 0 && doubt < 0.7,
    'doubt',
    'a share from 0 to below 0.7',
    doubt,
  );
  if (known.kind === 'normal') {
    const { expanded, k } = known;
    return (
      unless(isMagnitude(expanded), 'expanded', MAGNITUDE, expanded) ??
      unless(k > 0 && k < Infinity, 'k', 'a finite figure above 0', k) ??
      doubtFault
    );
  }
  const { halfWidth } = known;
  const top = known.kind === 'trapezoidal' ? known.topHalfWidth : 0;
  return (
    unless(isMagnitude(halfWidth), 'halfWidth', MAGNITUDE, halfWidth) ??
    unless(top >= 0 && top <= halfWidth, 'topHalfWidth', `0 to ${halfWidth}`, top) ??
    doubtFault
  );
};
