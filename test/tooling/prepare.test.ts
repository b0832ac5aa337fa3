import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { hashOf, installAdvice, isCurrent, nodeFault, setStamp } from '../../server/prepare.mjs';
import { temporaryFolder } from '../helpers/process.ts';

const project = () => {
  const root = temporaryFolder();
  mkdirSync(join(root, 'src', 'deep'), { recursive: true });
  writeFileSync(join(root, 'src', 'a.ts'), 'a');
  writeFileSync(join(root, 'src', 'deep', 'b.ts'), 'b');
  writeFileSync(join(root, 'lock.json'), '{}');
  return root;
};

describe('what has to be built again', () => {
  const hash = (root: string) => hashOf(root, ['src', 'lock.json']);

  test.each([
    ['a changed file', (root: string) => writeFileSync(join(root, 'src', 'a.ts'), 'x')],
    ['a changed file further down', (r: string) => writeFileSync(join(r, 'src/deep/b.ts'), 'x')],
    ['a new file', (root: string) => writeFileSync(join(root, 'src', 'c.ts'), '')],
    ['a file gone', (root: string) => rmSync(join(root, 'src', 'a.ts'))],
    ['a changed single file', (root: string) => writeFileSync(join(root, 'lock.json'), '{ }')],
    ['a single file gone', (root: string) => rmSync(join(root, 'lock.json'))],
  ])('%s gives another hash', (_, change) => {
    const root = project();
    const before = hash(root);
    expect(hash(root)).toBe(before);
    change(root);
    expect(hash(root)).not.toBe(before);
  });

  test('packages within sources, and what was built, do not count', () => {
    const root = project();
    const before = hash(root);
    for (const folder of ['node_modules', 'dist']) {
      mkdirSync(join(root, 'src', folder));
      writeFileSync(join(root, 'src', folder, 'x.js'), '');
    }
    expect(hash(root)).toBe(before);
  });

  test('a result is current only while it is there and its stamp fits', () => {
    const root = project();
    const [stamp, result] = [join(root, 'out', 'stamp'), join(root, 'out', 'main.js')];
    expect(isCurrent(stamp, 'h', [])).toBe(false);
    setStamp(stamp, 'h');
    expect(isCurrent(stamp, 'h', [result])).toBe(false);
    writeFileSync(result, '');
    expect(isCurrent(stamp, 'h', [result])).toBe(true);
    expect(isCurrent(stamp, 'other', [result])).toBe(false);
  });
});

describe('what to do when the start fails', () => {
  test.each([
    [
      'npm error gyp ERR! find Python',
      'apt-get install -y --no-install-recommends python3 make g++',
    ],
    ['npm error code EACCES', 'owner'],
    ['npm error code ENOTFOUND', 'network'],
    ['npm error code ENOSPC', 'disk is full'],
    ['npm error code EUSAGE', 'above'],
  ])('%s: %s', (output, advice) => {
    expect(installAdvice(output)).toContain(advice);
  });

  test('Node below 20 is named, 20 and newer are taken', () => {
    expect(nodeFault('18.20.4')).toMatch(/20 or newer .* 18\.20\.4/);
    expect(nodeFault('20.0.0')).toBeNull();
    expect(nodeFault('24.1.0')).toBeNull();
  });
});
