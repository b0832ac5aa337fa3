import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, onTestFinished, test } from 'vitest';
import { parseJsonText } from '../../server/site/json-text.ts';
import { loadSite } from '../../server/site/load.ts';
import { demo, demoFile } from './edit.ts';

const fileWith = async (text: string): Promise<string> => {
  const folder = await mkdtemp(join(tmpdir(), 'yieldward-site-'));
  onTestFinished(() => rm(folder, { recursive: true }));
  const file = join(folder, 'site.json');
  await writeFile(file, text);
  return file;
};

describe('a site file', () => {
  test('is loaded, with or without the byte order mark that some editors leave', async () => {
    expect((await loadSite(fileURLToPath(demoFile))).ok).toBe(true);
    expect((await loadSite(await fileWith(`\uFEFF${JSON.stringify(demo)}`))).ok).toBe(true);
  });

  test('that is not there, or is a folder, is said to be so', async () => {
    const file = await fileWith('');
    const missing = `${file}.bak`;
    expect(await loadSite(missing)).toEqual({
      ok: false,
      faults: [{ path: missing, expected: 'a site file', came: 'no such file' }],
    });
    const folder = join(file, '..');
    expect(await loadSite(folder)).toEqual({
      ok: false,
      faults: [{ path: folder, expected: 'a site file', came: 'a folder' }],
    });
  });

  test('that is not JSON is refused with the line and column', async () => {
    const file = await fileWith('{\n  "format": 1,\n  "id": saltmarsh\n}\n');
    expect(await loadSite(file)).toEqual({
      ok: false,
      faults: [
        { path: file, expected: 'JSON (RFC 8259)', came: 'something else at line 3, column 9' },
      ],
    });
  });

  test('with faults lists them', async () => {
    const read = await loadSite(await fileWith('{"format": 2}'));
    const paths = read.ok ? [] : read.faults.map(({ path }) => path);
    expect(paths).toContain('/format');
    expect(paths).toContain('/structures');
  });
});

describe('a text that is no JSON stops being it at', () => {
  test.each([
    ['', 1, 1],
    ['{"a": 1,}', 1, 9],
    ['{"a": 1 "b": 2}', 1, 9],
    ['{"a": tru }', 1, 10],
    ['{\n"a": [1,\n2,]\n}', 3, 3],
    ['{"a": 1}\n\n  x', 3, 3],
    ['{"a": "never closed', 1, 20],
    ['{"a": "broken\nline"}', 1, 14],
    ['// a remark\n{}', 1, 1],
    ["{'a': 1}", 1, 2],
    ['{"a": 01}', 1, 8],
    ['{"a": 1', 1, 8],
  ])('%j: line %d, column %d', (text, line, column) => {
    expect(parseJsonText(text)).toEqual({ ok: false, line, column });
  });
});
