import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  ROSETTE_STRAINS,
  ROSETTE_STRESSES,
  type RosetteLayout,
} from '../../../shared/model/rosette.ts';
import type { Material } from '../../../shared/model/site.ts';
import {
  gigapascalToPascal,
  megapascalToPascal,
  microstrainToStrain,
  radianToDegree,
} from '../../../shared/model/units.ts';
import { transverseMatrix } from '../../../shared/pipeline/3-strain/transverse.ts';
import {
  fillRosette,
  planRosette,
  rosetteState,
  type RosettePlan,
} from '../../../shared/pipeline/4-stress/rosette.ts';

type Three = readonly [number, number, number];

const steel = (gigapascal: number, poisson: number): Material => ({
  ...{ designation: 'S275', source: 'test', expansion: 12e-6, poisson },
  ...{ youngsModulus: gigapascalToPascal(gigapascal), yieldStrength: megapascalToPascal(275) },
});

const state = (plan: RosettePlan, [a, b, c]: Three) =>
  rosetteState(plan, microstrainToStrain(a), microstrainToStrain(b), microstrainToStrain(c));

/** In µε, degrees and MPa. */
const shown = (layout: RosetteLayout, gauges: Three, material = steel(210, 0.3)) => {
  const { strains, stresses, angle } = state(planRosette(layout, material, null), gauges);
  return {
    first: strains['principal-strain-1'] * 1e6,
    second: strains['principal-strain-2'] * 1e6,
    third: strains['principal-strain-3'] * 1e6,
    shear: strains['shear-strain-in-plane'] * 1e6,
    absoluteShear: strains['shear-strain-absolute'] * 1e6,
    angle: angle === null ? null : radianToDegree(angle),
    stress1: stresses['principal-stress-1'] / 1e6,
    stress2: stresses['principal-stress-2'] / 1e6,
    vonMises: stresses['equivalent-stress'] / 1e6,
    shearStress: stresses['shear-stress-in-plane'] / 1e6,
    absoluteShearStress: stresses['shear-stress-absolute'] / 1e6,
  };
};

const expectNear = (came: readonly (number | null)[], expected: readonly (number | null)[]) =>
  came.forEach((value, i) => {
    const due = expected[i] ?? null;
    if (value === null || due === null) expect(value).toBe(due);
    else expect(value).toBeCloseTo(due, 5);
  });

// ASTM E1561 §4.2, §4.3 (equations from memory); inputs and answers of the books from memory; all
// decimals computed.
describe('textbook rosettes', () => {
  test('Hibbeler, Mechanics of Materials: 60° rosette 60/135/264 µε, E 200 GPa', () => {
    const came = shown('delta', [60, 135, 264], steel(200, 0.3));
    // The book: 272, 33.9, 2-axis at +19.3°, 62.0 and 25.4 MPa.
    expectNear(
      [came.first, came.second, came.angle, came.shear],
      [272.146968, 33.853032, -70.655416, 238.293936],
    );
    expectNear(
      [came.stress1, came.stress2, came.vonMises, came.shearStress],
      [62.044588, 25.383983, 54.027204, 18.330303],
    );
    expect((came.angle ?? NaN) + 90).toBeCloseTo(19.3, 1);
  });

  test('Beer & Johnston, Mechanics of Materials: 60° rosette 40/980/330 µε, ν 0.29', () => {
    const came = shown('delta', [40, 980, 330], steel(200, 0.29));
    // The book: 1006, −106, ε3 −368, γ 1374; E is assumed.
    expectNear(
      [came.first, came.second, came.angle, came.shear],
      [1005.817716, -105.817716, 68.765888, 1111.635432],
    );
    expectNear([came.third, came.absoluteShear], [-367.605634, 1373.42335]);
    expectNear(
      [came.stress1, came.stress2, came.vonMises, came.shearStress],
      [212.933853, 40.587274, 195.820703, 86.173289],
    );
    // The third principal stress is 0 and both others are tension: half of the first.
    expect(came.absoluteShearStress).toBeCloseTo(212.933853 / 2, 5);
  });

  test('Gere, Mechanics of Materials: 45° rosette 310/180/−160 µε', () => {
    const came = shown('rectangular', [310, 180, -160]);
    // The book: 332, −182, 12.0°, γ 515.
    expectNear(
      [came.first, came.second, came.angle, came.shear],
      [332.390754, -182.390754, 12.037749, 514.781507],
    );
  });
});

// Computed; the quadrant comes out right by atan2 where a single-argument arctangent would not.
describe('rectangular rosettes on steel of 210 GPa, ν 0.3', () => {
  test.each<[string, Three, (number | null)[], number[]]>([
    ['uniaxial', [1000, 350, -300], [1000, -300, 0, 1300], [210, 0, 210, 105]],
    [
      'pure shear, positive',
      [0, 500, 0],
      [500, -500, 45, 1000],
      [80.769231, -80.769231, 139.896411, 80.769231],
    ],
    [
      'pure shear, negative',
      [0, -500, 0],
      [500, -500, -45, 1000],
      [80.769231, -80.769231, 139.896411, 80.769231],
    ],
    ['alike in all directions', [400, 400, 400], [400, 400, null, 0], [120, 120, 120, 0]],
    [
      'greater strain beyond 45°',
      [-100, 400, 300],
      [460.555128, -260.555128, 61.845034, 721.110255],
      [88.243521, -28.243521, 105.246962, 58.243521],
    ],
  ])('%s', (_, gauges, strains, stresses) => {
    const came = shown('rectangular', gauges);
    expectNear([came.first, came.second, came.angle, came.shear], strains);
    expectNear([came.stress1, came.stress2, came.vonMises, came.shearStress], stresses);
  });

  test('alike in all directions: no angle in a delta rosette either, corrected or not', () => {
    const gauges: Three = [123.456789, 123.456789, 123.456789];
    for (const layout of ['rectangular', 'delta'] as const) {
      for (const correction of [null, transverseMatrix(layout, [0.02, 0.02, 0.02])]) {
        expect(state(planRosette(layout, steel(210, 0.3), correction), gauges).angle).toBeNull();
      }
    }
    expect(shown('rectangular', [0, 0, 0]).angle).toBeNull();
  });
});

// Forward projection, ε(φ) = C + R·cos 2(φ − θ); computed.
describe('round trips', () => {
  test.each<[Three, Three, Three]>([
    [
      [1000, -300, 30],
      [675, 912.916512, 25],
      [675, 675, -300],
    ],
    [
      [600, 200, -20],
      [553.208889, 271.442478, 246.791111],
      [553.208889, 212.061476, 434.729636],
    ],
    [
      [500, -500, 70],
      [-383.022222, 321.393805, 383.022222],
      [-383.022222, 469.84631, -86.824089],
    ],
  ])('ε1, ε2, θ = %j', (principal, rectangular, delta) => {
    for (const [layout, gauges] of [
      ['rectangular', rectangular],
      ['delta', delta],
    ] as const) {
      const { first, second, angle } = shown(layout, gauges);
      expectNear([first, second, angle], principal);
    }
  });
});

// Computed from ΔR/R = Fa·(εa + Kt·εt), Kt 2 %, ν0 0.285.
test('indicated 999.698/359.047/−281.605 µε with Kt 2 % is the uniaxial 1000, −300 µε', () => {
  const correction = transverseMatrix('rectangular', [0.02, 0.02, 0.02]);
  const plan = planRosette('rectangular', steel(210, 0.3), correction);
  const { strains, stresses } = state(plan, [999.6982802, 359.04656542, -281.60514935]);
  expect(strains['principal-strain-1'] * 1e6).toBeCloseTo(1000, 6);
  expect(strains['principal-strain-2'] * 1e6).toBeCloseTo(-300, 6);
  expect(stresses['equivalent-stress'] / 1e6).toBeCloseTo(210, 6);
});

const within = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const layouts = fc.constantFrom<RosetteLayout>('rectangular', 'delta');
const DEGREES = { rectangular: [0, 45, 90], delta: [0, 60, 120] } as const;

/** Mohr's circle: what the gauges of a rosette see of principal strains at `angle` degrees. */
const projected = (layout: RosetteLayout, one: number, two: number, angle: number): Three => {
  const at = (degrees: number) =>
    (one + two) / 2 + ((one - two) / 2) * Math.cos((2 * (degrees - angle) * Math.PI) / 180);
  const [a, b, c] = DEGREES[layout];
  return [at(a), at(b), at(c)];
};

test('any principal strains at any angle come back from the gauges that they are projected to', () => {
  fc.assert(
    fc.property(
      layouts,
      within(-3000, 3000),
      within(1, 5000),
      within(-89.9, 89.9),
      (layout, second, difference, angle) => {
        const came = shown(layout, projected(layout, second + difference, second, angle));
        expect(Math.abs(came.first - second - difference)).toBeLessThan(1e-9);
        expect(Math.abs(came.second - second)).toBeLessThan(1e-9);
        expect(Math.abs((came.angle ?? NaN) - angle)).toBeLessThan(1e-7);
      },
    ),
  );
});

// Hooke's law the other way, ε = (σ − ν·σ⊥)/E: Gere, Mechanics of Materials, plane stress.
test('stresses bring about the strains that they came from; von Mises of the components agrees', () => {
  fc.assert(
    fc.property(
      layouts,
      fc.tuple(within(-3000, 3000), within(-3000, 3000), within(-3000, 3000)),
      within(0, 0.45),
      (layout, gauges, nu) => {
        const material = steel(210, nu);
        const { strains, stresses } = state(planRosette(layout, material, null), gauges);
        const [x, y, xy] = [
          stresses['stress-x'],
          stresses['stress-y'],
          stresses['shear-stress-xy'],
        ];
        const close = (one: number, other: number, tolerance: number) =>
          expect(Math.abs(one - other)).toBeLessThan(tolerance);
        close((x - nu * y) / 210e9, strains['strain-x'], 1e-14);
        close((y - nu * x) / 210e9, strains['strain-y'], 1e-14);
        close((xy * 2 * (1 + nu)) / 210e9, strains['shear-strain-xy'], 1e-14);
        const equivalent = Math.sqrt(x ** 2 - x * y + y ** 2 + 3 * xy ** 2);
        close(stresses['equivalent-stress'], equivalent, 1);
        const inPlane = Math.sqrt(((x - y) / 2) ** 2 + xy ** 2);
        close(stresses['shear-stress-in-plane'], inPlane, 1);
        close(stresses['principal-stress-1'] - stresses['principal-stress-2'], 2 * inPlane, 1);
      },
    ),
  );
});

test('sample by sample it is the same as one by one, and NaN where one gauge is not believed', () => {
  const columns = [
    Float64Array.of(1000e-6, -100e-6, NaN),
    Float64Array.of(350e-6, 400e-6, 400e-6),
    Float64Array.of(-300e-6, 300e-6, 300e-6),
  ] as const;
  const plan = planRosette('rectangular', steel(210, 0.3), null);
  const out = new Float64Array(3);
  const states = [state(plan, [1000, 350, -300]), state(plan, [-100, 400, 300])];
  for (const quantity of ROSETTE_STRAINS) {
    fillRosette(plan, quantity, ...columns, out);
    states.forEach(({ strains }, i) => expect(out[i]).toBeCloseTo(strains[quantity], 15));
    expect(out[2]).toBeNaN();
  }
  for (const quantity of ROSETTE_STRESSES) {
    fillRosette(plan, quantity, ...columns, out);
    states.forEach(({ stresses }, i) => expect(out[i]).toBeCloseTo(stresses[quantity], 4));
    expect(out[2]).toBeNaN();
  }
  fillRosette(plan, 'angle', ...columns, out);
  expect(((out[1] ?? NaN) * 180) / Math.PI).toBeCloseTo(61.845034, 6);
  expect(out[2]).toBeNaN();
});
