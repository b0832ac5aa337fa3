import fc from 'fast-check';
import { expect, test } from 'vitest';
import { celsius, microstrainToStrain } from '../../../shared/model/units.ts';
import {
  compensationCheck,
  freeExpansion,
  gridThermalOutput,
} from '../../../shared/pipeline/3-strain/compensation.ts';

const STEEL = 12e-6;
const [t0, t] = [celsius(20), celsius(45)];

// α = 12e-6 /K: EN 1993-1-1:2005 §3.2.6 (value from memory); α·ΔT computed.
test('steel free to expand does 300 µε over 25 K', () => {
  expect(freeExpansion(STEEL, t, t0) * 1e6).toBeCloseTo(300, 9);
});

// [α_R/GF + (α_s − α_g)]·ΔT: Dally & Riley, Experimental Stress Analysis (value from memory);
// figures computed: (20/2 + 12 − 15)·25 = 175.
test('thermal output from the materials of gauge and member', () => {
  const grid = { resistancePerKelvin: 20e-6, expansion: 15e-6, gaugeFactor: 2 };
  expect(gridThermalOutput(grid, STEEL, t, t0) * 1e6).toBeCloseTo(175, 9);
});

// Free expansion and superposition: Gere, Mechanics of Materials, thermal effects; computed.
test('matched gauge: 0 where the steel is free, −300 µε where it is held over 25 K', () => {
  const matched = { member: STEEL, matched: STEEL };
  const free = compensationCheck(matched, microstrainToStrain(0), t, t0);
  expect(free.free).toBe(0);
  expect(free.restraint).toBeCloseTo(0, 12);
  const held = compensationCheck(matched, microstrainToStrain(-300), t, t0);
  expect(held.held * 1e6).toBeCloseTo(-300, 9);
  expect(held.restraint).toBeCloseTo(1, 12);
});

test('matched for 11e-6 on steel of 12e-6: 25 µε over 25 K are explained, 40 leave 15', () => {
  const check = compensationCheck(
    { member: STEEL, matched: 11e-6 },
    microstrainToStrain(40),
    t,
    t0,
  );
  expect(check.free * 1e6).toBeCloseTo(25, 9);
  expect(check.unexplained * 1e6).toBeCloseTo(15, 9);
  expect(check.restraint).toBeCloseTo(-0.05, 12);
});

test('at one temperature nothing can be said of restraint', () => {
  const check = compensationCheck({ member: STEEL, matched: STEEL }, microstrainToStrain(7), t, t);
  expect(check.restraint).toBeNull();
  expect(check.unexplained * 1e6).toBeCloseTo(7, 9);
});

test('a member partly held shows its share, whatever it is matched for and however warm', () => {
  const within = (min: number, max: number) => fc.double({ min, max, noNaN: true });
  fc.assert(
    fc.property(
      within(0, 1),
      within(10, 25),
      within(9, 25),
      within(-60, 60).filter((kelvin) => Math.abs(kelvin) > 0.1),
      (held, member, matched, kelvin) => {
        const shown = microstrainToStrain((member - matched - held * member) * kelvin);
        const pair = { member: member * 1e-6, matched: matched * 1e-6 };
        const check = compensationCheck(pair, shown, celsius(20 + kelvin), celsius(20));
        expect(check.restraint).toBeCloseTo(held, 9);
      },
    ),
  );
});
