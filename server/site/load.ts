import { readFile } from 'node:fs/promises';
import type { Fault } from '../../shared/model/fault.ts';
import { parseJsonText } from './json-text.ts';
import type { SiteReading } from '../ports.ts';
import { readSite } from './read.ts';

const WHY_NOT: Readonly<Record<string, string>> = {
  ENOENT: 'no such file',
  EISDIR: 'a folder',
  EACCES: 'a file that this user may not read',
};

const refused = (path: string, expected: string, came: string): SiteReading => ({
  ok: false,
  faults: [{ path, expected, came }],
});

/** The bytes of a file, or why there are none. */
const bytesOf = async (path: string): Promise<Buffer | string> => {
  try {
    return await readFile(path);
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? String(error.code) : 'unknown error';
    return WHY_NOT[code] ?? code;
  }
};

/** The text of a site file to a site, or to everything that is wrong with it; `path` says where it came from. */
export const readSiteText = (text: string, path = ''): SiteReading => {
  const json = parseJsonText(text);
  if (json.ok) return readSite(json.value);
  const came = `something else at line ${json.line}, column ${json.column}`;
  return refused(path, 'JSON (RFC 8259)', came);
};

export type SiteText =
  | { readonly ok: true; readonly text: string }
  | { readonly ok: false; readonly faults: readonly Fault[] };

/** What a site file holds, or why it cannot be read. */
export const loadSiteText = async (path: string): Promise<SiteText> => {
  const bytes = await bytesOf(path);
  if (typeof bytes === 'string') {
    return { ok: false, faults: [{ path, expected: 'a site file', came: bytes }] };
  }
  // Takes a byte order mark away, as editors leave one.
  return { ok: true, text: new TextDecoder().decode(bytes) };
};

/** A site file: a site, or everything that is wrong with it. Rejects for nothing in the file. */
export const loadSite = async (path: string): Promise<SiteReading> => {
  const loaded = await loadSiteText(path);
  return loaded.ok ? readSiteText(loaded.text, path) : loaded;
};
