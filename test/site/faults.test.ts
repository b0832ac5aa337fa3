import { describe, expect, test } from 'vitest';
import { readSite } from '../../server/site/read.ts';
import type { Fault } from '../../shared/model/fault.ts';
import { demo, demoWith, inDemo, placeOf } from './edit.ts';

const faultsOf = (json: unknown): readonly Fault[] => {
  const read = readSite(json);
  return read.ok ? [] : read.faults;
};

/** The one fault of the demo with one thing changed. */
const faultOf = (changes: Readonly<Record<string, unknown>>): Fault => {
  const faults = faultsOf(demoWith(changes));
  expect(faults).toHaveLength(1);
  return faults[0] ?? { path: '', expected: '', came: '' };
};

const TIP = placeOf('B1-mid-top-left');
const BENDING = placeOf('B1-third1-bending');
const SHEAR = placeOf('B2-end-web-shear');
const HOOK = placeOf('hook-load');
const SAG = placeOf('B1-mid-deflection');
const STEEL = placeOf('steel');
const TIE = placeOf('T1-mid-axial');
const record = (channel: string) => `${channel}/calibration/0`;

test('the demo itself has none', () => expect(faultsOf(demo)).toEqual([]));

test('ten faults come as ten, each with its place, of the schema and beyond it at once', () => {
  const faults = faultsOf(
    demoWith({
      '/simulated': 'yes',
      '/nodes/1/id': 'n1',
      [`${placeOf('B1')}/section`]: 'HE 301 B',
      [`${placeOf('L1')}/material`]: 'S276',
      [`${placeOf('T1-mid')}/at_m`]: 4.5,
      [`${record(BENDING)}/response/gauge_factor`]: undefined,
      [`${TIP}/input`]: 's99',
      [`${SAG}/limits/0/basis`]: 'force_kN',
      [`${HOOK}/calibration/1/valid_from`]: inDemo(`${HOOK}/calibration/0/valid_from`),
      '/structures/0/elevations/2/members/0': 'T2',
    }),
  );
  expect(faults.map(({ path }) => path).sort()).toEqual(
    [
      '/simulated',
      '/nodes/1/id',
      `${placeOf('B1')}/section`,
      `${placeOf('L1')}/material`,
      `${placeOf('T1-mid')}/at_m`,
      `${record(BENDING)}/response/gauge_factor`,
      `${TIP}/input`,
      `${SAG}/limits/0/basis`,
      `${HOOK}/calibration/1/valid_from`,
      '/structures/0/elevations/2/members/0',
    ].sort(),
  );
  for (const { expected, came } of faults) {
    expect(expected).not.toBe('');
    expect(came).not.toBe('');
  }
});

describe('what the schema cannot judge, one at a time: where, and what it says', () => {
  test.each([
    ['an id twice', `${TIP}/id`, 'B1-end-web-0', 'each channel once'],
    ['a member twice', `${placeOf('L1')}/id`, 'B1', 'each member once'],
    ['a calibration record twice', `${record(TIP)}/id`, 'B1-end-web-0-cal1', 'once'],
    ['an unknown node', `${TIP}/node`, 'n9', 'a known node: n1, n2, yard'],
    ['an unknown input', `${TIP}/input`, 's99', 'a known input'],
    ['an input that another reads', `${TIP}/input`, 's1', 'no other channel reads'],
    ['an unknown section', `${placeOf('B1')}/section`, 'HE 301 B', 'HE 300 B'],
    ['an unknown grade', `${placeOf('B1')}/material`, 'S276', 'S275'],
    ['a thickness out of the table', `${placeOf('B1')}/thickness_mm`, 251, 'up to 250 mm'],
    ['a station past the end', `${placeOf('B1-third2')}/at_m`, 6.01, 'at most 6 m'],
    ['a member of no length', `${placeOf('B1')}/to_m`, [0, 0, 4.5], 'another point'],
    ['a range upside down', '/nodes/0/inputs/0/range', [1, -1], 'low below high'],
    ['an unknown member in a view', '/structures/0/elevations/0/members/0', 'B9', 'a known member'],
    ['an unknown load channel', '/structures/0/load_channel', 'hook', 'a known channel'],
    ['a load channel without load', '/structures/0/load_channel', 'air', 'a force channel'],
    ['a figure that cannot be V/V', `${record(TIP)}/signal/kind`, 'direct', 'ratio with an input'],
    ['leads of another circuit', `${record(TIP)}/response/circuit`, 'full-bending', 'none, excit'],
    ['a torsion bridge for strain', `${record(BENDING)}/response/circuit`, 'full-torsion', 'no '],
    ['a bending bridge for shear', `${record(SHEAR)}/response/circuit`, 'full-bending', 'torsion'],
    ['a load cell in mm', `${record(HOOK)}/response/value_unit`, 'mm', '"kN" for force'],
    ['a load cell in V', `${record(HOOK)}/response/signal_unit`, 'V', '"mV/V" with this signal'],
    ['a transducer in mV/V', `${record(SAG)}/response/signal_unit`, 'mV/V', '"V" with this'],
    [
      'a gauge as a thermometer',
      `${record(STEEL)}/response`,
      inDemo(`${record(TIP)}/response`),
      '',
    ],
    ['a thermometer as a gauge', `${record(TIP)}/response`, { kind: 'as-is' }, '"bridge" for'],
    ['a limit of another kind', `${SAG}/limits/0/basis`, 'temperature_Cel', 'displacement_mm for'],
    ['a share of no yield', `${HOOK}/limits/0/basis`, 'share_of_yield', 'force_kN for force'],
    ['a deadband as wide as its limit', `${HOOK}/limits/0/deadband`, 128, 'below the limit'],
    ['a level twice', `${HOOK}/limits/0/level`, 'stop', 'each level once'],
    ['a caution above the stop limit', `${HOOK}/limits/0/value`, 140, 'below the stop limit'],
    ['a limit past what the site allows', '/default_limits/1/value', 0.81, 'at most 80 % of yield'],
    ['a limit above yield', `${BENDING}/limits/1/value`, 8500, 'below yield'],
    [
      'a zero count over measured volts',
      `${record(TIE)}/signal/zero_count`,
      5,
      'a zero count of 0',
    ],
    [
      'an excitation nobody measures',
      `${record(TIE)}/signal/excitation`,
      { measured_by_input: 'e' },
      'a known input',
    ],
    [
      'a second of the calendar that is none',
      `${record(TIP)}/valid_from`,
      '2016-12-31T23:59:60Z',
      'calendar',
    ],
  ])('%s', (_, pointer, value, words) => {
    const { path, expected, came } = faultOf({ [pointer]: value });
    const place = new Map([
      [`${placeOf('B1')}/thickness_mm`, `${placeOf('B1')}/material`],
      [`${record(TIP)}/response/circuit`, `${record(TIP)}/response/leads`],
      [`${record(TIP)}/response`, `${record(TIP)}/response/kind`],
      [`${record(STEEL)}/response`, `${record(STEEL)}/response/kind`],
      [`${record(TIE)}/signal/excitation`, `${record(TIE)}/signal/excitation/measured_by_input`],
      [`${HOOK}/limits/0/level`, `${HOOK}/limits/1/level`],
    ]).get(pointer);
    expect(path).toBe(place ?? pointer);
    expect(expected).toContain(words);
    expect(came).not.toBe('');
  });
});

describe('records that follow one another', () => {
  const first = inDemo(record(TIP)) as Record<string, unknown>;
  const list = (...more: Record<string, unknown>[]) => ({
    [`${TIP}/calibration`]: [first, ...more.map((m) => ({ ...first, ...m }))],
  });
  const later = { id: 'later', valid_from: '2025-01-01T00:00:00Z' };

  test('a correction begins where the corrected record began, or elsewhere', () => {
    expect(faultsOf(demoWith(list({ id: 'x', corrects: first.id })))).toEqual([]);
    expect(
      faultsOf(
        demoWith(
          list(later, { ...later, id: 'x', corrects: 'later', valid_from: '2025-02-01T00:00:00Z' }),
        ),
      ),
    ).toEqual([]);
  });

  test('only an earlier record of the channel can be corrected, and each once', () => {
    expect(faultOf(list({ ...later, corrects: 'B1-end-web-0-cal1' }))).toEqual({
      path: `${TIP}/calibration/1/corrects`,
      expected: `an earlier record of this channel: ${String(first.id)}`,
      came: '"B1-end-web-0-cal1"',
    });
    const twice = list({ id: 'x', corrects: first.id }, { id: 'y', corrects: first.id });
    const [once] = faultsOf(demoWith(twice));
    expect(once).toMatchObject({ path: `${TIP}/calibration/2/corrects` });
  });

  test('a zero in another unit than its input, and a load that is not stated, are faults', () => {
    const zero = {
      ...{ id: 'z1', valid_from: '2025-01-01T00:00:00Z', author: 'A', reason: 'R', unit: '/' },
      ...{ raw: 1e-4, noise: 1e-7, samples: 100, state: { kind: 'loaded', load_kN: 10 } },
    };
    const withZero = (over: object) => ({ [`${TIP}/zeros`]: [{ ...zero, ...over }] });
    expect(faultsOf(demoWith(withZero({})))).toEqual([]);
    expect(faultOf(withZero({ unit: 'V' }))).toMatchObject({
      path: `${TIP}/zeros/0/unit`,
      expected: '"/", the unit of the input',
    });
    expect(faultOf(withZero({ state: { kind: 'loaded' } })).path).toContain('/zeros/0/state');
    expect(faultOf(withZero({ samples: 0 })).path).toBe(`${TIP}/zeros/0/samples`);
  });
});
