/**
 * A resistor network solved by nodal analysis: Kirchhoff's current law at every
 * free node, Gaussian elimination. Independent of every formula of the product.
 */
export type Resistor = readonly [from: string, to: string, ohm: number];

/** Solves `rows`, each the coefficients of one equation and its right side. */
const eliminate = (rows: number[][]): number[] => {
  const n = rows.length;
  const at = (i: number, j: number): number => rows[i]?.[j] ?? NaN;
  for (let k = 0; k < n; k++) {
    let pivot = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(at(i, k)) > Math.abs(at(pivot, k))) pivot = i;
    [rows[k], rows[pivot]] = [rows[pivot] ?? [], rows[k] ?? []];
    for (let i = k + 1; i < n; i++) {
      const factor = at(i, k) / at(k, k);
      rows[i] = (rows[i] ?? []).map((value, j) => (j < k ? value : value - factor * at(k, j)));
    }
  }
  const x = new Array<number>(n).fill(0);
  for (let i = n - 1; i >= 0; i--) {
    let rest = at(i, n);
    for (let j = i + 1; j < n; j++) rest -= at(i, j) * (x[j] ?? NaN);
    x[i] = rest / at(i, i);
  }
  return x;
};

/** Voltage of every node, V; `held` are the nodes that a supply keeps at a voltage. */
export const nodeVoltages = (
  resistors: readonly Resistor[],
  held: Readonly<Record<string, number>>,
): ReadonlyMap<string, number> => {
  const free = [...new Set(resistors.flatMap(([from, to]) => [from, to]))].filter(
    (node) => !(node in held),
  );
  const rows = free.map((node) => {
    const row = new Array<number>(free.length + 1).fill(0);
    const add = (column: number, value: number) => {
      row[column] = (row[column] ?? 0) + value;
    };
    for (const [from, to, ohm] of resistors) {
      if (from !== node && to !== node) continue;
      const other = from === node ? to : from;
      add(free.indexOf(node), 1 / ohm);
      const voltage = held[other];
      if (voltage === undefined) add(free.indexOf(other), -1 / ohm);
      else add(free.length, voltage / ohm);
    }
    return row;
  });
  const voltages = eliminate(rows);
  return new Map([
    ...Object.entries(held),
    ...free.map((node, i): [string, number] => [node, voltages[i] ?? NaN]),
  ]);
};
