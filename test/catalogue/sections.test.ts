import { describe, expect, test } from 'vitest';
import { section, sectionNames } from '../../shared/catalogue/sections.ts';
import type { Section } from '../../shared/model/site.ts';
import { AISC_PRINTED, EN_10365_PRINTED } from './printed.ts';

const get = (name: string): Section => {
  const result = section(name);
  if (!result.ok) throw new Error(`${name}: expected ${result.expected}`);
  return result.value;
};

const steelMassPerMetre = (s: Section) => s.area * 7850;

// Computed from nominal dimensions; they round to the tables of EN 10365 (IPE, HE) and to the
// handbook tables of UB and UC (value from memory).
const COMPUTED = [
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
] as const;

describe('EN 10365: A cm², Iy cm⁴, Wel,y cm³, Iz cm⁴, Wel,z cm³, kg/m', () => {
  test.each(COMPUTED)('%s', (name, area, iy, wy, iz, wz, mass) => {
    const s = get(name);
    expect(s.area * 1e4).toBeCloseTo(area, 2);
    expect(s.inertiaY * 1e8).toBeCloseTo(iy, 1);
    expect(s.modulusY * 1e6).toBeCloseTo(wy, 2);
    expect(s.inertiaZ * 1e8).toBeCloseTo(iz, 2);
    expect(s.modulusZ * 1e6).toBeCloseTo(wz, 2);
    expect(steelMassPerMetre(s)).toBeCloseTo(mass, 1);
  });

  // Value from memory: the rows not checked above.
  test.each(EN_10365_PRINTED)('%s: A %s cm², Iy %s cm⁴ as printed', (name, area, iy) => {
    const s = get(name);
    const decimals = area.split('.')[1]?.length ?? 0;
    expect(Math.abs(s.area * 1e4 - Number(area))).toBeLessThanOrEqual(0.5001 * 10 ** -decimals);
    const figures = Math.min(4, iy.replace('.', '').length);
    expect(Number((s.inertiaY * 1e8).toPrecision(figures))).toBe(Number(iy));
  });
});

describe('AISC Manual Table 1-1: A in², Ix in⁴, Iy in⁴ (value from memory), to 1 %', () => {
  test.each(AISC_PRINTED)('%s', (name, area, ix, iy) => {
    const s = get(name);
    expect(Math.abs(s.area / 0.0254 ** 2 / area - 1)).toBeLessThan(0.01);
    expect(Math.abs(s.inertiaY / 0.0254 ** 4 / ix - 1)).toBeLessThan(0.01);
    expect(Math.abs(s.inertiaZ / 0.0254 ** 4 / iy - 1)).toBeLessThan(0.01);
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

// EN 10219-2 tables as printed (value from memory): thicker walls bend to larger radii.
test.each([
  ['SHS 200x200x8 cold', 59.2, 3566],
  ['SHS 200x200x12 cold', 84.1, 4730],
])('%s: A %d cm², I %d cm⁴', (name, area, inertia) => {
  expect(get(name).area * 1e4).toBeCloseTo(area, 1);
  expect(Math.abs((get(name).inertiaY * 1e8) / inertia - 1)).toBeLessThan(0.001);
});

test('every rolled section of the catalogue is held to a figure from outside', () => {
  const held = [...COMPUTED, ...EN_10365_PRINTED, ...AISC_PRINTED].map(([name]) => name);
  expect(sectionNames().sort()).toEqual(held.sort());
});

test('a name is found with or without blanks, × or x, capitals or not', () => {
  expect(get('he300b')).toEqual(get('HE 300 B'));
  expect(get('ub 254×146×31')).toEqual(get('UB 254x146x31'));
  expect(get('HE 300 B').area * 1e4).not.toBeCloseTo(161.3, 0); // that is HE 320 B
});

test('a flat bar is as thick as its smaller side, whichever way it stands', () => {
  expect(get('FLAT 100x10').thickness).toBeCloseTo(0.01, 12);
  expect(get('FLAT 10x100').thickness).toBeCloseTo(0.01, 12);
  expect(get('FLAT 100x10').inertiaY * 1e8).toBeCloseTo(83.3333, 3); // b·h³/12
});

test('what is not there says what there is', () => {
  const meant = (name: string) => {
    const result = section(name);
    return result.ok ? '' : result.expected;
  };
  expect(meant('HE 310 B')).toContain('HE 300 B');
  expect(meant('HE 310 B')).not.toContain('IPE');
  expect(meant('')).toContain('UC 254x254x73');
  expect(section('CHS 50x40').ok).toBe(false);
  expect(section('RHS 20x20x9 hot').ok).toBe(false);
  expect(section('SHS 100x80x5 hot').ok).toBe(false);
  expect(sectionNames().length).toBeGreaterThan(45);
});
