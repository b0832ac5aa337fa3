import { describe, expect, test } from 'vitest';
import { section, sectionNames } from '../../shared/catalogue/sections.ts';
import type { Section } from '../../shared/model/site.ts';

const get = (name: string): Section => {
  const result = section(name);
  if (!result.ok) throw new Error(`${name}: expected ${result.expected}`);
  return result.value;
};

const steelMassPerMetre = (s: Section) => s.area * 7850;

// Computed from nominal dimensions; they round to the tables of EN 10365 (IPE, HE) and to the
// handbook tables of UB and UC (value from memory).
describe('EN 10365: A cm², Iy cm⁴, Wel,y cm³, Iz cm⁴, Wel,z cm³, kg/m', () => {
  test.each([
    ['IPE 200', 28.484, 1943.17, 194.317, 142.368, 28.474, 22.36],
    ['IPE 240', 39.116, 3891.63, 324.302, 283.634, 47.272, 30.71],
    ['IPE 300', 53.812, 8356.11, 557.074, 603.778, 80.504, 42.24],
    ['IPE 360', 72.729, 16265.63, 903.646, 1043.452, 122.759, 57.09],
    ['IPE 400', 84.464, 23128.37, 1156.418, 1317.824, 146.425, 66.3],
    ['HE 200 A', 53.831, 3692.16, 388.648, 1335.509, 133.551, 42.26],
    ['HE 140 B', 42.956, 1509.23, 215.604, 549.666, 78.524, 33.72],
    ['HE 200 B', 78.081, 5696.18, 569.618, 2003.369, 200.337, 61.29],
    ['HE 300 B', 149.078, 25165.68, 1677.712, 8562.83, 570.855, 117.03],
    ['UB 254x146x31', 39.677, 4413.41, 351.107, 447.531, 61.264, 31.15],
    ['UB 305x165x40', 51.32, 8502.6, 560.488, 764.359, 92.65, 40.29],
    ['UB 457x191x67', 85.508, 29380.27, 1295.998, 1452.134, 152.937, 67.12],
    ['UC 152x152x30', 38.263, 1748.04, 221.833, 560.463, 73.311, 30.04],
    ['UC 203x203x46', 58.731, 4567.82, 449.588, 1548.206, 152.083, 46.1],
    ['UC 254x254x73', 93.101, 11407.21, 897.852, 3907.801, 306.976, 73.08],
  ])('%s', (name, area, iy, wy, iz, wz, mass) => {
    const s = get(name);
    expect(s.area * 1e4).toBeCloseTo(area, 2);
    expect(s.inertiaY * 1e8).toBeCloseTo(iy, 1);
    expect(s.modulusY * 1e6).toBeCloseTo(wy, 2);
    expect(s.inertiaZ * 1e8).toBeCloseTo(iz, 2);
    expect(s.modulusZ * 1e6).toBeCloseTo(wz, 2);
    expect(steelMassPerMetre(s)).toBeCloseTo(mass, 1);
  });

  // EN 10365 tables, kg/m to one decimal (value from memory): the rows not checked above.
  test.each([
    ['IPE 80', 6.0],
    ['IPE 100', 8.1],
    ['IPE 120', 10.4],
    ['IPE 140', 12.9],
    ['IPE 160', 15.8],
    ['IPE 180', 18.8],
    ['IPE 220', 26.2],
    ['IPE 270', 36.1],
    ['IPE 330', 49.1],
    ['IPE 450', 77.6],
    ['IPE 500', 90.7],
    ['IPE 550', 106],
    ['IPE 600', 122],
    ['HE 100 A', 16.7],
    ['HE 120 A', 19.9],
    ['HE 140 A', 24.7],
    ['HE 160 A', 30.4],
    ['HE 180 A', 35.5],
    ['HE 220 A', 50.5],
    ['HE 240 A', 60.3],
    ['HE 260 A', 68.2],
    ['HE 280 A', 76.4],
    ['HE 300 A', 88.3],
    ['HE 100 B', 20.4],
    ['HE 120 B', 26.7],
    ['HE 160 B', 42.6],
    ['HE 180 B', 51.2],
    ['HE 220 B', 71.5],
    ['HE 240 B', 83.2],
    ['HE 260 B', 93.0],
    ['HE 280 B', 103],
  ])('%s weighs %d kg/m', (name, mass) => {
    expect(Math.abs(steelMassPerMetre(get(name)) / mass - 1)).toBeLessThan(0.006);
  });
});

describe('AISC Manual Table 1-1: A in², Ix in⁴, Iy in⁴ (value from memory), to 1.5 %', () => {
  test.each([
    ['W12x26', 7.65, 204, 17.3],
    ['W8x31', 9.13, 110, 37.1],
    ['W14x90', 26.5, 999, 362],
    ['W16x31', 9.13, 375, 12.4],
  ])('%s', (name, area, ix, iy) => {
    const s = get(name);
    expect(Math.abs(s.area / 0.0254 ** 2 / area - 1)).toBeLessThan(0.015);
    expect(Math.abs(s.inertiaY / 0.0254 ** 4 / ix - 1)).toBeLessThan(0.015);
    expect(Math.abs(s.inertiaZ / 0.0254 ** 4 / iy - 1)).toBeLessThan(0.015);
  });
});

describe('EN 10210-2 and EN 10219-2: A cm², I cm⁴ (computed with Annex B radii)', () => {
  test.each([
    ['SHS 100x100x5 hot', 18.732, 279.43, 279.43],
    ['SHS 100x100x5 cold', 18.356, 271.1, 271.1],
    ['SHS 200x200x10 hot', 74.927, 4470.92, 4470.92],
    ['RHS 200x100x8 hot', 44.753, 2233.6, 739.01],
    ['RHS 120x80x5 hot', 18.732, 365.38, 192.95],
    ['RHS 100x50x4 cold', 10.948, 134.14, 44.95],
    ['CHS 114.3x5', 17.169, 256.92, 256.92],
    ['CHS 168.3x6.3', 32.063, 1053.421, 1053.421],
    ['CHS 219.1x8', 53.055, 2959.633, 2959.633],
  ])('%s', (name, area, iy, iz) => {
    const s = get(name);
    expect(s.area * 1e4).toBeCloseTo(area, 2);
    expect(s.inertiaY * 1e8).toBeCloseTo(iy, 1);
    expect(s.inertiaZ * 1e8).toBeCloseTo(iz, 1);
  });
});

test('a name is found with or without blanks, × or x, capitals or not', () => {
  expect(get('he300b')).toEqual(get('HE 300 B'));
  expect(get('ub 254×146×31')).toEqual(get('UB 254x146x31'));
  expect(get('HE 300 B').area * 1e4).not.toBeCloseTo(161.3, 0); // that is HE 320 B
});

test('what is not there says what there is', () => {
  const result = section('HE 999 Z');
  expect(result.ok ? '' : result.expected).toContain('HE 300 B');
  expect(section('CHS 50x40').ok).toBe(false);
  expect(section('RHS 20x20x9 hot').ok).toBe(false);
  expect(sectionNames().length).toBeGreaterThan(45);
});
