import * as fc from 'fast-check';
import { expect, test } from 'vitest';
import { parsePlace, placeText, WORK_PAGES } from '../../../client/state/set-up/place.ts';
import { parseRoute } from '../../../client/state/route.ts';

test('every place of the set-up has an address that leads to it', () => {
  fc.assert(
    fc.property(fc.array(fc.string({ minLength: 1 })), (path) => {
      const place = { page: 'part' as const, path };
      expect(parsePlace(placeText(place))).toEqual(place);
      expect(parseRoute(placeText(place)).page).toBe('set-up');
    }),
  );
  for (const page of WORK_PAGES) expect(parsePlace(placeText({ page }))).toEqual({ page });
});

test.each(['#/set-up', '#/set-up?open=x', '#/set-up/no-such', '', '#/set-up/part/%E0%A4%A'])(
  '%j is the overview',
  (hash) => {
    expect(parsePlace(hash)).toEqual({ page: 'overview' });
  },
);
