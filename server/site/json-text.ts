/** Where in a text something stands, both from 1. */
export interface Place {
  readonly line: number;
  readonly column: number;
}

const placeOf = (text: string, offset: number): Place => {
  const before = text.slice(0, offset).split('\n');
  return { line: before.length, column: (before.at(-1)?.length ?? 0) + 1 };
};

/** Could more text make JSON of it? V8 names the place of most errors, and says where the text ends. */
const isBeginning = (text: string): boolean => {
  try {
    JSON.parse(text);
    return true;
  } catch (error) {
    const message = error instanceof Error ? error.message : '';
    const position = /at position (\d+)/.exec(message)?.[1];
    return position === undefined
      ? message.includes('end of JSON')
      : Number(position) >= text.length;
  }
};

/** Offset of the first character with which the text can no longer become JSON. */
const firstOffence = (text: string): number => {
  let [good, bad] = [0, text.length + 1];
  while (bad - good > 1) {
    const middle = Math.floor((good + bad) / 2);
    if (isBeginning(text.slice(0, middle))) good = middle;
    else bad = middle;
  }
  return good;
};

export type JsonText =
  { readonly ok: true; readonly value: unknown } | ({ readonly ok: false } & Place);

/** A JSON text (RFC 8259) to plain values, or where it stops being one. */
export const parseJsonText = (text: string): JsonText => {
  try {
    return { ok: true, value: JSON.parse(text) };
  } catch {
    return { ok: false, ...placeOf(text, firstOffence(text)) };
  }
};
