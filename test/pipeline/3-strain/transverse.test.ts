import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { multiplyVector, type Triple } from '../../../shared/model/matrix3.ts';
import { microstrainToStrain } from '../../../shared/model/units.ts';
import {
  CALIBRATION_POISSON,
  transverseCorrected,
  transverseError,
  transverseMatrix,
  transversePair,
} from '../../../shared/pipeline/3-strain/transverse.ts';

// Kt·(εt/εa + ν0)/(1 − ν0·Kt), ν0 = 0.285: value from memory; rows computed, %.
describe('error of one gauge at εt/εa of −0.3, 0, +1, −3', () => {
  test.each([
    [0.01, [-0.015043, 0.285815, 1.288673, -2.72276]],
    [0.02, [-0.030172, 0.573268, 2.584733, -5.461128]],
    [-0.02, [0.02983, -0.566769, -2.555434, 5.399224]],
    [0.05, [-0.076084, 1.4456, 6.51788, -13.77124]],
  ])('Kt %d', (kt, expected) => {
    [-0.3, 0, 1, -3].forEach((over, i) => {
      expect(transverseError(kt, over) * 100).toBeCloseTo(expected[i] ?? NaN, 6);
      const indicated = microstrainToStrain(500 * (1 + (expected[i] ?? NaN) / 100));
      expect(transverseCorrected(indicated, kt, over) * 1e6).toBeCloseTo(500, 4);
    });
  });

  test('none in the field that the gauge factor was found in', () => {
    expect(transverseError(0.05, -CALIBRATION_POISSON)).toBe(0);
  });
});

// Computed from ΔR/R = Fa·(εa + Kt·εt), GF = Fa·(1 − ν0·Kt), Kt = 0.02, ν0 = 0.285.
describe('rosettes, Kt 2 %', () => {
  test.each([
    ['rectangular', [999.6982802, 359.04656542, -281.60514935], [1000, 350, -300]],
    ['delta', [679.37242281, 679.37242281, -281.60514935], [675, 675, -300]],
  ] as const)('%s: indicated %j is %j', (layout, indicated, expected) => {
    const right = multiplyVector(transverseMatrix(layout, [0.02, 0.02, 0.02]), indicated);
    right.forEach((value, i) => expect(value).toBeCloseTo(expected[i] ?? NaN, 6));
  });
});

const within = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const microstrains: fc.Arbitrary<Triple> = fc.tuple(
  within(-3000, 3000),
  within(-3000, 3000),
  within(-3000, 3000),
);
const sensitivity = within(-0.05, 0.05);

const expectClose = (came: readonly number[], expected: readonly number[]) =>
  came.forEach((value, i) => expect(Math.abs(value - (expected[i] ?? NaN))).toBeLessThan(1e-9));

// The closed forms for equal Kt: value from memory.
test('equal sensitivities: the closed forms of both rosettes and of the pair', () => {
  fc.assert(
    fc.property(microstrains, sensitivity, ([a, b, c], k) => {
      const scale = (1 - CALIBRATION_POISSON * k) / (1 - k ** 2);
      const own = (i: number, others: number) => scale * ((1 + k / 3) * i - (2 / 3) * k * others);
      expectClose(multiplyVector(transverseMatrix('delta', [k, k, k]), [a, b, c]), [
        own(a, b + c),
        own(b, a + c),
        own(c, a + b),
      ]);
      const ends = [scale * (a - k * c), scale * (c - k * a)] as const;
      expectClose(multiplyVector(transverseMatrix('rectangular', [k, k, k]), [a, b, c]), [
        ends[0],
        scale * (b - k * (a + c - b)),
        ends[1],
      ]);
      const pair = transversePair([microstrainToStrain(a), microstrainToStrain(c)], [k, k]);
      expectClose(
        pair.map((value) => value * 1e6),
        ends,
      );
    }),
  );
});

/** Mohr's circle at twice the angle: what a gauge at `degrees` of sensitivity `k` indicates. */
const indicated = (x: number, y: number, shear: number, degrees: number, k: number): number => {
  const double = (2 * degrees * Math.PI) / 180;
  const turn = ((x - y) / 2) * Math.cos(double) + (shear / 2) * Math.sin(double);
  const [along, across] = [(x + y) / 2 + turn, (x + y) / 2 - turn];
  return (along + k * across) / (1 - CALIBRATION_POISSON * k);
};

test('each gauge with a sensitivity of its own: what it indicates of any state comes back', () => {
  fc.assert(
    fc.property(
      microstrains,
      fc.tuple(sensitivity, sensitivity, sensitivity),
      fc.constantFrom('rectangular' as const, 'delta' as const),
      ([x, y, shear], kt, layout) => {
        const degrees = layout === 'delta' ? ([0, 60, 120] as const) : ([0, 45, 90] as const);
        const seen = (k: Triple): Triple => [
          indicated(x, y, shear, degrees[0], k[0]),
          indicated(x, y, shear, degrees[1], k[1]),
          indicated(x, y, shear, degrees[2], k[2]),
        ];
        expectClose(multiplyVector(transverseMatrix(layout, kt), seen(kt)), seen([0, 0, 0]));
        const [kx, ky] = [kt[0], kt[2]];
        const pair = transversePair(
          [
            microstrainToStrain(indicated(x, y, shear, 0, kx)),
            microstrainToStrain(indicated(x, y, shear, 90, ky)),
          ],
          [kx, ky],
        );
        expectClose(
          pair.map((value) => value * 1e6),
          [x, y],
        );
      },
    ),
  );
});
