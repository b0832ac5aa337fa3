import { describe, expect, test } from 'vitest';
import {
  decimalText,
  fieldText,
  percentText,
  typedNumber,
} from '../../client/state/number-text.ts';
import { alongText, figureText, quantityText, scaleFor } from '../../client/state/quantity.ts';
import { durationText, utcDateTime, utcTime } from '../../client/state/time-text.ts';

const NB = '\u00a0';

describe('figures as people read them', () => {
  test.each([
    [-12.34, 1, '\u221212.3'],
    [0.04, 1, '0.0'],
    [-0.04, 1, '0.0'],
    [NaN, 1, '–'],
    [Infinity, 0, '–'],
  ])('%f with %i decimals', (value, decimals, text) => {
    expect(decimalText(value, decimals)).toBe(text);
  });

  // ISO 80000-1:2009 §7.3.2: a comma or a point on the line is the decimal sign.
  test.each([
    ['12,5', 12.5],
    [' 12.5 ', 12.5],
    ['\u22123', -3],
    ['.5', 0.5],
    ['1e3', 1000],
  ])('typed %j is %f', (text, value) => {
    expect(typedNumber(text)).toBe(value);
  });

  test.each(['', '12,5,1', '1 000', '0x10', 'Infinity', '12 MPa'])(
    'typed %j is no number',
    (text) => {
      expect(typedNumber(text)).toBeNaN();
    },
  );

  test('a field holds what can be typed again, without what rounding left', () => {
    expect(fieldText(0.1 + 0.2)).toBe('0.3');
    expect(typedNumber(fieldText(151.98765432))).toBe(151.987654);
  });
});

describe('a share of a limit', () => {
  test.each([
    [0.41, `41${NB}%`],
    [-0.41, `41${NB}%`],
    [0.949, `95${NB}%`],
    [0.9996, `99.9${NB}%`],
    [1, `100.0${NB}%`],
    [1.3, `130${NB}%`],
    [NaN, `–${NB}%`],
  ])('%f', (share, text) => {
    expect(percentText(share)).toBe(text);
  });

  test('never reads as reached before it is', () => {
    for (let share = 0.99; share < 1; share += 0.00007) {
      expect(percentText(share).startsWith('100')).toBe(false);
    }
  });
});

describe('quantities in both systems of units', () => {
  // NIST SP 811 Appendix B.8: 1 ksi = 6.894757 MPa, 1 kip = 4.448222 kN, 1 in = 25.4 mm, °F = 1.8 °C + 32.
  test.each([
    ['stress', 265e6, `265.0${NB}MPa`, `38.44${NB}ksi`],
    ['force', 125e3, `125.0${NB}kN`, `28.10${NB}kip`],
    ['displacement', 0.0254, `25.40${NB}mm`, `1.000${NB}in`],
    ['temperature', 100, `100.0${NB}°C`, `212.0${NB}°F`],
    ['strain', -946.4e-6, `\u2212946${NB}µε`, `\u2212946${NB}µε`],
  ] as const)('%s', (kind, value, si, us) => {
    expect(quantityText(value, scaleFor(kind, 'si'))).toBe(si);
    expect(quantityText(value, scaleFor(kind, 'us'))).toBe(us);
  });

  test('µε have a decimal below 100 and none from there, without a jump at the border', () => {
    const scale = scaleFor('strain', 'si');
    expect(figureText(12.34e-6, scale)).toBe('12.3');
    expect(figureText(99.94e-6, scale)).toBe('99.9');
    expect(figureText(99.96e-6, scale)).toBe('100');
  });

  test('what is shown comes back as it was, in every unit', () => {
    for (const kind of ['strain', 'stress', 'force', 'displacement', 'temperature'] as const) {
      for (const system of ['si', 'us'] as const) {
        const { fromSi, toSi } = scaleFor(kind, system);
        expect(toSi(fromSi(0.0123))).toBeCloseTo(0.0123, 12);
      }
    }
  });

  test('places along a member are rounded, not cut', () => {
    expect(alongText(0.4, 'si')).toBe(`0.40${NB}m`);
    expect(alongText(0.4, 'us')).toBe(`15.7${NB}in`);
  });
});

describe('times', () => {
  // POSIX.1-2017 §4.16: 1 000 000 000 s since the Epoch is 2001-09-09T01:46:40Z.
  test('UTC', () => {
    expect(utcTime(1e9)).toBe('01:46:40');
    expect(utcDateTime(1e9 + 0.9)).toBe(`2001-09-09 01:46:40${NB}UTC`);
  });

  test.each([
    [-1, `0${NB}s`],
    [59.9, `59${NB}s`],
    [60, `1${NB}min`],
    [200, `3${NB}min 20${NB}s`],
    [7500, `2${NB}h 5${NB}min`],
    [273_600, `3${NB}d 4${NB}h`],
  ])('%f s', (seconds, text) => {
    expect(durationText(seconds)).toBe(text);
  });
});
