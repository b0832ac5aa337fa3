export type Triple = readonly [number, number, number];
/** By rows. */
export type Matrix3 = readonly [Triple, Triple, Triple];

export const dot = (a: Triple, b: Triple): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];

const cross = (a: Triple, b: Triple): Triple => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];

const transpose = ([a, b, c]: Matrix3): Matrix3 => [
  [a[0], b[0], c[0]],
  [a[1], b[1], c[1]],
  [a[2], b[2], c[2]],
];

export const multiplyVector = ([a, b, c]: Matrix3, v: Triple): Triple => [
  dot(a, v),
  dot(b, v),
  dot(c, v),
];

/** First `first`, then `then`. */
export const multiply = (then: Matrix3, first: Matrix3): Matrix3 => {
  const columns = transpose(first);
  return [
    multiplyVector(columns, then[0]),
    multiplyVector(columns, then[1]),
    multiplyVector(columns, then[2]),
  ];
};

/** By cofactors; not finite where there is none. */
export const inverse3 = ([a, b, c]: Matrix3): Matrix3 => {
  const [bc, ca, ab] = [cross(b, c), cross(c, a), cross(a, b)];
  const determinant = dot(a, bc);
  const over = (v: Triple): Triple => [v[0] / determinant, v[1] / determinant, v[2] / determinant];
  return transpose([over(bc), over(ca), over(ab)]);
};
