import type { FractionalLinear } from '../model/fractional-linear.ts';

/** c0 + c1·x + c2·x². */
export type Quadratic = readonly [c0: number, c1: number, c2: number];

export const quadraticAt = ([c0, c1, c2]: Quadratic, x: number): number => c0 + x * (c1 + x * c2);

export const scaled = ([c0, c1, c2]: Quadratic, by: number): Quadratic => [
  by * c0,
  by * c1,
  by * c2,
];

export const sum = (...all: readonly Quadratic[]): Quadratic => [
  all.reduce((total, [c0]) => total + c0, 0),
  all.reduce((total, [, c1]) => total + c1, 0),
  all.reduce((total, [, , c2]) => total + c2, 0),
];

/** The quadratic of x as one of y, where x = offset + gain·y. */
export const substituted = (q: Quadratic, gain: number, offset: number): Quadratic => [
  quadraticAt(q, offset),
  (q[1] + 2 * q[2] * offset) * gain,
  q[2] * gain ** 2,
];

/**
 * How far the output of a fractional-linear map moves when its coefficients move by `change` (per
 * unit of some parameter) and its input stays: exactly a quadratic in the output. With
 * x = (d·y − b)/(a − c·y) put into ∂y/∂q = (a′x + b′ − y·(c′x + d′))/(c·x + d) the divisions go.
 */
export const outputChange = (map: FractionalLinear, change: FractionalLinear): Quadratic => {
  const { a, b, c, d } = map;
  const determinant = a * d - b * c;
  return [
    (change.b * a - change.a * b) / determinant,
    (change.a * d + change.c * b - change.b * c - change.d * a) / determinant,
    (change.d * c - change.c * d) / determinant,
  ];
};
