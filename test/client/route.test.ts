import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  HOME,
  MOST_CHOSEN,
  PAGES,
  parseRoute,
  routeText,
  SPANS,
  toggleChosen,
} from '../../client/state/route.ts';

describe('the address', () => {
  test.each(['', '#', '#/', '#/watch', '#/no-such-page', '#main', '#/watch?span=7'])(
    '%j leads to Watch',
    (hash) => {
      expect(parseRoute(hash)).toEqual(HOME);
    },
  );

  test('holds page, chosen channels, length and what is open', () => {
    const route = parseRoute('#/alarms?channel=a&channel=b%20c&channel=a&span=600&open=x');
    expect(route).toEqual({
      page: 'alarms',
      chosen: ['a', 'b c'],
      span: 600,
      structure: null,
      open: 'x',
    });
  });

  test('of any place leads back to it', () => {
    const name = fc.string({ minLength: 1 });
    const place = fc.record({
      page: fc.constantFrom(...PAGES),
      chosen: fc.uniqueArray(name, { maxLength: MOST_CHOSEN }),
      span: fc.constantFrom(...SPANS),
      structure: fc.option(name),
      open: fc.option(name),
    });
    fc.assert(
      fc.property(place, (route) => {
        expect(parseRoute(routeText(route))).toEqual(route);
      }),
    );
  });

  test('with too many channels keeps as many as the trend holds', () => {
    const many = Array.from({ length: 20 }, (_, i) => `channel=c${i}`).join('&');
    expect(parseRoute(`#/watch?${many}`).chosen).toHaveLength(MOST_CHOSEN);
  });
});

describe('choosing channels', () => {
  test('adds, takes out, and lets the first make way for the seventh', () => {
    const six = ['a', 'b', 'c', 'd', 'e', 'f'];
    expect(toggleChosen(['a'], 'b')).toEqual(['a', 'b']);
    expect(toggleChosen(['a', 'b'], 'a')).toEqual(['b']);
    expect(toggleChosen(six, 'g')).toEqual(['b', 'c', 'd', 'e', 'f', 'g']);
  });
});
