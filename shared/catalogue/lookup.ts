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
