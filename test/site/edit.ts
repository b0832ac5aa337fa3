import { readFileSync } from 'node:fs';

export const demoFile = new URL('../../server/demo/site.json', import.meta.url);
export const demo: unknown = JSON.parse(readFileSync(demoFile, 'utf8'));

type Json = Record<string, unknown>;

const isObject = (value: unknown): value is Json => typeof value === 'object' && value !== null;

/** A copy of the demo file, some of its places changed; undefined takes the field away. */
export const demoWith = (changes: Readonly<Record<string, unknown>>): unknown => {
  const copy: unknown = structuredClone(demo);
  for (const [pointer, value] of Object.entries(changes)) {
    const keys = pointer.split('/').slice(1);
    const last = keys.pop() ?? '';
    let place = copy;
    for (const key of keys) place = isObject(place) ? place[key] : undefined;
    if (!isObject(place)) throw new Error(`the demo has no ${pointer}`);
    if (value === undefined) delete place[last];
    else place[last] = value;
  }
  return copy;
};

/** Pointers of every field and element of a value. */
export const pointersIn = (value: unknown, at = ''): string[] =>
  isObject(value)
    ? Object.entries(value).flatMap(([key, child]) => {
        const pointer = `${at}/${key}`;
        return [pointer, ...pointersIn(child, pointer)];
      })
    : [];

const at = (value: unknown, pointer: string): unknown =>
  pointer
    .split('/')
    .slice(1)
    .reduce((v: unknown, key) => (isObject(v) ? v[key] : undefined), value);

/** Pointer of the member, station or channel of this id in the demo file. */
export const placeOf = (id: string): string => {
  const found = pointersIn(demo)
    .filter((p) => /\/(members|stations|channels)\/\d+$/.test(p))
    .find((p) => at(demo, `${p}/id`) === id);
  if (found === undefined) throw new Error(`the demo has no ${id}`);
  return found;
};

export const inDemo = (pointer: string): unknown => at(demo, pointer);
