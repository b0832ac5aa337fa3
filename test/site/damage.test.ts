import fc from 'fast-check';
import { expect, test } from 'vitest';
import { readSite } from '../../server/site/read.ts';
import { demo, demoWith, inDemo, pointersIn } from './edit.ts';

/** What a file may leave out. */
const OPTIONAL =
  /^\/\$schema$|^\/default_limits$|\/(range|safe_working_load_kN|load_channel|limits|virtual|thickness_mm|poisson)$/;
/** One of two: its lack is a fault of what holds it. */
const EITHER = /^(.*\/excitation)\/(stated_V|measured_by_input)$/;

const pointers = pointersIn(demo);
const fields = pointers.filter((pointer) => !/\/\d+$/.test(pointer));

const pathsOf = (json: unknown): string[] => {
  const read = readSite(json);
  return read.ok ? [] : read.faults.map(({ path }) => path);
};

test('without any one field that it needs, the demo is refused, and the fault names the field', () => {
  const needed = fields.filter((pointer) => !OPTIONAL.test(pointer));
  expect(needed.length).toBeGreaterThan(500);
  for (const pointer of needed) {
    const path = EITHER.exec(pointer)?.[1] ?? pointer;
    expect(pathsOf(demoWith({ [pointer]: undefined })), pointer).toContain(path);
  }
});

test('without a field that it may leave out, the demo stands', () => {
  const optional = fields.filter((pointer) => OPTIONAL.test(pointer));
  expect(optional.length).toBeGreaterThan(30);
  for (const pointer of optional) expect(pathsOf(demoWith({ [pointer]: undefined }))).toEqual([]);
});

test('a field that is not known is a fault of its place, wherever it stands', () => {
  const objects = ['', ...pointers].filter((pointer) => {
    const value = inDemo(pointer);
    return typeof value === 'object' && value !== null && !Array.isArray(value);
  });
  fc.assert(
    fc.property(fc.constantFrom(...objects), (pointer) => {
      // RFC 6901 §3: ~ is written ~0.
      const paths = pathsOf(demoWith({ [`${pointer}/gauge~factor`]: 2 }));
      expect(paths).toContain(`${pointer}/gauge~0factor`);
    }),
    { numRuns: 100 },
  );
});

const anything = fc.oneof(
  fc.jsonValue(),
  fc.constantFrom('', 'n1', 'n2', 's1', 'B1', 'S355', -1, 0, 1e9, 1e308, [], {}, [[]], null),
);

test('whatever stands at whatever places, reading ends in a site or in faults, never in a throw', () => {
  const changes = fc.array(fc.tuple(fc.constantFrom(...pointers), anything), {
    minLength: 1,
    maxLength: 4,
  });
  fc.assert(
    fc.property(changes, (list) => {
      // A later change may fall into what an earlier one put there.
      const apart = list.filter(
        ([p], i) => !list.slice(0, i).some(([q]) => p.startsWith(q) || q.startsWith(p)),
      );
      const read = readSite(demoWith(Object.fromEntries(apart)));
      if (read.ok) return;
      expect(read.faults.length).toBeGreaterThan(0);
      for (const { path, expected, came } of read.faults) {
        expect(path === '' || path.startsWith('/'), path).toBe(true);
        expect(expected, path).not.toBe('');
        expect(came, path).not.toBe('');
      }
    }),
    { numRuns: 300 },
  );
});

test('what is no site file at all is refused', () => {
  fc.assert(
    fc.property(fc.jsonValue(), (json) => {
      expect(readSite(json).ok).toBe(false);
    }),
  );
  for (const json of [undefined, NaN, Symbol('x'), () => 1]) expect(readSite(json).ok).toBe(false);
});
