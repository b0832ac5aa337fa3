import fc from 'fast-check';
import { expect, test } from 'vitest';
import { contains, highest, include, missing, type Ranges } from '../../shared/series/ranges.ts';

/** Independent of the ranges: a plain JavaScript Set. */
const numbers = fc.array(fc.integer({ min: 0, max: 60 }), { maxLength: 80 });

test('ranges hold just what a plain set holds, in any order of arrival', () => {
  fc.assert(
    fc.property(numbers, (list) => {
      const ranges = list.reduce<Ranges>(include, []);
      const set = new Set(list);
      for (let n = -1; n <= 61; n++) expect(contains(ranges, n)).toBe(set.has(n));
      for (let i = 1; i < ranges.length; i++) {
        expect(ranges[i]?.[0]).toBeGreaterThan((ranges[i - 1]?.[1] ?? 0) + 1);
      }
      const [low, high] = [Math.min(...set), Math.max(...set)];
      expect(highest(ranges)).toBe(set.size === 0 ? -1 : high);
      expect(missing(ranges)).toBe(set.size === 0 ? 0 : high - low + 1 - set.size);
    }),
  );
});
