/** A JSON document as plain values, and change by copy: what is not touched stays the same object. */
export type Json =
  null | boolean | number | string | readonly Json[] | { readonly [key: string]: Json | undefined };
export type JsonMap = { readonly [key: string]: Json | undefined };

/** Keys and places from the root; lists are counted from 0. */
export type Path = readonly string[];

export const isList = (value: unknown): value is readonly Json[] => Array.isArray(value);

export const isMapOf = (value: Json | undefined): value is JsonMap =>
  typeof value === 'object' && value !== null && !isList(value);

/** RFC 6901. */
export const pathOf = (pointer: string): Path =>
  pointer
    .split('/')
    .slice(1)
    .map((part) => part.replaceAll('~1', '/').replaceAll('~0', '~'));

/** RFC 6901; the root is ''. */
export const pointerOf = (path: Path): string =>
  path.map((part) => `/${part.replaceAll('~', '~0').replaceAll('/', '~1')}`).join('');

const child = (value: Json | undefined, key: string): Json | undefined => {
  if (isList(value)) return /^\d+$/.test(key) ? value[Number(key)] : undefined;
  return isMapOf(value) && Object.hasOwn(value, key) ? value[key] : undefined;
};

/** What stands at a place; undefined: nothing. */
export const valueAt = (root: Json | undefined, path: Path): Json | undefined =>
  path.reduce(child, root);

export const listAt = (root: Json | undefined, ...path: string[]): readonly Json[] => {
  const value = valueAt(root, path);
  return isList(value) ? value : [];
};

export const textAt = (root: Json | undefined, ...path: string[]): string | null => {
  const value = valueAt(root, path);
  return typeof value === 'string' ? value : null;
};

export const numberAt = (root: Json | undefined, ...path: string[]): number | null => {
  const value = valueAt(root, path);
  return typeof value === 'number' ? value : null;
};

/**
 * A copy with `value` at the place; undefined takes away what is there, and closes the gap in a
 * list. Maps that are missing on the way are made; a list takes one element more at its end.
 */
export const withValue = (root: Json, path: Path, value: Json | undefined): Json => {
  const [key, ...rest] = path;
  if (key === undefined) return value ?? null;
  const below = child(root, key);
  const next = rest.length === 0 ? value : withValue(below ?? {}, rest, value);
  if (isList(root)) {
    const place = Number(key);
    return next === undefined
      ? root.filter((_, i) => i !== place)
      : [...root.slice(0, place), next, ...root.slice(place + 1)];
  }
  const map = isMapOf(root) ? root : {};
  if (next !== undefined) return { ...map, [key]: next };
  return Object.fromEntries(Object.entries(map).filter(([name]) => name !== key));
};

/** Same values, whatever the order of the keys. */
export const isSame = (a: Json | undefined, b: Json | undefined): boolean => {
  if (a === b) return true;
  if (isList(a)) {
    return isList(b) && a.length === b.length && a.every((value, i) => isSame(value, b[i]));
  }
  if (!isMapOf(a) || !isMapOf(b)) return false;
  const keys = new Set([...Object.keys(a), ...Object.keys(b)]);
  return [...keys].every((key) => isSame(a[key], b[key]));
};
