import { readFile } from 'node:fs/promises';
import { parseJsonText } from './json-text.ts';
import { readSite, type SiteReading } from './read.ts';

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

/** A site file: a site, or everything that is wrong with it. Rejects for nothing in the file. */
export const loadSite = async (path: string): Promise<SiteReading> => {
  const bytes = await bytesOf(path);
  if (typeof bytes === 'string') return refused(path, 'a site file', bytes);
  // Takes a byte order mark away, as editors leave one.
  const json = parseJsonText(new TextDecoder().decode(bytes));
  if (json.ok) return readSite(json.value);
  const came = `something else at line ${json.line}, column ${json.column}`;
  return refused(path, 'JSON (RFC 8259)', came);
};
