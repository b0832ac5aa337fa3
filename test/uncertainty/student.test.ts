import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { logBeta, regularisedBeta } from '../../shared/uncertainty/incomplete-beta.ts';
import { coverageFactor, studentCoverage } from '../../shared/uncertainty/student.ts';
import { even } from './wiring.ts';

// GUM (JCGM 100:2008) Table G.2 (value from memory): t_p(ν) for p of 68.27, 90, 95, 95.45, 99 and
// 99.73 %. By the table's footnote the first, fourth and last are what k = 1, 2, 3 of a normal
// distribution encompass.
const TABLE = `
  1 1.84 6.31 12.71 13.97 63.66 235.80
  2 1.32 2.92 4.30 4.53 9.92 19.21
  3 1.20 2.35 3.18 3.31 5.84 9.22
  4 1.14 2.13 2.78 2.87 4.60 6.62
  5 1.11 2.02 2.57 2.65 4.03 5.51
  6 1.09 1.94 2.45 2.52 3.71 4.90
  7 1.08 1.89 2.36 2.43 3.50 4.53
  8 1.07 1.86 2.31 2.37 3.36 4.28
  9 1.06 1.83 2.26 2.32 3.25 4.09
  10 1.05 1.81 2.23 2.28 3.17 3.96
  11 1.05 1.80 2.20 2.25 3.11 3.85
  12 1.04 1.78 2.18 2.23 3.05 3.76
  13 1.04 1.77 2.16 2.21 3.01 3.69
  14 1.04 1.76 2.14 2.20 2.98 3.64
  15 1.03 1.75 2.13 2.18 2.95 3.59
  16 1.03 1.75 2.12 2.17 2.92 3.54
  17 1.03 1.74 2.11 2.16 2.90 3.51
  18 1.03 1.73 2.10 2.15 2.88 3.48
  19 1.03 1.73 2.09 2.14 2.86 3.45
  20 1.03 1.72 2.09 2.13 2.85 3.42
  25 1.02 1.71 2.06 2.11 2.79 3.33
  30 1.02 1.70 2.04 2.09 2.75 3.27
  35 1.01 1.69 2.03 2.07 2.72 3.23
  40 1.01 1.68 2.02 2.06 2.70 3.20
  45 1.01 1.68 2.01 2.06 2.69 3.18
  50 1.01 1.68 2.01 2.05 2.68 3.16
  100 1.005 1.660 1.984 2.025 2.626 3.077
  Infinity 1.000 1.645 1.960 2.000 2.576 3.000`;
const WITHIN = [1, 2, 3].map((k) => studentCoverage(k, Infinity));
const COVERAGES = [WITHIN[0], 0.9, 0.95, WITHIN[1], 0.99, WITHIN[2]].map((p) => p ?? NaN);

test('k = 1, 2, 3 encompass 68.27, 95.45 and 99.73 % of a normal distribution', () => {
  expect(WITHIN.map((p) => (100 * p).toFixed(2))).toEqual(['68.27', '95.45', '99.73']);
});

describe('GUM Table G.2', () => {
  const rows = TABLE.trim()
    .split('\n')
    .map((row) => row.trim().split(' '));
  test.each(rows)('ν = %s: %s %s %s %s %s %s', (degrees, ...printed) => {
    const factors = printed.map((figure, i) =>
      coverageFactor(COVERAGES[i] ?? NaN, Number(degrees)).toFixed(figure.split('.')[1]?.length),
    );
    expect(factors).toEqual(printed);
  });
});

// Five digits (computed): the same table at p = 0.95 and 0.9545 exactly.
test.each([
  [1, 12.706, 13.968],
  [2, 4.3027, 4.5266],
  [3, 3.1824, 3.3068],
  [4, 2.7764, 2.8693],
  [5, 2.5706, 2.6487],
  [8, 2.306, 2.3664],
  [10, 2.2281, 2.2837],
  [20, 2.086, 2.133],
  [50, 2.0086, 2.0513],
])('ν = %d: k95 %d, k95.45 %d', (degrees, k95, k9545) => {
  expect(coverageFactor(0.95, degrees)).toBeCloseTo(k95, degrees === 1 ? 3 : 4);
  expect(coverageFactor(0.9545, degrees)).toBeCloseTo(k9545, degrees === 1 ? 3 : 4);
});

describe('closed forms of Student’s distribution (Abramowitz & Stegun 26.7.3–4, value from memory)', () => {
  const k = fc.double({ min: 1e-6, max: 1e4, noNaN: true });

  test('one degree of freedom: 2/π·atan k', () => {
    fc.assert(
      fc.property(k, (at) => {
        expect(studentCoverage(at, 1) / ((2 / Math.PI) * Math.atan(at))).toBeCloseTo(1, 13);
      }),
    );
  });

  test('two: k/√(2 + k²); four: (1 + 2/(4+k²))·k/√(4+k²)', () => {
    fc.assert(
      fc.property(k, (at) => {
        expect(studentCoverage(at, 2) / (at / Math.hypot(Math.SQRT2, at))).toBeCloseTo(1, 13);
        const four = (1 + 2 / (4 + at * at)) * (at / Math.hypot(2, at));
        expect(studentCoverage(at, 4) / four).toBeCloseTo(1, 13);
      }),
    );
  });

  test('very many are as good as normal, to 1/ν', () => {
    for (const at of [0.1, 1, 2, 5, 30]) {
      expect(studentCoverage(at, 1e9)).toBeCloseTo(studentCoverage(at, Infinity), 9);
      expect(studentCoverage(at, 1e12)).toBeCloseTo(studentCoverage(at, Infinity), 12);
    }
  });
});

test('the factor is the inverse of the coverage, and falls as degrees of freedom grow', () => {
  const share = fc.double({ min: 1e-3, max: 0.9999, noNaN: true });
  const degrees = fc.double({ min: 0.5, max: 1e7, noNaN: true });
  fc.assert(
    fc.property(share, degrees, (p, nu) => {
      const k = coverageFactor(p, nu);
      expect(studentCoverage(k, nu)).toBeCloseTo(p, 12);
      expect(coverageFactor(p, 1.5 * nu)).toBeLessThan(k);
      expect(coverageFactor(p, Infinity)).toBeLessThan(k);
    }),
  );
});

test('the incomplete beta function keeps its symmetry, NIST DLMF 8.17.4', () => {
  const parameter = even(0.1, 80);
  fc.assert(
    fc.property(
      fc.double({ min: 0.01, max: 0.99, noNaN: true }),
      parameter,
      parameter,
      (x, a, b) => {
        expect(regularisedBeta(x, a, b) + regularisedBeta(1 - x, b, a)).toBeCloseTo(1, 11);
      },
    ),
  );
  expect(regularisedBeta(0, 2, 3)).toBe(0);
  // B(½, ½) = π and B(2, 3) = 1/12, B(1, n) = 1/n.
  expect(logBeta(0.5, 0.5)).toBeCloseTo(Math.log(Math.PI), 14);
  expect(logBeta(2, 3)).toBeCloseTo(-Math.log(12), 13);
  expect(logBeta(1, 1e8) / -Math.log(1e8)).toBeCloseTo(1, 14);
});

test('no factor for what is no share or no degrees of freedom', () => {
  for (const [p, nu] of [
    [0, 5],
    [1, 5],
    [0.95, 0],
    [0.95, NaN],
    [NaN, 5],
  ] as const) {
    expect(coverageFactor(p, nu)).toBeNaN();
  }
});
