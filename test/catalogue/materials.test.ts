import { describe, expect, test } from 'vitest';
import { gradeNames, material } from '../../shared/catalogue/materials.ts';
import { millimetreToMetre } from '../../shared/model/units.ts';

const at = (grade: string, millimetres: number) => {
  const result = material(grade, millimetreToMetre(millimetres));
  if (!result.ok) throw new Error(result.expected);
  return result.value;
};
const yieldAt = (grade: string, millimetres: number) => at(grade, millimetres).yieldStrength / 1e6;

describe('EN 10025-2 Table 7: ReH by thickness, the upper limit in the band below it', () => {
  test.each([
    ['S235', [235, 225, 215, 215, 215, 195, 185, 175]],
    ['S275', [275, 265, 255, 245, 235, 225, 215, 205]],
    ['S355', [355, 345, 335, 325, 315, 295, 285, 275]],
  ])('%s', (grade, yields) => {
    const limits = [16, 40, 63, 80, 100, 150, 200, 250];
    limits.forEach((limit, i) => {
      expect(yieldAt(grade, limit)).toBeCloseTo(yields[i] ?? NaN, 9);
      const below = i === 0 ? 0 : (limits[i - 1] ?? 0);
      expect(yieldAt(grade, below + 0.1)).toBeCloseTo(yields[i] ?? NaN, 9);
    });
  });

  test('a flange of 19 mm in S275 yields at 265, one of 16 mm at 275', () => {
    expect(yieldAt('S275', 19)).toBe(265);
    expect(yieldAt('S275', 16)).toBe(275);
  });

  test('S355 at 30 mm: 345 by the product standard, 355 by the simplified table', () => {
    expect(yieldAt('S355', 30)).toBe(345);
    expect(yieldAt('S355 EN 1993-1-1', 30)).toBe(355);
    expect(yieldAt('S355 EN 1993-1-1', 40.1)).toBe(335);
  });
});

describe('EN 1993-1-1:2005 Table 3.1: t ≤ 40 and 40 < t ≤ 80', () => {
  test.each([
    ['S235', 235, 215],
    ['S275', 275, 255],
    ['S355', 355, 335],
    ['S450', 450, 410],
    ['S275N', 275, 255],
    ['S355N', 355, 335],
    ['S420N', 420, 390],
    ['S460N', 460, 430], // value from memory
    ['S460M', 460, 430], // value from memory
    ['S460Q', 460, 440], // value from memory
  ])('%s', (grade, thin, thick) => {
    const name = `${grade} EN 1993-1-1`;
    expect([40, 40.1, 80].map((t) => yieldAt(name, t))).toEqual([thin, thick, thick]);
    expect(material(name, millimetreToMetre(80.1)).ok).toBe(false);
  });
});

test('S460N and S460M, EN 10025-3 and -4 (above 100 mm from memory)', () => {
  const thicknesses = [16, 16.1, 40, 40.1, 63, 63.1, 80, 80.1, 100];
  const yields = [460, 440, 440, 430, 430, 410, 410, 400, 400];
  expect(thicknesses.map((t) => yieldAt('S460N', t))).toEqual(yields);
  expect(thicknesses.map((t) => yieldAt('S460M', t))).toEqual(yields);
  expect([100.1, 150, 200].map((t) => yieldAt('S460N', t))).toEqual([380, 380, 370]);
  expect(material('S460M', millimetreToMetre(101)).ok).toBe(false);
});

// EN 1993-1-4 Table 2.1 (value from memory).
test.each([
  ['1.4301', 230, 210, 210, 190],
  ['1.4401', 240, 220, 220, 200],
  ['1.4462', 500, 460, 460, 450],
])('%s by product form', (grade, cold, hot, plate, bar) => {
  const forms = [
    ['cold strip', 8],
    ['hot strip', 13.5],
    ['plate', 75],
    ['bar', 250],
  ] as const;
  const yields = forms.map(([form, upTo]) => yieldAt(`${grade} ${form}`, upTo));
  expect(yields).toEqual([cold, hot, plate, bar]);
  for (const [form, upTo] of forms) {
    expect(material(`${grade} ${form}`, millimetreToMetre(upTo + 0.1)).ok).toBe(false);
    expect(at(`${grade} ${form}`, 5).youngsModulus).toBe(200e9);
  }
});

// EN 1999-1-1 Tables 3.2a and 3.2b (value from memory).
test.each([
  ['6082-T6 sheet', [6, 6.1, 12.5, 12.6, 100], [260, 255, 255, 240, 240]],
  ['6082-T6 extruded', [5, 5.1, 15], [250, 260, 260]],
  ['6082-T6 bar', [20, 20.1, 150], [250, 260, 260]],
  ['6061-T6 sheet', [12.5, 80], [240, 240]],
  ['6061-T6 extruded', [5], [240]],
])('%s by thickness, E 70 GPa', (grade, thicknesses, yields) => {
  expect(thicknesses.map((t) => yieldAt(grade, t))).toEqual(yields);
  expect(at(grade, 5).youngsModulus).toBe(70e9);
});

test('6061-T6 of the US standards: 35 ksi (value from memory), not the handbook 40', () => {
  expect(yieldAt('ASTM 6061-T6 extruded', 10)).toBeCloseTo(241.317, 3);
});

// Yield over E, µε (computed from the tables).
test.each([
  ['S235', 10, 1119.05],
  ['S275', 10, 1309.52],
  ['S355', 10, 1690.48],
  ['S460N', 10, 2190.48],
  ['1.4301 plate', 20, 1050],
  ['6082-T6 sheet', 5, 3714.29],
])('yield strain of %s at %d mm is %d µε', (grade, thickness, microstrain) => {
  const { yieldStrength, youngsModulus } = at(grade, thickness);
  expect((yieldStrength / youngsModulus) * 1e6).toBeCloseTo(microstrain, 2);
});

// AISC 360, ASTM A36, A992, A572 (values from memory): 36 and 50 ksi are about 250 and 345 MPa.
test.each([
  ['ASTM A36', 250],
  ['ASTM A992', 345],
  ['ASTM A572-50', 345],
])('%s yields at about %d MPa, E 29 000 ksi', (grade, megapascal) => {
  expect(Math.abs(yieldAt(grade, 12) - megapascal)).toBeLessThan(2);
  expect(at(grade, 12).youngsModulus / 1e9).toBeCloseTo(199.95, 1);
});

test('an unknown grade lists the near ones, a thickness out of the table its range', () => {
  const unknown = material('S276', millimetreToMetre(10));
  expect(unknown.ok ? '' : unknown.expected).toContain('S275');
  const lost = material('oak', millimetreToMetre(10));
  for (const name of gradeNames()) expect(lost.ok ? '' : lost.expected).toContain(name);
  const thick = material('S275', millimetreToMetre(300));
  expect(thick.ok ? '' : thick.expected).toContain('up to 250 mm');
  expect(material('S275', millimetreToMetre(0)).ok).toBe(false);
  expect(new Set(gradeNames()).size).toBe(gradeNames().length);
});
