import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import {
  blankOf,
  fieldsOf,
  ofKind,
  schemaAt,
  type Schema,
} from '../../../client/state/set-up/shape.ts';
import { isList, isMapOf, type Json, type Path } from '../../../client/state/set-up/tree.ts';
import { readSite } from '../../../server/site/read.ts';

const DEMO = JSON.parse(
  readFileSync(new URL('../../../server/demo/site.json', import.meta.url), 'utf8'),
) as Json;

const schemaOf = (pointer: string): Schema => {
  const found = schemaAt(DEMO, pointer.split('/').slice(1));
  if (!found) throw new Error(`no schema at ${pointer}`);
  return found;
};

const CHANNEL = '/structures/0/members/0/stations/0/channels/0';

/** Every key of a document with its place. */
const keysIn = (value: Json | undefined, path: Path = []): Path[] => {
  const below = isList(value)
    ? value.map((inner, i) => [String(i), inner] as const)
    : isMapOf(value)
      ? Object.entries(value)
      : [];
  return below.flatMap(([key, inner]) => [[...path, key], ...keysIn(inner, [...path, key])]);
};

test('every place of the demo’s site file has a form', () => {
  const places = keysIn(DEMO).filter((path) => !path.includes('names'));
  expect(places.length).toBeGreaterThan(1000);
  const without = places.filter((path) => schemaAt(DEMO, path) === null);
  expect(without.map((path) => path.join('/'))).toEqual([]);
});

test('fields follow the kind', () => {
  const keys = (kind: string) =>
    fieldsOf(schemaOf(`${CHANNEL}/calibration/0/response/leads`), { kind }).map(({ key }) => key);
  expect(keys('none')).toEqual(['kind']);
  expect(keys('two-wire')).toEqual(['kind', 'resistance_ohm', 'trimmed']);
  expect(keys('excitation')).toEqual(['kind', 'resistance_ohm']);
});

describe('another kind', () => {
  test('keeps what it has a field for, drops what it has none for, begins what it needs', () => {
    const schema = schemaOf(`${CHANNEL}/calibration/0/response/leads`);
    const two = { kind: 'two-wire', resistance_ohm: 0.7, trimmed: true };
    expect(ofKind(schema, two, 'three-wire')).toEqual({ kind: 'three-wire', resistance_ohm: 0.7 });
    expect(ofKind(schema, { kind: 'none' }, 'two-wire')).toEqual({
      kind: 'two-wire',
      trimmed: false,
    });
  });
});

test('a new channel begins with its choices, and the server says what is missing', () => {
  const begun = blankOf(schemaOf(CHANNEL));
  expect(begun).toMatchObject({
    measurand: 'strain',
    calibration: [{ signal: { kind: 'ratio' } }],
  });
  const site = structuredClone(DEMO) as unknown as {
    structures: { members: { stations: { channels: unknown[] }[] }[] }[];
  };
  site.structures[0]?.members[0]?.stations[0]?.channels.push(begun);
  const read = readSite(site);
  const paths = read.ok ? [] : read.faults.map(({ path }) => path);
  const at = '/structures/0/members/0/stations/0/channels/3';
  for (const key of ['id', 'name', 'node', 'input', 'calibration/0/response/gauge_factor']) {
    expect(paths).toContain(`${at}/${key}`);
  }
  expect(paths.every((path) => path.startsWith(at))).toBe(true);
});
