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

// Values from memory.
test.each([
  ['ASTM A36', 250],
  ['ASTM A992', 345],
  ['ASTM A572-50', 345],
])('%s yields at about %d MPa, E 29 000 ksi', (grade, megapascal) => {
  expect(Math.abs(yieldAt(grade, 12) - megapascal)).toBeLessThan(2);
  expect(at(grade, 12).youngsModulus / 1e9).toBeCloseTo(199.95, 1);
});

test('an unknown grade lists the known, a thickness out of the table its range', () => {
  const unknown = material('S999', millimetreToMetre(10));
  expect(unknown.ok ? '' : unknown.expected).toContain('S275');
  const thick = material('S275', millimetreToMetre(300));
  expect(thick.ok ? '' : thick.expected).toContain('up to 250 mm');
  expect(material('S275', millimetreToMetre(0)).ok).toBe(false);
  expect(new Set(gradeNames()).size).toBe(gradeNames().length);
});
