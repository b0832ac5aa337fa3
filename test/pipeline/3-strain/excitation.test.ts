import { describe, expect, test } from 'vitest';
import {
  ohm,
  squareMillimetreToSquareMetre,
  volt,
  wattPerSquareMetre,
} from '../../../shared/model/units.ts';
import {
  ALLOWABLE_DENSITY,
  dissipatedPower,
  highestExcitation,
  powerDensity,
  selfHeating,
} from '../../../shared/pipeline/3-strain/excitation.ts';

const GRID = squareMillimetreToSquareMetre(18);

// P = V²/(4·Rg), density over a grid of 6 × 3 mm: value from memory; rows computed.
describe('power in one gauge of an equal-arm bridge', () => {
  test.each([
    [5, 120, 52.083, 2.8935e-3],
    [5, 350, 17.857, 9.9206e-4],
    [5, 1000, 6.25, 3.4722e-4],
    [2.5, 120, 13.021, null],
    [2.5, 350, 4.4643, null],
    [2.5, 1000, 1.5625, null],
  ])('%d V on %d Ω: %d mW', (volts, rg, milliwatt, perSquareMillimetre) => {
    const power = dissipatedPower(volt(volts), ohm(rg));
    expect(power * 1e3).toBeCloseTo(milliwatt, 3);
    if (perSquareMillimetre !== null) {
      expect(powerDensity(power, GRID) / 1e6).toBeCloseTo(perSquareMillimetre, 7);
    }
  });
});

// 2·√(p·A·Rg): value from memory; rows computed.
describe('highest excitation of an 18 mm² grid', () => {
  test.each([
    [0.0016, 120, 3.718],
    [0.0016, 350, 6.35],
    [0.0016, 1000, 10.733],
    [0.003, 120, 5.091],
    [0.003, 350, 8.695],
    [0.003, 1000, 14.697],
  ])('at %d W/mm² on %d Ω: %d V', (density, rg, expected) => {
    const allowed = wattPerSquareMetre(density * 1e6);
    const highest = highestExcitation(allowed, GRID, ohm(rg));
    expect(highest).toBeCloseTo(expected, 3);
    expect(powerDensity(dissipatedPower(highest, ohm(rg)), GRID)).toBeCloseTo(allowed, 8);
  });
});

// Dally & Riley, Experimental Stress Analysis, allowable power densities, W/mm² (values from
// memory).
describe('what each material carries away, W/mm²', () => {
  test.each([
    ['thick-aluminium-or-copper', 0.008, 0.016],
    ['thick-steel', 0.003, 0.008],
    ['thin-steel', 0.0015, 0.003],
    ['glass-ceramic-or-composite', 0.0003, 0.0008],
    ['unfilled-plastic', 0.00003, 0.00008],
  ] as const)('%s: %d to %d', (sink, low, high) => {
    expect(ALLOWABLE_DENSITY[sink].low / 1e6).toBeCloseTo(low, 9);
    expect(ALLOWABLE_DENSITY[sink].high / 1e6).toBeCloseTo(high, 9);
  });

  test('5 V on 120 Ω and 18 mm²: cool on thick steel, warm on thin, hot on glass', () => {
    const density = powerDensity(dissipatedPower(volt(5), ohm(120)), GRID);
    expect(selfHeating(density, 'thick-steel')).toBe('cool');
    expect(selfHeating(density, 'thin-steel')).toBe('warm');
    expect(selfHeating(density, 'glass-ceramic-or-composite')).toBe('hot');
  });
});
