import * as fc from 'fast-check';
import { expect, test } from 'vitest';
import {
  carriedOver,
  clashes,
  correctedBy,
  differences,
  nameOf,
} from '../../../client/state/set-up/difference.ts';
import { isList, isMapOf, type Json } from '../../../client/state/set-up/tree.ts';

const SITE = {
  name: 'Yard',
  nodes: [{ id: 'n1', inputs: [{ name: 's1', unit: '/' }] }],
  structures: [
    {
      id: 'lift',
      members: [
        { id: 'B1', from_m: [0, 0, 0] },
        { id: 'B2', from_m: [1, 0, 0] },
      ],
    },
  ],
} satisfies Json;

test('a difference is told by names, not by places', () => {
  const [lift] = SITE.structures;
  const after: Json = {
    ...SITE,
    structures: [{ ...lift, members: [{ id: 'B2', from_m: [2, 0, 0] }, { id: 'B3' }] }],
  };
  expect(differences(SITE, after)).toEqual([
    {
      ...{ path: ['structures', '=lift', 'members', '=B1'], kind: 'removed' },
      ...{ before: { id: 'B1', from_m: [0, 0, 0] }, after: undefined },
    },
    {
      ...{ path: ['structures', '=lift', 'members', '=B2', 'from_m'], kind: 'changed' },
      ...{ before: [1, 0, 0], after: [2, 0, 0] },
    },
    {
      ...{ path: ['structures', '=lift', 'members', '=B3'], kind: 'added' },
      ...{ before: undefined, after: { id: 'B3' } },
    },
  ]);
});

test('what two people changed apart from each other is carried into one', () => {
  const mine = differences(SITE, { ...SITE, name: 'Boatyard' });
  const theirs: Json = { ...SITE, nodes: [...SITE.nodes, { id: 'n2', inputs: [] }] };
  expect(clashes(mine, differences(SITE, theirs))).toEqual([]);
  expect(carriedOver(theirs, mine)).toEqual({ ...theirs, name: 'Boatyard' });
});

test('the same place changed by both clashes, unless to the same', () => {
  const mine = differences(SITE, { ...SITE, name: 'A' });
  expect(clashes(mine, differences(SITE, { ...SITE, name: 'B' }))).toEqual(mine);
  expect(clashes(mine, differences(SITE, { ...SITE, name: 'A' }))).toEqual([]);
});

test('what one changed inside clashes with the other having taken it away', () => {
  const mine = differences(SITE, { ...SITE, nodes: [{ id: 'n1', inputs: [] }] });
  const theirs = differences(SITE, { ...SITE, nodes: [] });
  expect(clashes(mine, theirs)).toHaveLength(1);
});

test('a correction is told by what it says otherwise', () => {
  const wrong = { id: 'r1', author: 'A', response: { gauge_factor: 21.1, poisson: 0.3 } };
  const right = {
    ...{ id: 'r2', corrects: 'r1', author: 'B', response: { gauge_factor: 2.11, poisson: 0.3 } },
  };
  expect(
    correctedBy(right, [wrong]).map(({ path, before, after }) => [path, before, after]),
  ).toEqual([[['response', 'gauge_factor'], 21.1, 2.11]]);
  expect(correctedBy(wrong, [right])).toEqual([]);
});

const leaf = fc.oneof(fc.integer(), fc.string({ maxLength: 3 }), fc.boolean());
const named = (inside: fc.Arbitrary<Json>) =>
  fc
    .uniqueArray(fc.constantFrom('a', 'b', 'c', 'd'), { maxLength: 4 })
    .chain((ids) => fc.tuple(...ids.map((id) => inside.map((x) => ({ id, x })))));
const document = fc.record({
  name: leaf,
  list: fc.array(leaf, { maxLength: 3 }),
  parts: named(fc.record({ value: leaf, parts: named(leaf) })),
});

/** New elements go to the end of their list: told apart from b by no more than that. */
const sorted = (value: Json | undefined): Json | undefined => {
  if (isList(value)) {
    return value
      .map((element) => sorted(element) ?? null)
      .sort((a, b) => (nameOf(a) ?? '').localeCompare(nameOf(b) ?? ''));
  }
  return isMapOf(value)
    ? Object.fromEntries(Object.entries(value).map(([key, inner]) => [key, sorted(inner)]))
    : value;
};

test('differences from a to b, carried over to a, make b', () => {
  fc.assert(
    fc.property(document, document, (a, b) => {
      expect(sorted(carriedOver(a, differences(a, b)))).toEqual(sorted(b));
      expect(differences(a, a)).toEqual([]);
    }),
  );
});
