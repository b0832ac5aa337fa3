import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { newton, newtonMetre } from '../../../shared/model/units.ts';
import {
  corners,
  cornerStresses,
  fillExtremeStress,
} from '../../../shared/pipeline/4-stress/extreme-fibre.ts';
import {
  fibreStrain,
  fibreStress,
  type SectionForces,
  type SectionPoint,
} from '../../../shared/pipeline/4-stress/fibre.ts';
import {
  fillResidualDeviation,
  fitPlane,
  residualDeviation,
  residualsOf,
} from '../../../shared/pipeline/4-stress/plane-fit.ts';
import {
  fibreWeights,
  fillSectionForce,
  forceCovariance,
  normalInverse,
  planSection,
  SECTION_FORCES,
  sectionForces,
} from '../../../shared/pipeline/4-stress/section-forces.ts';
import { fillWeighted } from '../../../shared/pipeline/4-stress/weighted.ts';
import { at, E, ipe300, places, planeOf, TIPS } from './ipe300.ts';

const section = ipe300();
const plan = (points: readonly SectionPoint[]) => {
  const planned = planSection(points, section, E);
  if (!planned.ok) throw new Error(planned.refusal.code);
  return planned.value;
};
const forces = (kilonewton: number, my: number, mz: number): SectionForces => ({
  axial: newton(kilonewton * 1e3),
  aboutY: newtonMetre(my * 1e3),
  aboutZ: newtonMetre(mz * 1e3),
});
const inKilo = ({ axial, aboutY, aboutZ }: SectionForces) => [
  axial / 1e3,
  aboutY / 1e3,
  aboutZ / 1e3,
];
const expectForces = (came: SectionForces, expected: readonly number[], digits: number) =>
  inKilo(came).forEach((value, i) => expect(value).toBeCloseTo(expected[i] ?? NaN, digits));
const strains = (...microstrain: number[]) => microstrain.map((value) => value * 1e-6);

// IPE 300, N +100 kN, My +40 kNm, Mz +2 kNm, axes of EN 1993-1-1 §1.7; all computed, formula of
// bending with axial load: Gere, Mechanics of Materials.
const SHOWN = [312.111397, 548.716809, -371.733803, -135.128391] as const;

describe('four flange tips of an IPE 300 under N 100 kN, My 40 kNm, Mz 2 kNm', () => {
  test.each(TIPS.map((point, i) => [point, SHOWN[i] ?? NaN] as const))(
    '%j: %d µε',
    (point, due) => {
      expect(fibreStrain(forces(100, 40, 2), point, section, E) * 1e6).toBeCloseTo(due, 5);
    },
  );

  test('strains come back as the forces, and as a plane of 88.491503 µε', () => {
    expectForces(sectionForces(plan(TIPS), strains(...SHOWN)), [100, 40, 2], 6);
    const { fit } = plan(TIPS);
    const parameters = fit.rows.map((row) =>
      row.reduce((sum, weight, i) => sum + weight * (SHOWN[i] ?? NaN), 0),
    );
    // µε, then µε/m: 2.279484 and 1.577369 µε/mm.
    expect(parameters[0]).toBeCloseTo(88.491503, 6);
    expect(parameters[1]).toBeCloseTo(2279.484, 3);
    expect(parameters[2]).toBeCloseTo(1577.369, 3);
  });

  test('errors +5, −3, +2, −4 µε: My 40.116986, Mz 1.940830 kNm, residuals ±0.5, s 1.0 µε', () => {
    const errors = [5, -3, 2, -4];
    const shown = strains(...SHOWN.map((value, i) => value + (errors[i] ?? NaN)));
    expectForces(sectionForces(plan(TIPS), shown), [100, 40.116986, 1.94083], 6);
    const { fit } = plan(TIPS);
    const residuals = residualsOf(fit, shown);
    const due = [0.5, -0.5, -0.5, 0.5];
    residuals.forEach((residual, i) => expect(residual * 1e6).toBeCloseTo(due[i] ?? NaN, 6));
    expect(residualDeviation(fit, residuals) * 1e6).toBeCloseTo(1, 6);
  });

  test('(XᵀX)⁻¹: 0.25 and, in 1/mm², 1.1111e-5, 4.4444e-5; covariance with the stiffnesses', () => {
    const inverse = normalInverse(plan(TIPS).fit);
    expect(inverse[0][0]).toBeCloseTo(0.25, 12);
    expect(inverse[1][1] * 1e-6).toBeCloseTo(1.1111e-5, 9);
    expect(inverse[2][2] * 1e-6).toBeCloseTo(4.4444e-5, 9);
    expect(
      Math.abs(inverse[0][1]) + Math.abs(inverse[0][2]) + Math.abs(inverse[1][2]),
    ).toBeLessThan(1e-12);
    // 1 µε a gauge: u(N) = EA·√0.25 µε, u(My) = EIy·√11.111 µε/m.
    const covariance = forceCovariance(plan(TIPS), 1e-6);
    const [ea, eiy] = [210e9 * 5381.2e-6, 210e9 * 8356.11e-8];
    expect(Math.sqrt(covariance[0][0])).toBeCloseTo(ea * 0.5e-6, 6);
    expect(Math.sqrt(covariance[1][1])).toBeCloseTo((eiy * 1e-6) / 0.3, 6);
  });

  test('three gauges, one of them between the tips, suffice and leave no residual', () => {
    const three = plan([at(0, 150), at(75, -150), at(-75, -150)]);
    const shown = strains(430.414103, -371.733803, -135.128391);
    expectForces(sectionForces(three, shown), [100, 40, 2], 5);
    expect(residualDeviation(three.fit, residualsOf(three.fit, shown))).toBeNaN();
  });

  test('the pattern +, −, −, + is none of N, My, Mz: all of it is residual', () => {
    const pattern = strains(10, -10, -10, 10);
    expectForces(sectionForces(plan(TIPS), pattern), [0, 0, 0], 9);
    residualsOf(plan(TIPS).fit, pattern).forEach((residual, i) =>
      expect(residual).toBeCloseTo(pattern[i] ?? NaN, 15),
    );
  });
});

describe('gauges that cannot tell N, My and Mz apart are refused', () => {
  test.each([
    ['two', [at(75, 150), at(-75, 150)], 'too-few-gauges', '2'],
    ['all on one flange', TIPS.slice(0, 2).concat(at(0, 150)), 'gauges-on-a-line', '3'],
    ['on a slope', [at(0, 0), at(10, 20), at(20, 40), at(-30, -60)], 'gauges-on-a-line', '4'],
    ['at one place', [at(7, 7), at(7, 7), at(7, 7)], 'gauges-on-a-line', '3'],
    ['nowhere', [at(NaN, 0), at(0, 1), at(1, 0)], 'gauge-nowhere', 'y NaN'],
  ])('%s', (_, points, code, came) => {
    const refused = planSection(points, section, E);
    expect(refused.ok).toBe(false);
    if (!refused.ok) {
      expect(refused.refusal.code).toBe(code);
      expect(refused.refusal.came).toContain(came);
    }
  });

  test('on a line whichever way it lies and however far off; a little off it they are accepted', () => {
    const within = (min: number, max: number) => fc.double({ min, max, noNaN: true });
    fc.assert(
      fc.property(
        fc.array(within(-100, 100), { minLength: 1, maxLength: 4 }),
        within(0, Math.PI),
        within(-1000, 1000),
        within(-1000, 1000),
        (between, angle, y, z) => {
          const on = (off: number) =>
            [-100, ...between, 100].map((s, i) =>
              at(
                y + s * Math.cos(angle) - (i === 1 ? off : 0) * Math.sin(angle),
                z + s * Math.sin(angle) + (i === 1 ? off : 0) * Math.cos(angle),
              ),
            );
          expect(fitPlane(on(0)).ok).toBe(false);
          expect(fitPlane(on(5)).ok).toBe(true);
        },
      ),
    );
  });
});

const within = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const anyForces = fc
  .tuple(within(-500, 500), within(-100, 100), within(-20, 20))
  .map(([n, my, mz]) => forces(n, my, mz));
test('any forces come back from the strains of any gauges that are not on a line', () => {
  fc.assert(
    fc.property(places(3, 8), anyForces, (points, given) => {
      const shown = points.map((point) => fibreStrain(given, point, section, E));
      const planned = plan(points);
      const came = inKilo(sectionForces(planned, shown));
      inKilo(given).forEach((due, i) =>
        expect(Math.abs((came[i] ?? NaN) - due)).toBeLessThan(1e-7),
      );
      for (const residual of residualsOf(planned.fit, shown)) {
        expect(Math.abs(residual)).toBeLessThan(1e-15);
      }
    }),
  );
});

// The defining property of least squares: residuals are orthogonal to each column of X.
test('whatever the strains, residuals have no resultant and no moment', () => {
  fc.assert(
    fc.property(
      places(3, 8).chain((points) =>
        fc.tuple(
          fc.constant(points),
          fc.array(within(-2000, 2000), { minLength: points.length, maxLength: points.length }),
        ),
      ),
      ([points, shown]) => {
        const residuals = residualsOf(planeOf(points), shown);
        const sum = (of: (point: SectionPoint) => number) =>
          residuals.reduce((total, e, i) => total + e * of(points[i] ?? at(NaN, NaN)), 0);
        expect(Math.abs(sum(() => 1))).toBeLessThan(1e-7);
        expect(Math.abs(sum(({ y }) => y))).toBeLessThan(1e-8);
        expect(Math.abs(sum(({ z }) => z))).toBeLessThan(1e-8);
      },
    ),
  );
});

test('sample by sample: forces, residual deviation and a fibre are those of each instant', () => {
  fc.assert(
    fc.property(
      fc.array(fc.tuple(within(-1e-3, 1e-3), within(-1e-3, 1e-3), within(-1e-3, 1e-3)), {
        minLength: 1,
        maxLength: 5,
      }),
      (instants) => {
        const planned = plan(TIPS);
        const rows = instants.map(([a, b, c]) => [a, b, c, 1e-4]);
        const gauges = TIPS.map((_, k) => Float64Array.from(rows, (row) => row[k] ?? NaN));
        const out = new Float64Array(rows.length);
        for (const force of SECTION_FORCES) {
          fillSectionForce(planned, force, gauges, out);
          rows.forEach((row, i) =>
            expect(out[i]).toBeCloseTo(sectionForces(planned, row)[force], 6),
          );
        }
        fillResidualDeviation(planned.fit, gauges, out);
        rows.forEach((row, i) => {
          const due = residualDeviation(planned.fit, residualsOf(planned.fit, row));
          expect(out[i]).toBeCloseTo(due, 15);
        });
        const point = at(40, -150);
        fillWeighted(fibreWeights(planned, point), gauges, out);
        rows.forEach((row, i) =>
          expect(out[i]).toBeCloseTo(fibreStress(sectionForces(planned, row), point, section), 4),
        );
      },
    ),
  );
});

test('with one gauge not believed at a sample nothing is said of that sample', () => {
  const gauges = TIPS.map((_, k) => Float64Array.of(1e-4, k === 2 ? NaN : 1e-4));
  const out = new Float64Array(2);
  fillSectionForce(plan(TIPS), 'aboutY', gauges, out);
  expect(out[0]).toBeCloseTo(0, 6);
  expect(out[1]).toBeNaN();
  fillResidualDeviation(plan(TIPS).fit, gauges, out);
  expect(out[1]).toBeNaN();
});

describe('extreme fibre', () => {
  // E·ε of the four tips (computed): they are the corners of the section.
  test('corners of the IPE 300: 65.543, 115.231, −78.064, −28.377 MPa', () => {
    expect(corners(section)).toEqual(TIPS);
    cornerStresses(forces(100, 40, 2), section).forEach(({ stress }, i) =>
      expect(stress / 1e6).toBeCloseTo((SHOWN[i] ?? NaN) * 0.21, 6),
    );
  });

  // M·c/I (any handbook; computed).
  test('40 kNm alone is 71.803746 MPa', () => {
    const [stress] = cornerStresses(forces(0, 40, 0), section);
    expect((stress?.stress ?? NaN) / 1e6).toBeCloseTo(71.803746, 5);
  });

  test('sample by sample the highest and the lowest of the corners, whatever the signs', () => {
    fc.assert(
      fc.property(anyForces, (given) => {
        const due = cornerStresses(given, section).map(({ stress }) => stress);
        const out = new Float64Array(1);
        const columns = [
          Float64Array.of(given.axial),
          Float64Array.of(given.aboutY),
          Float64Array.of(given.aboutZ),
        ] as const;
        fillExtremeStress('highest', section, ...columns, out);
        expect(out[0]).toBeCloseTo(Math.max(...due), 6);
        fillExtremeStress('lowest', section, ...columns, out);
        expect(out[0]).toBeCloseTo(Math.min(...due), 6);
      }),
    );
  });
});
