import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { apply } from '../../../shared/model/fractional-linear.ts';
import {
  celsius,
  microstrainToStrain,
  strain,
  strainToMicrostrain,
} from '../../../shared/model/units.ts';
import {
  fillThermalCorrected,
  gaugeFactorAt,
  thermalCorrected,
  thermalFault,
  thermalMap,
  thermalOutputAt,
  thermalShare,
  type GaugeTemperature,
} from '../../../shared/pipeline/3-strain/thermal-output.ts';

const thermalOutput = {
  coefficients: [-30e-6, 2.5e-6, -0.06e-6, 3e-10],
  gaugeFactor: 2,
};
const gauge: GaugeTemperature = {
  gaugeFactor: 2.1,
  factorPerKelvin: 1e-4,
  reference: celsius(24),
  thermalOutput,
};
const corrected = (of: GaugeTemperature, indicatedAt: number, microstrain: number) =>
  strainToMicrostrain(
    thermalCorrected(of, indicatedAt, celsius(24), microstrainToStrain(microstrain), celsius(60)),
  );

// Terms: ASTM E251; order of correction: value from memory; figures computed.
describe('a gauge of 2.10, polynomial quoted at 2.0, zero at 24 °C, read at 60 °C', () => {
  test('thermal output −0.4128 µε at 24 °C, −31.2 µε at 60 °C; gauge factor 2.10756', () => {
    expect(thermalOutputAt(thermalOutput, celsius(24)) * 1e6).toBeCloseTo(-0.4128, 9);
    expect(thermalOutputAt(thermalOutput, celsius(60)) * 1e6).toBeCloseTo(-31.2, 9);
    expect(gaugeFactorAt(gauge, celsius(60))).toBeCloseTo(2.10756, 12);
  });

  test('850 µε at an instrument factor of 2.0 is 835.835943 µε', () => {
    expect(corrected(gauge, 2, 850)).toBeCloseTo(835.835943, 6);
  });

  test('the same signal at 2.10 reads 809.523810 and is the same 835.835943 µε', () => {
    expect(corrected(gauge, 2.1, (850 * 2) / 2.1)).toBeCloseTo(835.835943, 6);
  });

  test('838.844952 µε where the slope of the gauge factor is not accounted for', () => {
    expect(corrected({ ...gauge, factorPerKelvin: 0 }, 2, 850)).toBeCloseTo(838.844952, 6);
  });

  test('a quartic term counts', () => {
    const quartic = { coefficients: [0, 0, 0, 0, 1e-12], gaugeFactor: 2 };
    expect(thermalOutputAt(quartic, celsius(60)) * 1e6).toBeCloseTo(12.96, 9);
  });
});

const within = (min: number, max: number) => fc.double({ min, max, noNaN: true });

// By the definition of each term: ΔR/R = GF(T)·ε + GF_quoted·(ε_T(T) − ε_T(T0)).
test('an indicated strain made of strain and thermal output comes back as the strain', () => {
  fc.assert(
    fc.property(
      within(-3000, 3000),
      within(-40, 120),
      within(-40, 120),
      within(1.8, 2.3),
      fc.array(within(-3, 3), { minLength: 1, maxLength: 5 }),
      (microstrain, t, t0, indicatedAt, terms) => {
        const of = {
          ...gauge,
          thermalOutput: { coefficients: terms.map((a, k) => a * 1e-6 * 0.1 ** k), gaugeFactor: 2 },
        };
        const output = (at: number) =>
          terms.reduce((sum, a, k) => sum + a * 1e-6 * 0.1 ** k * at ** k, 0);
        const change =
          2.1 * (1 + 1e-4 * (t - 24)) * microstrain * 1e-6 + 2 * (output(t) - output(t0));
        const shown = strain(change / indicatedAt);
        const back = thermalCorrected(of, indicatedAt, celsius(t0), shown, celsius(t));
        expect(Math.abs(back * 1e6 - microstrain)).toBeLessThan(1e-8);
        const map = thermalMap(of, indicatedAt, celsius(t0), celsius(t));
        expect(Math.abs(apply(map, shown) - back)).toBeLessThan(1e-15);
      },
    ),
  );
});

test('sample by sample it is the same, in place, and not believed where the temperature is not', () => {
  const samples = Float64Array.of(850e-6, 850e-6, 0);
  const temperatures = Float64Array.of(60, NaN, 24);
  fillThermalCorrected(gauge, 2, celsius(24), samples, temperatures, samples);
  expect((samples[0] ?? NaN) * 1e6).toBeCloseTo(835.835943, 6);
  expect(samples[1]).toBeNaN();
  expect(samples[2]).toBe(0);
});

test('without a thermal output only the gauge factor changes with temperature', () => {
  const bare = { ...gauge, thermalOutput: null };
  expect(corrected(bare, 2.1, 1000)).toBeCloseTo(1000 / 1.0036, 9);
});

// Adjacent arms subtract, opposite arms add: Dally & Riley, Experimental Stress Analysis (value
// from memory).
test('gauges in one arm or in opposite arms show their thermal output, adjacent ones do not', () => {
  for (const circuit of ['quarter', 'half-opposite'] as const) {
    expect(thermalShare(circuit)).toBe(1);
  }
  const compensated = [
    ...(['half-poisson', 'half-bending', 'full-bending'] as const),
    ...(['full-bending-poisson', 'full-axial-poisson', 'full-torsion'] as const),
  ];
  for (const circuit of compensated) expect(thermalShare(circuit)).toBe(0);
});

test('a polynomial above degree 4, a coefficient that is no number and a factor of 0 are refused', () => {
  const fault = (coefficients: number[], gaugeFactor = 2) =>
    thermalFault({ coefficients, gaugeFactor });
  expect(fault([1, 2, 3, 4, 5])).toBeNull();
  expect(fault([1, 2, 3, 4, 5, 6])).toEqual({ expected: 'at most 5 coefficients', came: '6' });
  expect(fault([1, NaN])).toEqual({ expected: 'finite coefficients', came: 'NaN' });
  expect(fault([1], 0)).toEqual({ expected: 'a gauge factor above 0', came: '0' });
});
