/** What differs between two set-ups, by names instead of places, so that it can be carried over. */
import { isList, isMapOf, isSame, textAt, type Json, type JsonMap, type Path } from './tree.ts';

/** Parts of a path: a key, or `=` and the name of an element in a list. */
export interface Difference {
  readonly path: Path;
  readonly kind: 'added' | 'removed' | 'changed';
  readonly before?: Json | undefined;
  readonly after?: Json | undefined;
}

/** What an element of a list is told by: its id, name or level. */
export const nameOf = (element: Json | undefined): string | null =>
  textAt(element, 'id') ?? textAt(element, 'name') ?? textAt(element, 'level');

/** Elements by name, where each has one of its own; else the list is one value. */
const namedOf = (value: Json | undefined): ReadonlyMap<string, JsonMap> | null => {
  if (!isList(value)) return null;
  const named = new Map<string, JsonMap>();
  for (const element of value) {
    const name = nameOf(element);
    if (name === null || named.has(name) || !isMapOf(element)) return null;
    named.set(name, element);
  }
  return named;
};

const inOrder = (a: ReadonlyMap<string, Json>, b: ReadonlyMap<string, Json>): boolean =>
  isSame(
    [...a.keys()].filter((name) => b.has(name)),
    [...b.keys()].filter((name) => a.has(name)),
  );

const one = (path: Path, before: Json | undefined, after: Json | undefined): Difference => {
  const kind = before === undefined ? 'added' : after === undefined ? 'removed' : 'changed';
  return { path, kind, before, after };
};

/** Ascending in the order of what stood before, then what is new. */
export const differences = (
  before: Json | undefined,
  after: Json | undefined,
  path: Path = [],
): Difference[] => {
  if (isSame(before, after)) return [];
  const [listBefore, listAfter] = [namedOf(before), namedOf(after)];
  if (listBefore && listAfter && inOrder(listBefore, listAfter)) {
    const names = new Set([...listBefore.keys(), ...listAfter.keys()]);
    return [...names].flatMap((name) =>
      differences(listBefore.get(name), listAfter.get(name), [...path, `=${name}`]),
    );
  }
  if (isMapOf(before) && isMapOf(after)) {
    const keys = new Set([...Object.keys(before), ...Object.keys(after)]);
    return [...keys].flatMap((key) => differences(before[key], after[key], [...path, key]));
  }
  return [one(path, before, after)];
};

/** A copy with one difference's `after` in it; an element that is new goes to the end of its list. */
const carried = (root: Json | undefined, path: Path, after: Json | undefined): Json | undefined => {
  const [part, ...rest] = path;
  if (part === undefined) return after;
  if (part.startsWith('=')) {
    const list = isList(root) ? root : [];
    const place = list.findIndex((element) => nameOf(element) === part.slice(1));
    const next = carried(list[place], rest, after);
    if (place < 0) return next === undefined ? list : [...list, next];
    return list.flatMap((element, i) =>
      i !== place ? [element] : next === undefined ? [] : [next],
    );
  }
  const map = isMapOf(root) ? root : {};
  const next = carried(map[part], rest, after);
  return Object.fromEntries(
    Object.entries({ ...map, [part]: next }).filter(([, value]) => value !== undefined),
  );
};

/**
 * `to` with these differences carried over. `carriedOver(a, differences(a, b))` is b, but for where
 * in a list what is new stands.
 */
export const carriedOver = (to: Json, changes: readonly Difference[]): Json =>
  changes.reduce<Json>((root, { path, after }) => carried(root, path, after) ?? null, to);

const meets = (a: Path, b: Path): boolean => {
  const [short, long] = a.length < b.length ? [a, b] : [b, a];
  return short.every((part, i) => part === long[i]);
};

/** Which of `mine` touch what `theirs` touch, with another outcome. */
export const clashes = (
  mine: readonly Difference[],
  theirs: readonly Difference[],
): readonly Difference[] =>
  mine.filter((own) =>
    theirs.some(
      (other) =>
        meets(own.path, other.path) &&
        !(own.path.length === other.path.length && isSame(own.after, other.after)),
    ),
  );

const OF_ITSELF = ['id', 'corrects', 'valid_from', 'author', 'reason', 'recorded_at'];

/** What a record says otherwise than the one among `records` that it corrects. */
export const correctedBy = (record: Json | undefined, records: readonly Json[]): Difference[] => {
  const corrects = textAt(record, 'corrects');
  const other = records.find((one) => textAt(one, 'id') === corrects);
  return corrects === null || other === undefined
    ? []
    : differences(other, record).filter(({ path: [key = ''] }) => !OF_ITSELF.includes(key));
};
