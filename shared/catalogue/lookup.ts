/** A named thing that a catalogue may not have. */
export type Found<T> =
  { readonly ok: true; readonly value: T } | { readonly ok: false; readonly expected: string };

export const found = <T>(value: T): Found<T> => ({ ok: true, value });
export const absent = (expected: string): { readonly ok: false; readonly expected: string } => ({
  ok: false,
  expected,
});

/** Names compare without blanks and case, and with × for x. */
export const plainName = (name: string): string =>
  name.replace(/\s+/g, '').replace(/×/g, 'x').toUpperCase();

const NEAR = 8;

const lettersOf = (name: string): string => /^[A-Z]*/.exec(plainName(name))?.[0] ?? '';
const figureOf = (name: string): number => Number(/\d+(\.\d+)?/.exec(name)?.[0] ?? NaN);

/** Names that a mistyped one may mean: of the same letters, the nearest figure first; else all. */
export const nearNames = (name: string, names: readonly string[]): string => {
  const distance = (other: string) => Math.abs(figureOf(other) - figureOf(name)) || 0;
  const kin = names
    .filter((other) => lettersOf(other) === lettersOf(name))
    .sort((a, b) => distance(a) - distance(b));
  return (kin.length > 0 ? kin.slice(0, NEAR) : names).join(', ');
};
