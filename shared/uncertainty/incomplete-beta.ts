/** Below it Stirling's series of four terms is short of double precision. */
const STIRLING_FROM = 16;

/** lnΓ(z) − [(z − ½)·ln z − z + ½·ln 2π] for z ≥ 16; NIST DLMF 5.11.1. */
const stirlingRest = (z: number): number => {
  const w = 1 / (z * z);
  return (1 / 12 - w * (1 / 360 - w * (1 / 1260 - w * (1 / 1680 - w / 1188)))) / z;
};

/** ln Γ(z), z > 0, by recurrence up to where Stirling's series holds; DLMF 5.5.1, 5.11.1. */
const logGamma = (z: number): number => {
  let [at, below] = [z, 1];
  for (; at < STIRLING_FROM; at++) below *= at;
  const stirling = (at - 0.5) * Math.log(at) - at + 0.5 * Math.log(2 * Math.PI);
  return stirling + stirlingRest(at) - Math.log(below);
};

/**
 * ln B(a, b) = ln[Γ(a)·Γ(b)/Γ(a+b)], a, b > 0; DLMF 5.12.1. The great terms of Γ(a) and Γ(a+b)
 * are cancelled on paper, so that it stays exact where one of the two is very large.
 */
export const logBeta = (one: number, other: number): number => {
  const b = Math.min(one, other);
  let a = Math.max(one, other);
  let above = 1;
  // B(a, b) = B(a+1, b)·(a+b)/a, from the recurrence of Γ.
  for (; a < STIRLING_FROM; a++) above *= (a + b) / a;
  const difference =
    (0.5 - a) * Math.log1p(b / a) - b * Math.log(a + b) + b + stirlingRest(a) - stirlingRest(a + b);
  return logGamma(b) + difference + Math.log(above);
};

/**
 * I_x(a, b), the regularised incomplete beta function, by
 * x^a·(1−x)^b/(a·B(a, b))·Σ (a+b)_n/(a+1)_n·x^n, all of whose terms are positive: no digits are
 * lost; DLMF 8.17.8. For 0 ≤ x < 1 with (1−x)^b above 1e-300, fast where x is well below 1:
 * beyond ½ take 1 − I_{1−x}(b, a), DLMF 8.17.4.
 */
export const regularisedBeta = (x: number, a: number, b: number): number => {
  if (!(x > 0)) return 0;
  let [term, sum] = [1, 1];
  for (let n = 0; term > sum * Number.EPSILON; n++) {
    term *= (x * (a + b + n)) / (a + 1 + n);
    sum += term;
  }
  const front = a * Math.log(x) + b * Math.log1p(-x) - Math.log(a) - logBeta(a, b);
  return Math.exp(front + Math.log(sum));
};
