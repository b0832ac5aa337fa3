import { describe, expect, test } from 'vitest';
import {
  inSteps,
  knowledgeFault,
  standardOf,
  type Knowledge,
} from '../../shared/uncertainty/knowledge.ts';
import { misalignmentError } from '../../shared/uncertainty/misalignment.ts';
import { readingsOf } from '../../shared/uncertainty/readings.ts';

describe('standard uncertainty by distribution, GUM (JCGM 100:2008) 4.3.7, 4.3.9, H.1.3.4, F.2.2.1', () => {
  test.each<[string, Knowledge, number]>([
    ['rectangular a/√3', { kind: 'rectangular', halfWidth: 3 }, Math.sqrt(3)],
    ['triangular a/√6', { kind: 'triangular', halfWidth: 6 }, Math.sqrt(6)],
    ['U-shaped a/√2', { kind: 'u-shaped', halfWidth: 2 }, Math.SQRT2],
    ['normal U/k', { kind: 'normal', expanded: 240e-6, k: 3 }, 80e-6],
    ['steps δ/√12', inSteps(1), 1 / Math.sqrt(12)],
    // GUM 4.3.9: a²(1 + β²)/6, β 0 a triangle and β 1 a rectangle.
    ['trapezoid β ½', { kind: 'trapezoidal', halfWidth: 2, topHalfWidth: 1 }, Math.sqrt(5 / 6)],
    ['trapezoid β 0', { kind: 'trapezoidal', halfWidth: 6, topHalfWidth: 0 }, Math.sqrt(6)],
    ['trapezoid β 1', { kind: 'trapezoidal', halfWidth: 3, topHalfWidth: 3 }, Math.sqrt(3)],
    ['mean of 4', { kind: 'readings', deviation: 3, readings: 10, averaged: 4 }, 1.5],
  ])('%s', (_name, known, expected) => {
    expect(standardOf(known).uncertainty).toBeCloseTo(expected, 14);
  });

  test('degrees of freedom: n − 1, ½·doubt⁻² (GUM G.4.2 example: a quarter in doubt is 8), else ∞', () => {
    const rectangular: Knowledge = { kind: 'rectangular', halfWidth: 1 };
    expect(standardOf(rectangular).degrees).toBe(Infinity);
    expect(standardOf({ ...rectangular, doubt: 0.25 }).degrees).toBeCloseTo(8, 12);
    const readings: Knowledge = { kind: 'readings', deviation: 1, readings: 20, averaged: 1 };
    expect(standardOf(readings).degrees).toBe(19);
  });
});

test.each<[Knowledge, string]>([
  [{ kind: 'rectangular', halfWidth: -1 }, 'halfWidth'],
  [{ kind: 'rectangular', halfWidth: NaN }, 'halfWidth'],
  [{ kind: 'triangular', halfWidth: Infinity }, 'halfWidth'],
  [{ kind: 'trapezoidal', halfWidth: 1, topHalfWidth: 2 }, 'topHalfWidth'],
  [{ kind: 'normal', expanded: 1, k: 0 }, 'k'],
  [{ kind: 'normal', expanded: -1, k: 2 }, 'expanded'],
  [{ kind: 'u-shaped', halfWidth: 1, doubt: 1 }, 'doubt'],
  [{ kind: 'readings', deviation: 1, readings: 1, averaged: 1 }, 'readings'],
  [{ kind: 'readings', deviation: 1, readings: 5, averaged: 0 }, 'averaged'],
  [{ kind: 'readings', deviation: NaN, readings: 5, averaged: 1 }, 'deviation'],
])('refuses %j by its %s', (known, field) => {
  expect(knowledgeFault(known)?.field).toBe(field);
});

test('takes what is sound', () => {
  expect(knowledgeFault({ kind: 'rectangular', halfWidth: 0 })).toBeNull();
  expect(knowledgeFault({ kind: 'normal', expanded: 1, k: 2, doubt: 0.1 })).toBeNull();
  expect(knowledgeFault({ kind: 'readings', deviation: 1, readings: 2, averaged: 1 })).toBeNull();
});

// GUM Table 1, 4.4.3: twenty temperatures, mean 100.145 °C, s 1.489, s/√n 0.333 (value from memory).
test('type A, GUM 4.4.3: mean, deviation and standard error of twenty temperatures', () => {
  const temperatures = [
    96.9, 98.18, 98.25, 98.61, 99.03, 99.49, 99.56, 99.74, 99.89, 100.07, 100.33, 100.42, 100.68,
    100.95, 101.11, 101.2, 101.57, 101.84, 102.36, 102.72,
  ];
  const readings = readingsOf([NaN, ...temperatures]);
  expect(readings.count).toBe(20);
  expect(readings.mean).toBeCloseTo(100.145, 3);
  expect(readings.deviation).toBeCloseTo(1.489, 3);
  expect(readings.standardError).toBeCloseTo(0.333, 3);
});

test('type A of one reading or none is not told', () => {
  expect(readingsOf([5])).toEqual({ count: 1, mean: 5, deviation: NaN, standardError: NaN });
  expect(readingsOf([NaN]).mean).toBeNaN();
});

// Mohr's circle at ν 0.3 (computed), Dally & Riley, Experimental Stress Analysis.
test.each([
  [1, -0.039596],
  [2, -0.158337],
  [3, -0.356077],
  [5, -0.987496],
  [10, -3.91998],
])('a gauge %d° off a uniaxial stress reads %d %% less', (degrees, percent) => {
  expect(misalignmentError((degrees * Math.PI) / 180, 0.3) * 100).toBeCloseTo(percent, 6);
});
