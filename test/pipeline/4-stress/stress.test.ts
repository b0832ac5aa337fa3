import { expect, test } from 'vitest';
import type { Material } from '../../../shared/model/site.ts';
import {
  gigapascalToPascal,
  megapascalToPascal,
  microstrainToStrain,
  pascal,
} from '../../../shared/model/units.ts';
import {
  shearModulus,
  stressOf,
  stressPerStrain,
  utilisation,
  yieldFor,
} from '../../../shared/pipeline/4-stress/stress.ts';

const steel: Material = {
  designation: 'S275',
  source: 'test',
  youngsModulus: gigapascalToPascal(210),
  poisson: 0.3,
  expansion: 12e-6,
  yieldStrength: megapascalToPascal(275),
};

test('G of structural steel: EN 1993-1-1 §3.2.6 gives about 81 000 N/mm², E/2(1+ν) is 80 769', () => {
  expect(shearModulus(steel) / 1e6).toBeCloseTo(80769.23, 2);
});

// E: EN 1993-1-1:2005 §3.2.6; fy: Table 3.1; the yield strain is computed from them.
test('1000 µε in steel of 210 GPa is 210 MPa; yield of S275 is 1309.52 µε', () => {
  const perStrain = stressPerStrain('strain', steel) ?? pascal(NaN);
  expect(stressOf(microstrainToStrain(1000), perStrain) / 1e6).toBeCloseTo(210, 9);
  const atYield = stressOf(microstrainToStrain(1309.5238), perStrain);
  expect(utilisation(atYield, yieldFor('strain', steel) ?? pascal(NaN))).toBeCloseTo(1, 6);
});

test('100 MPa in a stainless steel of 200 GPa is 500 µε (common practice, no source)', () => {
  const stainless = { ...steel, youngsModulus: gigapascalToPascal(200) };
  const perStrain = stressPerStrain('strain', stainless) ?? pascal(NaN);
  expect(stressOf(microstrainToStrain(500), perStrain) / 1e6).toBeCloseTo(100, 9);
});

// τ = T/Wt, γ = τ/G, ε45 = γ/2: computed, formulas from any handbook.
test('torsion: 246.551642 µε at 45° and G 81 000 is τ 39.941366 MPa (τ = T/Wt of CHS 168.3×6.3, 10 kNm)', () => {
  const g81 = { ...steel, youngsModulus: pascal(81e9 * 2.6) };
  const perStrain = stressPerStrain('shear', g81) ?? pascal(NaN);
  expect(stressOf(microstrainToStrain(246.551642), perStrain) / 1e6).toBeCloseTo(39.941366, 5);
});

// 275/√3: EN 1993-1-1:2005 §6.2.1(5) with normal stresses 0, value computed.
test('shear yields at fy/√3; compression uses yield as tension does; a transducer has neither', () => {
  expect((yieldFor('shear', steel) ?? NaN) / 1e6).toBeCloseTo(158.771, 3);
  expect(utilisation(megapascalToPascal(-137.5), megapascalToPascal(275))).toBe(0.5);
  for (const measurand of ['force', 'displacement', 'temperature'] as const) {
    expect(stressPerStrain(measurand, steel)).toBeNull();
    expect(yieldFor(measurand, steel)).toBeNull();
  }
});
