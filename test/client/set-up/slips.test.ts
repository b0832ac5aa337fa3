import { expect, test } from 'vitest';
import { newSlips as slipsSince, slipsOf } from '../../../client/state/set-up/slips.ts';
import { withValue, type Json, type Path } from '../../../client/state/set-up/tree.ts';

const newSlips = (before: Json, after: Json) => slipsSince(before, slipsOf(before), after);

const RECORD = {
  id: 'g1-cal1',
  valid_from: '2026-05-06T07:30:00Z',
  author: 'A',
  reason: 'R',
  signal: { kind: 'volts', excitation: { stated_V: 5 } },
  response: {
    kind: 'bridge',
    circuit: 'quarter',
    gauge_factor: 2.08,
    gauge_resistance_ohm: 120,
    leads: { kind: 'three-wire', resistance_ohm: 0.7 },
    zero_mV_per_V: 0.1,
  },
} satisfies Json;

const channel = (id: string, resistance: number): Json => ({
  ...{ id, name: id, measurand: 'strain', node: 'n1', input: 's1' },
  calibration: [
    {
      ...RECORD,
      id: `${id}-cal1`,
      response: { ...RECORD.response, gauge_resistance_ohm: resistance },
    },
  ],
  limits: [{ level: 'stop', basis: 'strain_microstrain', value: 900, deadband: 20, on_delay_s: 0 }],
});

/** A beam of S275 with gauges of 120 Ω at one station; input of ±20 mV. */
const SITE: Json = {
  highest_limit_share_of_yield: 0.8,
  nodes: [{ id: 'n1', name: 'n1', inputs: [{ name: 's1', unit: 'V', range: [-0.02, 0.02] }] }],
  structures: [
    {
      id: 'S',
      members: [
        {
          ...{ id: 'B', section: 'HE 300 B', material: 'S275' },
          stations: [{ id: 'T', at_m: 1, channels: [channel('g1', 120), channel('g2', 120)] }],
        },
      ],
    },
  ],
};

const CHANNEL = ['structures', '0', 'members', '0', 'stations', '0', 'channels', '0'];
const RESPONSE = ['calibration', '0', 'response'];

const asked = (...changes: (readonly [Path, Json])[]): string[] =>
  slipsOf(
    changes.reduce<Json>(
      (site, [path, value]) => withValue(site, [...CHANNEL, ...path], value),
      SITE,
    ),
  )
    .filter(({ at }) => at.includes('/channels/0/'))
    .map(({ code }) => code);

test('a site of usual figures raises no question', () => {
  expect(slipsOf(SITE)).toEqual([]);
});

// Foil gauges have a factor about 2; common practice, no source.
test.each([
  [1.8, []],
  [2.3, []],
  [1.79, ['gauge-factor']],
  [2.31, ['gauge-factor']],
  [21.1, ['gauge-factor']],
  // A semiconductor gauge: another trade.
  [130, []],
])('gauge factor %d asks %j', (factor, codes) => {
  expect(
    asked([[...RESPONSE, 'gauge_factor'], factor]).filter((code) => code === 'gauge-factor'),
  ).toEqual(codes);
});

// Common practice, no source: instruments excite with 0.5 to 24 V.
test.each([
  [0.5, false],
  [24, false],
  [5000, true],
  [0.005, true],
])('a stated excitation of %d V asks: %j', (volts, asks) => {
  const codes = asked([['calibration', '0', 'signal', 'excitation', 'stated_V'], volts]);
  expect(codes.includes('excitation')).toBe(asks);
});

// Nominal resistances of the trade, within 5 %; common practice, no source.
test.each([
  [350, ['resistance-neighbours']],
  [1000, ['resistance-neighbours']],
  [122, []],
  [240, ['resistance-unusual', 'resistance-neighbours']],
])('a gauge of %d Ω beside one of 120 Ω asks %j', (resistance, codes) => {
  expect(asked([[...RESPONSE, 'gauge_resistance_ohm'], resistance])).toEqual(codes);
});

// 5 Ω is 40 m of 0.14 mm² copper, 0.123 Ω/m (IEC 60028, 20 °C).
test.each([
  [{ kind: 'three-wire', resistance_ohm: 5 }, []],
  [{ kind: 'three-wire', resistance_ohm: 5.1 }, ['lead-high']],
  [{ kind: 'three-wire', resistance_ohm: 0 }, []],
  [{ kind: 'two-wire', resistance_ohm: 0, trimmed: false }, ['lead-zero']],
])('leads %j ask %j', (leads, codes) => {
  expect(asked([[...RESPONSE, 'leads'], leads])).toEqual(codes);
});

// Common practice, no source.
test.each([
  [10, []],
  [-10.5, ['transverse']],
])('Kt of %d %% asks %j', (percent, codes) => {
  expect(asked([[...RESPONSE, 'transverse_sensitivity_percent'], percent])).toEqual(codes);
});

// E = 210 GPa (EN 1993-1-1 §3.2.6): 100 µε are 21 MPa, and 100 MPa are 476 µε.
test.each([
  [{ basis: 'strain_microstrain', value: 100 }, ['limit-unit']],
  [{ basis: 'strain_microstrain', value: 476 }, []],
  [{ basis: 'stress_MPa', value: 14.5 }, ['limit-unit']],
  [{ basis: 'stress_MPa', value: 100 }, []],
  [{ basis: 'share_of_yield', value: 0.1 }, []],
])('a stop limit of %j asks %j', (limit, codes) => {
  const whole = { level: 'stop', deadband: 1, on_delay_s: 0, ...limit };
  expect(asked([['limits', '0'], whole])).toEqual(codes);
});

// Quarter bridge, GF 2, nodal solution: 0.4995 mV/V at 1000 µε and −0.5005 mV/V at −1000 µε, which
// at 5 V are 2.4975 and −2.5025 mV.
test.each([
  [[-0.00251, 0.0025], []],
  [[-0.0025, 0.0025], ['input-range']],
  [[-0.00251, 0.00249], ['input-range']],
])('an input of %j V for 1000 µε at 5 V asks %j', (range, codes) => {
  const nodes: Json = [{ id: 'n1', inputs: [{ name: 's1', unit: 'V', range }] }];
  const quarter = {
    ...RECORD.response,
    ...{ gauge_factor: 2, leads: { kind: 'none' }, zero_mV_per_V: 0 },
  };
  const limit = { basis: 'strain_microstrain', value: 1000, level: 'stop' };
  let site = withValue(SITE, ['nodes'], nodes);
  site = withValue(site, [...CHANNEL, ...RESPONSE], quarter);
  site = withValue(site, [...CHANNEL, 'limits', '0'], limit);
  const first = slipsOf(site).filter(({ at }) => at.includes('/channels/0/'));
  expect(first.map(({ code }) => code)).toEqual(codes);
});

test('what stood already is not asked about again', () => {
  const before = withValue(SITE, [...CHANNEL, ...RESPONSE, 'gauge_factor'], 21.1);
  expect(newSlips(before, before)).toEqual([]);
  const after = withValue(before, [...CHANNEL, ...RESPONSE, 'gauge_factor'], 2.4);
  expect(newSlips(before, after).map(({ code, at }) => [code, at])).toEqual([
    ['gauge-factor', `/${[...CHANNEL, ...RESPONSE, 'gauge_factor'].join('/')}`],
  ]);
});

test('a neighbour that was there before is not asked about', () => {
  const after = withValue(SITE, [...CHANNEL, ...RESPONSE, 'gauge_resistance_ohm'], 350);
  expect(newSlips(SITE, after).map(({ at }) => at.split('/')[8])).toEqual(['0']);
});

test('a record that another corrects is not asked about', () => {
  const wrong = withValue(SITE, [...CHANNEL, ...RESPONSE, 'gauge_factor'], 21.1);
  const right = withValue(wrong, [...CHANNEL, 'calibration', '1'], {
    ...RECORD,
    ...{ id: 'g1-cal2', corrects: 'g1-cal1' },
  });
  expect(slipsOf(right)).toEqual([]);
});
