import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  combinedVariance,
  effectiveDegrees,
  factorTable,
  truncatedDegrees,
} from '../../shared/uncertainty/combined.ts';
import { standardOf } from '../../shared/uncertainty/knowledge.ts';
import { readingsOf } from '../../shared/uncertainty/readings.ts';
import { coverageFactor } from '../../shared/uncertainty/student.ts';
import { even } from './wiring.ts';

// GUM (JCGM 100:2008) H.1, calibration of an end gauge (value from memory), in nm.
describe('GUM H.1, end gauge of 50 mm', () => {
  const length = 50.000623e6;
  const rectangular = (halfWidth: number, doubt?: number) =>
    standardOf({ kind: 'rectangular', halfWidth, ...(doubt === undefined ? {} : { doubt }) });
  const standard = { uncertainty: 0.075e3 / 3, degrees: 18 };
  // Five readings of a comparator of s 13 nm (24), its random and systematic parts (5, 8).
  const difference = [
    { amount: 13 / Math.sqrt(5), degrees: 24 },
    { amount: 10 / coverageFactor(0.95, 5), degrees: 5 },
    { amount: 20 / 3, degrees: 8 },
  ];
  // δα within ±1e-6/K known to 10 %, θ −0.1 K; δθ within ±0.05 K known to 50 %, α 11.5e-6/K.
  const expansion = rectangular(1e-6, 0.1);
  const warmth = rectangular(0.05, 0.5);
  const comparator = {
    amount: Math.sqrt(combinedVariance(difference)),
    degrees: effectiveDegrees(difference),
  };
  const parts = [
    { amount: standard.uncertainty, degrees: standard.degrees },
    comparator,
    { amount: -length * -0.1 * expansion.uncertainty, degrees: expansion.degrees },
    { amount: -length * 11.5e-6 * warmth.uncertainty, degrees: warmth.degrees },
  ];

  test('comparator 9.7 nm with 25.6 degrees of freedom', () => {
    expect(difference.map(({ amount }) => amount.toFixed(1))).toEqual(['5.8', '3.9', '6.7']);
    expect(comparator.amount).toBeCloseTo(9.7, 1);
    expect(comparator.degrees).toBeCloseTo(25.6, 0);
  });

  test('25, 9.7, 2.9 and 16.6 nm come to 32 nm', () => {
    expect(parts.map(({ amount }) => Math.abs(amount).toFixed(1))).toEqual([
      '25.0',
      '9.7',
      '2.9',
      '16.6',
    ]);
    expect(parts.map(({ degrees }) => Math.round(degrees))).toEqual([18, 26, 50, 2]);
    expect(Math.sqrt(combinedVariance(parts)).toFixed(0)).toBe('32');
  });

  test('16 degrees of freedom, k99 2.92, U99 93 nm', () => {
    const counted = truncatedDegrees(effectiveDegrees(parts));
    expect(counted).toBe(16);
    const k = factorTable(0.99)(effectiveDegrees(parts));
    expect(k).toBeCloseTo(2.92, 2);
    // The GUM rounds u_c to 32 nm first.
    expect(Math.round(k * Math.round(Math.sqrt(combinedVariance(parts))))).toBe(93);
  });
});

// GUM H.2, resistance, reactance and impedance read at once, Tables H.2 to H.4 (value from memory).
describe('GUM H.2, correlated inputs', () => {
  const volts = [5.007, 4.994, 5.005, 4.99, 4.999];
  const amperes = [19.663, 19.639, 19.64, 19.685, 19.678].map((mA) => mA / 1000);
  const angles = [1.0456, 1.0438, 1.0468, 1.0428, 1.0433];
  const inputs = [volts, amperes, angles].map((values) => ({ values, ...readingsOf(values) }));
  const correlation = (i: number, j: number) => {
    const [a, b] = [inputs[i], inputs[j]];
    if (!a || !b) throw new Error('no such input');
    const products = a.values.map((x, n) => (x - a.mean) * ((b.values[n] ?? NaN) - b.mean));
    const covariance = products.reduce((sum, p) => sum + p, 0) / (a.count - 1);
    return covariance / (a.deviation * b.deviation);
  };
  const [V, I, phi] = inputs.map(({ mean }) => mean) as [number, number, number];
  const uncertainty = (...sensitivities: number[]) =>
    Math.sqrt(
      combinedVariance(
        inputs.map(({ standardError, count }, i) => ({
          amount: (sensitivities[i] ?? NaN) * standardError,
          degrees: count - 1,
        })),
        correlation,
      ),
    );

  test('r(V,I) −0.36, r(V,φ) 0.86, r(I,φ) −0.65', () => {
    expect(correlation(0, 1)).toBeCloseTo(-0.36, 2);
    expect(correlation(0, 2)).toBeCloseTo(0.86, 2);
    expect(correlation(1, 2)).toBeCloseTo(-0.65, 2);
  });

  test('R 127.732 ± 0.071, X 219.847 ± 0.295, Z 254.260 ± 0.236 Ω', () => {
    const [R, X, Z] = [(V / I) * Math.cos(phi), (V / I) * Math.sin(phi), V / I];
    expect([R, X, Z].map((ohms) => ohms.toFixed(3))).toEqual(['127.732', '219.847', '254.260']);
    // Printed from rounded inputs: the last digit of 0.295 may be one off.
    expect(Math.abs(uncertainty(R / V, -R / I, -X) - 0.071)).toBeLessThan(0.001);
    expect(Math.abs(uncertainty(X / V, -X / I, R) - 0.295)).toBeLessThan(0.001);
    expect(Math.abs(uncertainty(Z / V, -Z / I, 0) - 0.236)).toBeLessThan(0.001);
  });
});

test('Welch–Satterthwaite, GUM G.4.1: 3 of 4 and 4 of ∞ degrees come to 30.864198', () => {
  const parts = [
    { amount: 3, degrees: 4 },
    { amount: -4, degrees: Infinity },
  ];
  expect(combinedVariance(parts)).toBe(25);
  expect(effectiveDegrees(parts)).toBeCloseTo(30.864198, 6);
});

describe('truncation, GUM G.6.4', () => {
  test.each([
    [16.7, 16],
    [16, 16],
    [15.999999999999998, 16],
    [999.9, 999],
    [1234, 1230],
    [98765.4, 98700],
    [0.4, 1],
    [Infinity, Infinity],
  ])('%d counts as %d', (degrees, counted) => {
    expect(truncatedDegrees(degrees)).toBe(counted);
  });

  test('k is never below that of the degrees of freedom as they are, nor much above', () => {
    const table = factorTable(0.95);
    fc.assert(
      fc.property(fc.double({ min: 1, max: 1e6, noNaN: true }), (degrees) => {
        const exact = coverageFactor(0.95, degrees);
        expect(table(degrees)).toBeGreaterThanOrEqual(exact * (1 - 1e-9));
        expect(table(degrees)).toBeLessThanOrEqual(
          coverageFactor(0.95, Math.max(1, degrees * 0.99 - 1)),
        );
      }),
    );
  });
});

describe('any inputs', () => {
  const part = fc.record({
    amount: even(-100, 100).filter((u) => u !== 0),
    degrees: fc.integer({ min: 1, max: 100 }),
  });
  const parts = fc.array(part, { minLength: 1, maxLength: 8 });

  test('ν_eff lies between the fewest degrees and the sum of all, GUM G.4.1', () => {
    fc.assert(
      fc.property(parts, (all) => {
        const degrees = all.map((each) => each.degrees);
        const effective = effectiveDegrees(all);
        expect(effective).toBeGreaterThanOrEqual(Math.min(...degrees) * (1 - 1e-9));
        expect(effective).toBeLessThanOrEqual(degrees.reduce((a, b) => a + b, 0) * (1 + 1e-9));
      }),
    );
  });

  test('fully correlated inputs add as they are, GUM 5.2.2 note 1; none makes it less than nothing', () => {
    fc.assert(
      fc.property(parts, (all) => {
        const linear = all.reduce((sum, { amount }) => sum + amount, 0);
        const together = combinedVariance(all, () => 1);
        expect(together).toBeGreaterThanOrEqual(0);
        expect(together).toBeCloseTo(linear ** 2, 6);
        expect(combinedVariance(all, () => 0)).toBeCloseTo(combinedVariance(all), 9);
      }),
    );
  });

  test('nothing uncertain: no variance, certain bounds', () => {
    expect(combinedVariance([])).toBe(0);
    expect(effectiveDegrees([])).toBe(Infinity);
  });
});
