import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { microstrainToStrain, newton, newtonMetre } from '../../../shared/model/units.ts';
import { fibreStrain, type SectionPoint } from '../../../shared/pipeline/4-stress/fibre.ts';
import {
  judgeSection,
  mostSuspect,
  watchSection,
} from '../../../shared/pipeline/4-stress/suspect-gauge.ts';
import { normalInverse } from '../../../shared/pipeline/4-stress/section-forces.ts';
import { at, E, ipe300, isTelling, places, planeOf, TIPS } from './ipe300.ts';

const ONE_MICROSTRAIN = microstrainToStrain(1);
const SIX = [...TIPS, at(75, 0), at(0, -150)];

/** Strains under forces, with something added, µε, at one gauge. */
const shown = (points: readonly SectionPoint[], gauge = 0, error = 0): number[] => {
  const forces = {
    ...{ axial: newton(100e3), aboutY: newtonMetre(40e3), aboutZ: newtonMetre(2e3) },
  };
  return points.map(
    (point, i) => fibreStrain(forces, point, ipe300(), E) + (i === gauge ? error * 1e-6 : 0),
  );
};
const judge = (points: readonly SectionPoint[], strains: readonly number[]) =>
  judgeSection(watchSection(planeOf(points)), strains, ONE_MICROSTRAIN);

test('three gauges fit any plane and say nothing of each other', () => {
  const three = [at(0, 150), at(75, -150), at(-75, -150)];
  const judged = judge(three, [1e-3, -2e-3, 5e-4]);
  expect(judged.verdict).toEqual({ kind: 'unchecked' });
  expect(judged.deviation).toBeNull();
  expect(judged.gauges.map(({ studentized }) => studentized)).toEqual([null, null, null]);
});

describe('four flange tips', () => {
  test('agree within what a gauge is known to', () => {
    expect(judge(TIPS, shown(TIPS, 1, 3)).verdict).toEqual({ kind: 'agree' });
  });

  // The residual of +, −, −, + is orthogonal to N, My, Mz (computed); with one degree of freedom
  // all studentized residuals are of one size: Cook & Weisberg (1982), ch. 2.
  test('one off by 40 µε: residuals of 10 µε +, −, −, +, and none can be named', () => {
    const judged = judge(TIPS, shown(TIPS, 0, 40));
    const due = [10, -10, -10, 10];
    judged.gauges.forEach(({ residual, studentized, error, externallyStudentized }, i) => {
      const sign = (due[i] ?? NaN) / 10;
      expect(residual * 1e6).toBeCloseTo(due[i] ?? NaN, 9);
      expect(studentized).toBeCloseTo(20 * sign, 9);
      expect((error ?? NaN) * 1e6).toBeCloseTo(40 * sign, 9);
      expect(externallyStudentized).toBeNull();
    });
    expect(judged.verdict).toEqual({ kind: 'undecided', suspects: [0, 1, 2, 3] });
    expect((judged.deviation ?? NaN) * 1e6).toBeCloseTo(20, 9);
    expect(judged.warpingShare).toBeCloseTo(1, 12);
  });

  test('warping and one wrong gauge look alike', () => {
    const warped = shown(TIPS).map((value, i) => value + ([1, -1, -1, 1][i] ?? NaN) * 10e-6);
    const [one, other] = [judge(TIPS, warped), judge(TIPS, shown(TIPS, 0, 40))];
    expect(one.verdict).toEqual(other.verdict);
    one.gauges.forEach(({ residual }, i) =>
      expect(residual).toBeCloseTo(other.gauges[i]?.residual ?? NaN, 14),
    );
  });

  test.each([0, 1, 2, 3])('what is expected of them names gauge %d', (gauge) => {
    const strains = shown(TIPS, gauge, 40);
    const judged = judge(TIPS, strains);
    const expected = shown(TIPS).map((value) => value * 1.01);
    expect(mostSuspect(judged, [0, 1, 2, 3], strains, expected)).toBe(gauge);
  });

  test('no gauge is named where what is expected is as far off as they are', () => {
    const strains = shown(TIPS, 0, 40);
    const expected = shown(TIPS).map((value) => value * 1.5);
    expect(mostSuspect(judge(TIPS, strains), [0, 1, 2, 3], strains, expected)).toBeNull();
    expect(mostSuspect(judge(TIPS, strains), [], strains, expected)).toBeNull();
  });
});

// Leave-one-out: Cook & Weisberg, Residuals and Influence in Regression (1982), ch. 2; the critical
// 3.29: Baarda's data snooping (value from memory).
describe('more than four', () => {
  test.each([0, 1, 2, 3, 4, 5])('of six the one off by 40 µε is named: gauge %d', (gauge) => {
    const judged = judge(SIX, shown(SIX, gauge, 40));
    expect(judged.verdict).toEqual({ kind: 'one', gauge });
    expect((judged.gauges[gauge]?.error ?? NaN) * 1e6).toBeCloseTo(40, 8);
  });

  test('of five with the fifth at the centroid two stay in doubt: it lies on their diagonal', () => {
    const five = [...TIPS, at(0, 0)];
    expect(judge(five, shown(five, 0, 40)).verdict).toEqual({
      kind: 'undecided',
      suspects: [0, 3],
    });
  });

  test('of five with the fifth off the diagonals the one is named', () => {
    const five = [...TIPS, at(20, 120)];
    expect(judge(five, shown(five, 2, 60)).verdict).toEqual({ kind: 'one', gauge: 2 });
  });

  test('two wrong, and no single one explains it', () => {
    const strains = shown(SIX, 0, 60).map((value, i) => value + (i === 4 ? 90e-6 : 0));
    expect(judge(SIX, strains).verdict).toEqual({ kind: 'undecided', suspects: [] });
  });

  test('warping is told from one wrong gauge by its pattern', () => {
    const warped = shown(SIX).map(
      (value, i) => value + (SIX[i] ? SIX[i].y * SIX[i].z * 2e-3 : NaN),
    );
    expect(judge(SIX, warped).warpingShare).toBeCloseTo(1, 9);
    expect(judge(SIX, shown(SIX, 4, 40)).warpingShare).toBeLessThan(0.5);
  });

  test('a gauge without which the others lie on a line is never judged', () => {
    const points = [at(0, 150), at(0, 0), at(0, -150), at(75, 0)];
    const judged = judge(points, shown(points, 3, 500));
    expect(judged.verdict).toEqual({ kind: 'agree' });
    expect(judged.gauges[3]?.studentized).toBeNull();
    expect(judge(points, shown(points, 1, 500)).verdict).toEqual({
      kind: 'undecided',
      suspects: [0, 1, 2],
    });
  });
});

// The externally studentized residual is the error of the prediction from the other gauges over its
// own standard deviation, s·√(1 + x(XᵀX)⁻¹xᵀ): Cook & Weisberg (1982), ch. 2.
test('externally studentized is by how much the plane of the others misses', () => {
  fc.assert(
    fc.property(
      places(5, 7).chain((points) =>
        fc.tuple(
          fc.constant(points),
          fc.array(fc.integer({ min: -500, max: 500 }), {
            minLength: points.length,
            maxLength: points.length,
          }),
        ),
      ),
      ([points, microstrains]) => {
        const watch = watchSection(planeOf(points));
        const strains = microstrains.map((value) => value * 1e-6);
        const rest = watch.without[0];
        const gauge = judgeSection(watch, strains, ONE_MICROSTRAIN).gauges[0];
        const point = points[0];
        fc.pre(!!rest && isTelling(rest.points));
        fc.pre(typeof gauge?.externallyStudentized === 'number');
        if (!rest || !point) return;
        const others = strains.slice(1);
        const [e0, ky, kz] = rest.rows.map((row) =>
          row.reduce((sum, weight, i) => sum + weight * (others[i] ?? NaN), 0),
        );
        const plane = ({ y, z }: SectionPoint) => (e0 ?? NaN) + (ky ?? NaN) * z - (kz ?? NaN) * y;
        const missed = (strains[0] ?? NaN) - plane(point);
        fc.pre(Math.abs(missed) > 1e-7);
        expect(missed / (gauge?.error ?? NaN)).toBeCloseTo(1, 5);
        const spread = Math.sqrt(
          others.reduce((sum, e, i) => sum + (e - plane(points[i + 1] ?? point)) ** 2, 0) /
            (others.length - 3),
        );
        const x = [1, point.z, -point.y];
        const inverse = normalInverse(rest);
        const reach = x.reduce(
          (sum, xi, i) =>
            sum + x.reduce((part, xj, j) => part + xi * (inverse[i]?.[j] ?? NaN) * xj, 0),
          0,
        );
        const due = missed / (spread * Math.sqrt(1 + reach));
        fc.pre(Math.abs(due) < 1e3);
        expect((gauge?.externallyStudentized ?? NaN) / due).toBeCloseTo(1, 5);
      },
    ),
  );
});
