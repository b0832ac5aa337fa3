/**
 * A Wheatstone bridge solved as a resistor network by nodal analysis (Kirchhoff's
 * current law, Gaussian elimination): independent of every formula of the product.
 */
export interface Network {
  /** Whole resistances of the four arms, leads included, Ω. */
  readonly arms: readonly [number, number, number, number];
  /** Of each of the two conductors that bring the excitation, Ω. */
  readonly supplyLead: number;
}

const solve = (matrix: number[][], right: number[]): number[] => {
  const n = right.length;
  const rows = matrix.map((row, i) => [...row, right[i] ?? 0]);
  for (let k = 0; k < n; k++) {
    const pivot = rows
      .slice(k)
      .reduce(
        (best, row, i) => (Math.abs(row[k] ?? 0) > Math.abs(rows[best]?.[k] ?? 0) ? k + i : best),
        k,
      );
    [rows[k], rows[pivot]] = [rows[pivot] ?? [], rows[k] ?? []];
    const top = rows[k] ?? [];
    for (let i = k + 1; i < n; i++) {
      const row = rows[i] ?? [];
      const factor = (row[k] ?? 0) / (top[k] ?? 1);
      for (let j = k; j <= n; j++) row[j] = (row[j] ?? 0) - factor * (top[j] ?? 0);
    }
  }
  const x = new Array<number>(n).fill(0);
  for (let i = n - 1; i >= 0; i--) {
    const row = rows[i] ?? [];
    const rest = row.slice(i + 1, n).reduce((sum, c, j) => sum + c * (x[i + 1 + j] ?? 0), 0);
    x[i] = ((row[n] ?? 0) - rest) / (row[i] ?? 1);
  }
  return x;
};

/**
 * Output over supply. Nodes: 0 the supply's minus, kept at 0 V; P plus end of the
 * bridge; Q minus end; A between arms 1 and 2; B between arms 4 and 3. The supply
 * of 1 V stands behind the plus conductor.
 */
export const nodalOutput = ({ arms, supplyLead }: Network): number => {
  const [r1, r2, r3, r4] = arms;
  // A lead of none at all would be a short in the matrix; a nano-ohm stands for it.
  const lead = Math.max(supplyLead, 1e-9);
  const [g1, g2, g3, g4, gl] = [1 / r1, 1 / r2, 1 / r3, 1 / r4, 1 / lead];
  // Ring 1-2-3-4: arm 1 from P to A, arm 2 from A to Q, arm 3 from Q to B, arm 4 from B to P.
  // Unknowns P, Q, A, B. The output that is positive for arm 1 in tension is V(B) − V(A).
  const [p, q, a, b] = [0, 1, 2, 3];
  const matrix = Array.from({ length: 4 }, () => [0, 0, 0, 0]);
  const branch = (i: number, j: number, g: number) => {
    const add = (k: number, l: number, value: number) => {
      const row = matrix[k];
      if (row) row[l] = (row[l] ?? 0) + value;
    };
    add(i, i, g);
    add(j, j, g);
    add(i, j, -g);
    add(j, i, -g);
  };
  branch(p, a, g1);
  branch(a, q, g2);
  branch(q, b, g3);
  branch(b, p, g4);
  const rowP = matrix[p];
  const rowQ = matrix[q];
  if (rowP) rowP[p] = (rowP[p] ?? 0) + gl;
  if (rowQ) rowQ[q] = (rowQ[q] ?? 0) + gl;
  const v = solve(matrix, [gl, 0, 0, 0]);
  return (v[b] ?? NaN) - (v[a] ?? NaN);
};
