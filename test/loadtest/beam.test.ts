import { describe, expect, test } from 'vitest';
import {
  deflection,
  fibreStrain,
  moment,
  shear,
  shearStress,
  type Beam,
} from '../../shared/loadtest/beam.ts';
import { section } from '../../shared/catalogue/sections.ts';
import type { Section } from '../../shared/model/site.ts';
import {
  gigapascalToPascal,
  metre,
  millimetreToMetre,
  newton,
  newtonMetre,
} from '../../shared/model/units.ts';

const ipe300 = (): Section => {
  const found = section('IPE 300');
  if (!found.ok) throw new Error(found.expected);
  return found.value;
};

const E = gigapascalToPascal(210);
const beam: Beam = { span: metre(6), inertia: ipe300().inertiaY, youngsModulus: E };
const load = (kilonewtons: number, at: number) => ({
  force: newton(kilonewtons * 1e3),
  at: metre(at),
});

describe('simply supported beam, IPE 300, 6 m (Gere, Mechanics of Materials, beam tables)', () => {
  test('three-point, 40 kN: PL/4 and PL³/48EI', () => {
    const centre = load(40, 3);
    expect(moment(beam, centre, metre(3))).toBeCloseTo(60e3, 6);
    expect(deflection(beam, centre, metre(3)) * 1e3).toBeCloseTo(10.257678, 5);
    expect(shear(beam, centre, metre(1))).toBeCloseTo(20e3, 6);
    expect(shear(beam, centre, metre(5))).toBeCloseTo(-20e3, 6);
  });

  test('four-point, 2 × 20 kN at the thirds: Pa, Pa(3L²−4a²)/24EI, Pa²(3L−4a)/6EI', () => {
    const thirds = [load(20, 2), load(20, 4)];
    const all = (at: number, response: typeof moment | typeof deflection) =>
      thirds.reduce((sum, each) => sum + response(beam, each, metre(at)), 0);
    for (const x of [2, 2.7, 3, 4]) expect(all(x, moment)).toBeCloseTo(40e3, 6);
    expect(all(3, deflection) * 1e3).toBeCloseTo(8.738022, 5);
    expect(all(2, deflection) * 1e3).toBeCloseTo(7.59828, 5);
    expect(all(4, deflection) * 1e3).toBeCloseTo(7.59828, 5);
  });

  test('ten thousand small loads come to the uniform one: wL²/8 and 5wL⁴/384EI', () => {
    const count = 10_000;
    const parts = Array.from({ length: count }, (_, i) =>
      load((10 * 6) / count, ((i + 0.5) * 6) / count),
    );
    const mid = metre(3);
    expect(parts.reduce((sum, p) => sum + moment(beam, p, mid), 0)).toBeCloseTo(45e3, 2);
    const sag = parts.reduce((sum, p) => sum + deflection(beam, p, mid), 0);
    expect(sag * 1e3).toBeCloseTo(9.616573, 4);
  });

  test('nothing moves over the supports, and the mirrored beam answers mirrored', () => {
    expect(deflection(beam, load(10, 1), metre(0))).toBeCloseTo(0, 12);
    expect(deflection(beam, load(10, 1), metre(6))).toBeCloseTo(0, 12);
    expect(deflection(beam, load(10, 1), metre(4))).toBeCloseTo(
      deflection(beam, load(10, 5), metre(2)),
      12,
    );
  });
});

describe('strain of a fibre (check values for IPE 300: N 100 kN, My 40 kNm, Mz 2 kNm)', () => {
  // A 5381.2 mm², Iy 8356.11e4 mm⁴, Iz 603.778e4 mm⁴: the section's handbook figures, 6 digits.
  test.each([
    [75, 150, 312.111397],
    [-75, 150, 548.716809],
    [75, -150, -371.733803],
    [-75, -150, -135.128391],
  ])('at y %d mm, z %d mm: %d µε', (y, z, microstrain) => {
    const forces = {
      axial: newton(100e3),
      aboutY: newtonMetre(40e3),
      aboutZ: newtonMetre(2e3),
    };
    const point = { y: millimetreToMetre(y), z: millimetreToMetre(z) };
    const strain = fibreStrain(forces, point, ipe300(), E);
    expect(Math.abs((strain * 1e6) / microstrain - 1)).toBeLessThan(1e-5);
  });
});

test('shear stress of a rectangle is 3V/2A at half height (Gere, shear stresses in beams)', () => {
  const [b, h, force] = [0.05, 0.2, 12e3];
  const rectangle = { ...beam, inertia: section('FLAT 200x50') };
  if (!rectangle.inertia.ok) throw new Error(rectangle.inertia.expected);
  const firstMoment = (b * h ** 2) / 8;
  const stress = shearStress(
    newton(force),
    firstMoment,
    rectangle.inertia.value.inertiaY,
    metre(b),
  );
  expect(stress / ((1.5 * force) / (b * h))).toBeCloseTo(1, 9);
});
