/** The value below which a share `q` of the sorted figures lies (nearest rank). */
export const quantile = (figures: readonly number[], q: number): number => {
  const sorted = [...figures].sort((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.ceil(q * sorted.length) - 1)] ?? NaN;
};

export const median = (figures: readonly number[]): number => quantile(figures, 0.5);

export interface Row {
  readonly what: string;
  readonly figure: number;
  readonly unit: string;
  /** Where there is a goal: how it reads, and whether it was met. */
  readonly goal?: { readonly text: string; readonly met: boolean };
}

const digits = (n: number): string =>
  Number.isFinite(n) ? Number(n.toPrecision(4)).toString() : '-';

export const table = (rows: readonly Row[]): string => {
  const cells = rows.map(({ what, figure, unit, goal }) => [
    what,
    `${digits(figure)} ${unit}`,
    goal ? `${goal.text}: ${goal.met ? 'met' : 'NOT met'}` : '',
  ]);
  const widths = [0, 1].map((i) => Math.max(...cells.map((row) => row[i]?.length ?? 0)));
  return cells
    .map(([what = '', figure = '', goal = '']) =>
      `${what.padEnd(widths[0] ?? 0)}  ${figure.padStart(widths[1] ?? 0)}  ${goal}`.trimEnd(),
    )
    .join('\n');
};

/** One line of JSON, for machines that keep the figures. */
export const jsonLine = (rows: readonly Row[]): string =>
  JSON.stringify(
    Object.fromEntries(
      rows.map(({ what, figure, unit, goal }) => [
        what,
        { figure, unit, ...(goal ? { met: goal.met } : {}) },
      ]),
    ),
  );
