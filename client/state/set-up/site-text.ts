import type { Fault } from '../../../shared/model/fault.ts';
import { isMapOf, type Json } from './tree.ts';

/** A site file's text. `siteFromText` of it is the same document, key by key in the same order. */
export const siteText = (document: Json): string => `${JSON.stringify(document, null, 2)}\n`;

export type SiteFromText =
  { readonly ok: true; readonly document: Json } | { readonly ok: false; readonly fault: Fault };

const refused = (path: string, expected: string, came: string): SiteFromText => ({
  ok: false,
  fault: { path, expected, came },
});

/** `line 3, column 7` where the engine says at which character it stopped. */
const placeOf = (text: string, message: string): string => {
  const offset = /position (\d+)/.exec(message)?.[1];
  if (offset === undefined) return 'the file';
  const before = text.slice(0, Number(offset)).split('\n');
  return `line ${before.length}, column ${(before.at(-1)?.length ?? 0) + 1}`;
};

/** The document in a text that a person chose; what it says is judged by the server. */
export const siteFromText = (whole: string): SiteFromText => {
  const text = whole.replace(/^\uFEFF/, '');
  try {
    const value = JSON.parse(text) as Json;
    return isMapOf(value)
      ? { ok: true, document: value }
      : refused('the file', 'a site file: a map { … }', text.trim().slice(0, 40));
  } catch (error) {
    if (!(error instanceof SyntaxError)) throw error;
    return refused(placeOf(text, error.message), 'JSON (RFC 8259)', error.message);
  }
};
