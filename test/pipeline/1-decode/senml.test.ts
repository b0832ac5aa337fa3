import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { readCbor, writeCbor } from '../../../server/ingest/cbor.ts';
import { readJson } from '../../../server/ingest/json.ts';
import type { InputUnit } from '../../../shared/model/site.ts';
import { epochSeconds } from '../../../shared/model/units.ts';
import { decodeSenml, encodeSenml } from '../../../shared/pipeline/1-decode/senml.ts';
import { SENML_TAGS } from '../../../shared/pipeline/1-decode/tags.ts';
import { ARRIVED, context, readings } from './readings.ts';

describe('RFC 8428 §5: resolved records', () => {
  test('base value is added to each value, base name stands before each name', () => {
    expect(
      readings([
        { bn: 'a.', bv: 20, n: 'x', v: 1 },
        { n: 'y', v: -3 },
      ]),
    ).toMatchObject({
      values: [
        ['a.x', ARRIVED, 21],
        ['a.y', ARRIVED, 17],
      ],
    });
  });

  test('§4.5.3: below 2^28 a time is relative to now, from there on it is absolute', () => {
    const at = (t: number) => readings([{ n: 'x', t, v: 0 }]);
    expect(at(-2)).toMatchObject({ values: [['x', ARRIVED - 2, 0]] });
    expect(at(2 ** 28 - 1)).toMatchObject({ values: [['x', ARRIVED + 2 ** 28 - 1, 0]] });
    // 2^28 s is in 1978: absolute, and no time for a reading of today.
    expect(at(2 ** 28)).toMatchObject({ values: [], refusals: [{ field: '[0].t' }] });
  });

  test('§6: integer labels, bytes worked out by hand', () => {
    // {bn:"b1/g1/", bt:1700000000, bu:"/", n:"e", v:0.0005}, {n:"e", t:1, v:-0.00025}
    const bytes = Buffer.from(
      '82a52166' +
        '62312f67312f' +
        '221a6553f100' +
        '23612f' +
        '006165' +
        '02fb3f40624dd2f1a9fc' +
        'a3006165' +
        '0601' +
        '02fbbf30624dd2f1a9fc',
      'hex',
    );
    expect(bytes).toHaveLength(48);
    const read = readCbor(bytes, SENML_TAGS);
    const parsed = read.ok ? read.value : null;
    // Named for another node, it is refused reading by reading; for its own, resolved.
    expect(readings(parsed, { form: 'cbor' })).toMatchObject({
      values: [],
      refusals: [{ field: '[0].n', came: '"b1/g1/e"' }, { field: '[1].n' }],
    });
    const renamed = JSON.parse(JSON.stringify(parsed).replace('b1/g1/', 'b1/g1.')) as unknown;
    expect(readings(renamed, { form: 'cbor', node: 'b1' })).toEqual({
      values: [
        ['g1.e', 1700000000, 0.0005],
        ['g1.e', 1700000001, -0.00025],
      ],
      refusals: [],
    });
  });
});

describe('what refuses a pack, and what a reading', () => {
  test.each<[string, unknown, string]>([
    ['no array', { n: 'x', v: 1 }, '(pack)'],
    ['a record that is none', [7], '[0]'],
    ['no record', [], '(pack)'],
    ['10,001 records', Array.from({ length: 10_001 }, () => ({ n: 'x', v: 1 })), '(pack)'],
    ['a higher version', [{ bver: 11, n: 'x', v: 1 }], '[0].bver'],
    ['half a version', [{ bver: 5.5, n: 'x', v: 1 }], '[0].bver'],
    [
      'two versions',
      [
        { bver: 5, n: 'x', v: 1 },
        { bver: 6, n: 'x', v: 2 },
      ],
      '[1].bver',
    ],
    [
      'a version after its default',
      [
        { n: 'x', v: 1 },
        { bver: 5, n: 'x', v: 2 },
      ],
      '[1].bver',
    ],
    ['a base name of figures', [{ bn: 5, n: 'x', v: 1 }], '[0].bn'],
    ['a label that must be understood', [{ n: 'x', v: 1, secret_: 1 }], '[0].secret_'],
    ['a base time of text', [{ bt: 'now', n: 'x', v: 1 }], '[0].bt'],
  ])('pack: %s', (_, pack, field) => {
    expect(readings(pack)).toMatchObject({ field });
  });

  test('unknown labels without underscore are passed over; base-only records are no readings', () => {
    expect(readings([{ bn: 'yard/' }, { n: 'x', v: 1, note: 'fine' }])).toMatchObject({
      values: [['x', ARRIVED, 1]],
      refusals: [],
    });
  });

  test('text, booleans, data, sums, two values, a wrong unit, another node: refused alone', () => {
    const declared = (input: string): InputUnit | null => (input === 'steel' ? 'Cel' : null);
    const pack = [
      { n: 'steel', u: 'Cel', v: 18.5 },
      { n: 'steel', u: 'K', v: 291.65 },
      { n: 'x', vs: 'open' },
      { n: 'x', vb: true },
      { n: 'x', v: 1, vd: 'AQ' },
      { n: 'x', s: 5 },
      { n: 'n1/x', v: 1 },
      { n: 'x', v: '1' },
    ];
    expect(readings(pack, { declared })).toEqual({
      values: [['steel', ARRIVED, 18.5]],
      refusals: [
        { code: 'unit', field: '[1].u', expected: 'Cel, as declared for steel', came: '"K"' },
        { code: 'value', field: '[2]', expected: 'one numeric value, v', came: 'vs' },
        { code: 'value', field: '[3]', expected: 'one numeric value, v', came: 'vb' },
        { code: 'value', field: '[4]', expected: 'one numeric value, v', came: 'v, vd' },
        { code: 'value', field: '[5]', expected: 'one numeric value, v', came: 'none' },
        {
          code: 'name',
          field: '[6].n',
          expected: expect.stringContaining('yard/'),
          came: '"n1/x"',
        },
        { code: 'type', field: '[7].v', expected: 'a number', came: '"1"' },
      ],
    });
  });
});

test('a sum beyond all doubles, a unit of figures, a time of text, a name of none: refused alone', () => {
  const pack = [
    { bv: 1e308, n: 'x', v: 1e308 },
    { bv: 0, n: 'x', u: 5, v: 1 },
    { n: 'x', t: 'now', v: 1 },
    { v: 1 },
    { n: 'good', v: 1 },
  ];
  expect(readings(pack)).toMatchObject({
    values: [['good', ARRIVED, 1]],
    refusals: [
      { field: '[0].v', came: 'Infinity' },
      { field: '[1].u', came: '5' },
      { field: '[2].t', came: '"now"' },
      { field: '[3].n', came: '""' },
    ],
  });
});

test('CBOR: decimal fractions (RFC 8428 §6), wide integers; no integer label but those of Table 4', () => {
  // [{0: "x", 2: 4([-2, 27315]), 6: 1700000000 in eight bytes}], bytes worked out by hand.
  const read = readCbor(
    Buffer.from('81a3006178 02c48221196ab3 061b000000006553f100'.replace(/ /g, ''), 'hex'),
    SENML_TAGS,
  );
  expect(readings(read.ok ? read.value : null, { form: 'cbor' })).toEqual({
    values: [['x', 1_700_000_000, 273.15]],
    refusals: [],
  });
  expect(readings([{ 0: 'x', 2: 1, 9: 'link' }], { form: 'cbor' })).toMatchObject({
    field: '[0].9',
    expected: 'an integer label of RFC 8428',
  });
});

test('written in CBOR: integer labels in a map of stated length, bytes worked out by hand', () => {
  const one = { name: 'e', unit: '/', time: epochSeconds(1_700_000_000), value: 0.0005 } as const;
  expect(Buffer.from(writeCbor(encodeSenml([one], 'cbor'))).toString('hex')).toBe(
    '81a4' + '006165' + '01612f' + '061a6553f100' + '02fb3f40624dd2f1a9fc',
  );
});

test('the same reading is the same frame whenever it comes; two inputs of one moment are two', () => {
  const decode = (pack: unknown) => decodeSenml(pack, context());
  const pack = [
    { n: 'a', t: 1.7e9, v: 1 },
    { n: 'b', t: 1.7e9, v: 2 },
  ];
  const [first, second] = [decode(pack), decode(pack)];
  expect(first).toEqual(second);
  const keys = first.ok ? first.value.frames.map(({ boot, seq }) => `${boot} ${seq}`) : [];
  expect(keys).toEqual(['senml/a 1700000000000000', 'senml/b 1700000000000000']);
});

test('written and read in both forms, the figures are the same doubles (RFC 8428 §6)', () => {
  const reading = fc.record({
    name: fc.stringMatching(/^[a-z]{1,8}$/),
    unit: fc.constantFrom<InputUnit>('/', 'V', 'Cel', 'N', 'm'),
    time: fc.integer({ min: 1e9, max: 2e9 }).map(epochSeconds),
    value: fc.double({ noNaN: true, noDefaultInfinity: true }).map((v) => v + 0),
  });
  fc.assert(
    fc.property(reading, (one) => {
      const json = readJson(Buffer.from(JSON.stringify(encodeSenml([one], 'json'))));
      const cbor = readCbor(writeCbor(encodeSenml([one], 'cbor')), SENML_TAGS);
      const expected = { values: [[one.name, one.time, one.value]], refusals: [] };
      expect(readings(json.ok ? json.value : null)).toEqual(expected);
      expect(readings(cbor.ok ? cbor.value : null, { form: 'cbor' })).toEqual(expected);
    }),
  );
});

test('any JSON at all gives readings or reasons, never a throw', () => {
  fc.assert(
    fc.property(fc.jsonValue({ maxDepth: 3 }), (value) => {
      expect(decodeSenml(value, context()).ok).toBeTypeOf('boolean');
      expect(decodeSenml([value], context({ form: 'cbor' })).ok).toBeTypeOf('boolean');
    }),
    { numRuns: 3000 },
  );
});
