import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { fitLine, lineAt, type Line } from '../../shared/series/line.ts';

const fitted = (x: readonly number[], y: readonly number[]): Line => {
  const line = fitLine(x, y);
  if (line === null) throw new Error('no line');
  return line;
};

// NIST StRD, linear regression, "Norris" (value from memory), pairs of y and x.
const NORRIS =
  '0.1 0.2; 338.8 337.4; 118.1 118.2; 888.0 884.6; 9.2 10.1; 228.1 226.5; 668.5 666.3; ' +
  '998.5 996.3; 449.1 448.6; 778.9 777.0; 559.2 558.2; 0.3 0.4; 0.1 0.6; 778.1 775.5; ' +
  '668.8 666.9; 339.3 338.0; 448.9 447.5; 10.8 11.6; 557.7 556.0; 228.3 228.1; 998.0 995.8; ' +
  '888.8 887.6; 119.6 120.2; 0.3 0.3; 0.6 0.3; 557.6 556.8; 339.3 339.1; 888.0 887.2; ' +
  '998.5 999.0; 778.9 779.0; 10.2 11.1; 117.6 118.3; 228.9 229.2; 668.4 669.1; 449.2 448.9; ' +
  '0.2 0.5';

describe('NIST StRD Norris, certified values', () => {
  const pairs = NORRIS.split('; ').map((pair) => pair.split(' ').map(Number));
  const x = pairs.map(([, xi]) => xi ?? NaN);
  const y = pairs.map(([yi]) => yi ?? NaN);

  test('intercept, slope, residual deviation and R² to 11 digits', () => {
    const line = fitted(x, y);
    expect(line.count).toBe(36);
    expect(line.intercept).toBeCloseTo(-0.262323073774029, 11);
    expect(line.slope).toBeCloseTo(1.00211681802045, 13);
    expect(line.residualDeviation).toBeCloseTo(0.884796396144373, 12);
    expect(line.determination).toBeCloseTo(0.999993745883712, 14);
  });

  test('certified standard errors, 0.232818234301152 and 0.429796848199937e-3', () => {
    const line = fitted(x, y);
    expect(line.interceptError).toBeCloseTo(0.232818234301152, 12);
    expect(line.slopeError).toBeCloseTo(0.429796848199937e-3, 14);
  });

  test('shifted to times since 1970 the slope and its error keep eight digits', () => {
    const shifted = fitted(
      x.map((xi) => xi + 1.7e9),
      y,
    );
    expect(shifted.slope).toBeCloseTo(1.00211681802045, 9);
    expect(shifted.slopeError).toBeCloseTo(0.429796848199937e-3, 11);
  });
});

// Loads rising in six steps (computed in exact fractions).
test('a load cell, 0 to 50: slope 10.09428571, residual deviation 0.69693205', () => {
  const loads = [0, 10, 20, 30, 40, 50];
  const rising = [0, 101, 203, 302, 404, 505];
  const line = fitted(loads, rising);
  expect(line.slope).toBeCloseTo(10.09428571, 8);
  expect(line.intercept).toBeCloseTo(0.14285714, 8);
  expect(line.residualDeviation).toBeCloseTo(0.69693205, 8);
  expect(line.determination).toBeCloseTo(0.9999891045, 10);
  const residuals = rising.map((reading, i) => reading - lineAt(line, loads[i] ?? NaN));
  [-0.142857, -0.085714, 0.971429, -0.971429, 0.085714, 0.142857].forEach((expected, i) => {
    expect(residuals[i]).toBeCloseTo(expected, 6);
  });
});

// GUM (JCGM 100:2008) H.3, calibration of a thermometer, Table H.6 (value from memory).
test('GUM H.3: correction of a thermometer against its reading less 20 °C', () => {
  const x = [1.521, 2.012, 2.512, 3.003, 3.507, 3.999, 4.513, 5.002, 5.503, 6.01, 6.511];
  const y = [171, 169, 166, 159, 164, 165, 156, 157, 159, 161, 160].map((b) => -b / 1000);
  const line = fitted(x, y);
  expect(line.intercept).toBeCloseTo(-0.1712, 4);
  expect(line.interceptError).toBeCloseTo(0.0029, 4);
  expect(line.slope).toBeCloseTo(0.00218, 5);
  expect(line.slopeError).toBeCloseTo(0.00067, 5);
  expect(line.residualDeviation).toBeCloseTo(0.0035, 4);
});

describe('any line', () => {
  const figure = fc.integer({ min: -1e6, max: 1e6 }).map((n) => n / 1e3);

  test('points on a line come back to it, and missing ones count for nothing', () => {
    fc.assert(
      fc.property(figure, figure, fc.integer({ min: 3, max: 40 }), (slope, intercept, count) => {
        const x = Array.from({ length: count }, (_, i) => i * 0.1);
        const y = x.map((xi) => intercept + slope * xi);
        const line = fitted([...x, 3, NaN], [...y, NaN, 3]);
        expect(line.count).toBe(count);
        expect(line.slope).toBeCloseTo(slope, 7);
        expect(line.intercept).toBeCloseTo(intercept, 7);
        expect(line.residualDeviation).toBeLessThan(1e-9);
      }),
    );
  });

  test('the residuals of the line are orthogonal to one and to x', () => {
    fc.assert(
      fc.property(fc.array(figure, { minLength: 3, maxLength: 30 }), (y) => {
        const x = y.map((_, i) => i);
        const line = fitted(x, y);
        const residuals = y.map((yi, i) => yi - lineAt(line, i));
        expect(residuals.reduce((sum, r) => sum + r, 0)).toBeCloseTo(0, 7);
        expect(residuals.reduce((sum, r, i) => sum + r * i, 0)).toBeCloseTo(0, 6);
      }),
    );
  });
});

test('no line through one place; no deviation with two points', () => {
  expect(fitLine([2, 2, 2], [1, 2, 3])).toBeNull();
  expect(fitLine([1], [1])).toBeNull();
  expect(fitLine([], [])).toBeNull();
  const two = fitted([0, 2], [1, 5]);
  expect([two.slope, two.intercept, two.residualDeviation]).toEqual([2, 1, NaN]);
});
