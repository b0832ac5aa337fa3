/**
 * Every stage from a raw sample to strain or stress is a map
 * `x → (a·x + b) / (c·x + d)`: a scale, an exact bridge inversion, a zero, a
 * modulus. Their composition is again one, the product of their 2×2 matrices,
 * so a whole chain costs one division a sample however many steps it has.
 */
export interface FractionalLinear {
  readonly a: number;
  readonly b: number;
  readonly c: number;
  readonly d: number;
}

export const IDENTITY: FractionalLinear = { a: 1, b: 0, c: 0, d: 1 };

/** `x → gain·x + offset`. */
export const affine = (gain: number, offset = 0): FractionalLinear => ({
  a: gain,
  b: offset,
  c: 0,
  d: 1,
});

export const apply = (m: FractionalLinear, x: number): number => (m.a * x + m.b) / (m.c * x + m.d);

/** First `first`, then `then`. */
export const compose = (first: FractionalLinear, then: FractionalLinear): FractionalLinear => ({
  a: then.a * first.a + then.b * first.c,
  b: then.a * first.b + then.b * first.d,
  c: then.c * first.a + then.d * first.c,
  d: then.c * first.b + then.d * first.d,
});

export const chain = (...maps: readonly FractionalLinear[]): FractionalLinear =>
  maps.reduce(compose, IDENTITY);

export const inverse = (m: FractionalLinear): FractionalLinear => ({
  a: m.d,
  b: -m.b,
  c: -m.c,
  d: m.a,
});

/** The map keeps order (true) or turns it round (false), away from its pole. */
export const isRising = (m: FractionalLinear): boolean => m.a * m.d - m.b * m.c > 0;
