import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  besideText,
  fieldOfFile,
  fileOfField,
  unitOf,
} from '../../../client/state/set-up/figures.ts';
import type { Json } from '../../../client/state/set-up/tree.ts';

const stated = (key: string, map: Json, system: 'si' | 'us', text: string) =>
  fileOfField(text, unitOf(key, map), system);

// NIST SP 811 Appendix B.8: 1 in = 25.4 mm and 1 ksi = 6.894757 MPa, 1 kip = 4.448222 kN.
test.each([
  ['thickness_mm', {}, '0.5', 12.7],
  ['yield_MPa', {}, '50', 344.737864658],
  ['safe_working_load_kN', {}, '10', 44.4822161526],
  ['zero_Cel', {}, '68', 20],
  ['area_cm2', {}, '1', 6.4516],
  ['inertia_y_cm4', {}, '1', 41.62314256],
  ['modulus_y_cm3', {}, '1', 16.387064],
  ['expansion_microstrain_per_K', {}, '6.5', 11.7],
  ['at_m', {}, '100', 2.54],
  ['value', { basis: 'stress_MPa' }, '1', 6.89475729317],
  ['value', { basis: 'temperature_Cel' }, '212', 100],
  // A deadband is a difference: no offset.
  ['deadband', { basis: 'temperature_Cel' }, '1.8', 1],
  ['rated_value', { value_unit: 'mm' }, '1', 25.4],
])('%s of %j typed as %s in US customary units is kept as %d', (key, map, text, kept) => {
  expect(stated(key, map, 'us', text)).toBeCloseTo(kept, 9);
});

test('what has the file’s unit is kept as it was typed, digit by digit', () => {
  fc.assert(
    fc.property(
      fc.double({ noNaN: true, noDefaultInfinity: true }).map((x) => x + 0),
      (figure) => {
        expect(stated('gauge_factor', {}, 'us', String(figure))).toBe(figure);
        expect(stated('resistance_ohm', {}, 'us', String(figure))).toBe(figure);
        expect(stated('thickness_mm', {}, 'si', String(figure))).toBe(figure);
      },
    ),
  );
});

test('bridge output of an input in V/V is read in mV/V', () => {
  expect(fieldOfFile(0.004, unitOf('range', { unit: '/' }), 'si')).toBe('4');
  expect(stated('range', { unit: '/' }, 'si', '4')).toBe(0.004);
});

describe('what is no number', () => {
  test('stays in the draft as it was typed, for the server to refuse', () => {
    expect(stated('gauge_factor', {}, 'si', '2,1x')).toBe('2,1x');
    expect(fieldOfFile('2,1x', null, 'si')).toBe('2,1x');
  });
  test('nothing is nothing', () => {
    expect(stated('gauge_factor', {}, 'si', ' ')).toBeUndefined();
  });
});

test('the figure in the other system stands beside', () => {
  expect(besideText(345, unitOf('yield_MPa', {}), 'si')).toBe('= 50.04\u00a0ksi');
  expect(besideText(25.4, unitOf('thickness_mm', {}), 'us')).toBe('= 25.4\u00a0mm');
  expect(besideText(2.1, unitOf('gauge_factor', {}), 'si')).toBe('');
});
