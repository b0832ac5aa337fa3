/** Comma-separated values, RFC 4180. */

export interface CsvRow {
  /** Of the text on which the row begins, from 1. */
  readonly line: number;
  readonly fields: readonly string[];
}

export type CsvText =
  | { readonly ok: true; readonly rows: readonly CsvRow[] }
  | { readonly ok: false; readonly line: number; readonly expected: string };

const quoted = (field: string): string =>
  /[",\r\n]/.test(field) ? `"${field.replaceAll('"', '""')}"` : field;

/** Rows of fields to a text; lines end in CRLF. */
export const csvText = (rows: readonly (readonly string[])[]): string =>
  rows.map((fields) => `${fields.map(quoted).join(',')}\r\n`).join('');

/** A field and what ends it: a comma, the end of a line, or of the text. */
const FIELD = /(?:"((?:[^"]|"")*)"|([^",\r\n]*))(,|\r\n|\n|\r|$)/y;

const breaksIn = (text: string): number => text.match(/\r\n|\n|\r/g)?.length ?? 0;

/**
 * A text to its rows, empty lines left out. Also reads what editors make of it: a byte order mark,
 * lines that end in LF or CR.
 */
export const parseCsv = (whole: string): CsvText => {
  const text = whole.replace(/^\uFEFF/, '');
  const rows: CsvRow[] = [];
  let [line, begun, at] = [1, 1, 0];
  let fields: string[] = [];
  while (at < text.length || fields.length > 0) {
    FIELD.lastIndex = at;
    const match = FIELD.exec(text);
    if (!match) {
      const expected = 'quotes closed before a comma or the end of the line, and doubled inside';
      return { ok: false, line, expected };
    }
    const [found, inQuotes, bare = '', end] = match;
    fields.push(inQuotes?.replaceAll('""', '"') ?? bare);
    at += found.length;
    line += breaksIn(found);
    if (end === ',') continue;
    if (fields.length > 1 || inQuotes !== undefined || bare !== '')
      rows.push({ line: begun, fields });
    [fields, begun] = [[], line];
  }
  return { ok: true, rows };
};
