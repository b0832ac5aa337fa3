const NS = 1_000_000_000;

/** A time in whole nanoseconds, rounded down: `second` + `ns` · 10⁻⁹ s since 1970. */
export interface Nanos {
  readonly second: number;
  readonly ns: number;
}

/** Rounding down keeps a sample on its side of every border that is whole in ns. */
export const nanosOf = (t: number): Nanos => {
  const second = Math.floor(t);
  return { second, ns: Math.min(NS - 1, Math.floor((t - second) * NS)) };
};

/** The whole nanoseconds since 1970 as digits: more than a double holds. */
export const nanosText = (t: number): string => {
  const { second, ns } = nanosOf(t);
  return second > 0
    ? `${second}${String(ns).padStart(9, '0')}`
    : String(BigInt(second) * BigInt(NS) + BigInt(ns));
};

/** Reads `2027-01-15T08:00:00.000000001Z`, as the database writes times; digits after the point may lack. */
export const readTime = (text: string): Nanos => {
  const second = Date.parse(`${text.slice(0, 19)}Z`) / 1e3;
  const digits = text.length > 20 ? text.slice(20, -1) : '';
  return { second, ns: Number(digits.padEnd(9, '0')) };
};

export const toSeconds = ({ second, ns }: Nanos): number => second + ns / NS;

export const isBefore = (a: Nanos, b: Nanos): boolean =>
  a.second < b.second || (a.second === b.second && a.ns < b.ns);
