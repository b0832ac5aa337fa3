import { multiply, type Matrix3 } from '../../model/matrix3.ts';
import type {
  RosetteLayout,
  RosetteQuantity,
  RosetteStrain,
  RosetteStress,
} from '../../model/rosette.ts';
import type { Material } from '../../model/site.ts';
import {
  pascal,
  radian,
  strain,
  type Pascal,
  type Radian,
  type Strain,
} from '../../model/units.ts';
import {
  centre,
  greatestDifference,
  planeLaw,
  planeStress,
  principalAngle,
  radius,
  shearStressFor,
  thirdStrain,
  vonMises,
  type PlaneLaw,
} from './mohr.ts';

const ROOT_3 = Math.sqrt(3);

/**
 * Strains of gauges a, b, c, numbered counter-clockwise, to εx, εy, γxy with x along gauge a. ASTM
 * E1561 §4.2 (rectangular), §4.3 (delta); equations from memory.
 */
const TO_COMPONENTS: Readonly<Record<RosetteLayout, Matrix3>> = {
  rectangular: [
    [1, 0, 0],
    [0, 0, 1],
    [-1, 2, -1],
  ],
  delta: [
    [1, 0, 0],
    [-1 / 3, 2 / 3, 2 / 3],
    [0, 2 / ROOT_3, -2 / ROOT_3],
  ],
};

/** A rosette on a member, with all that is worked out once for it. */
export interface RosettePlan {
  /** Gauges a, b, c to εx, εy, γxy. */
  readonly toComponents: Matrix3;
  readonly law: PlaneLaw;
}

/**
 * `correction` turns indicated strains of a, b, c into those of gauges without transverse
 * sensitivity; null where they are that already.
 */
export const planRosette = (
  layout: RosetteLayout,
  material: Material,
  correction: Matrix3 | null,
): RosettePlan => {
  const bare = TO_COMPONENTS[layout];
  return {
    toComponents: correction === null ? bare : multiply(bare, correction),
    law: planeLaw(material),
  };
};

/** Of Mohr's circle, centre and radius, and of the components. */
type Formula = (c: number, r: number, x: number, y: number, xy: number, law: PlaneLaw) => number;

const stress1: Formula = (c, r, _x, _y, _xy, law) => planeStress(c + r, c - r, law);
const stress2: Formula = (c, r, _x, _y, _xy, law) => planeStress(c - r, c + r, law);

const FORMULAS: Readonly<Record<RosetteQuantity, Formula>> = {
  'strain-x': (_c, _r, x) => x,
  'strain-y': (_c, _r, _x, y) => y,
  'shear-strain-xy': (_c, _r, _x, _y, xy) => xy,
  'principal-strain-1': (c, r) => c + r,
  'principal-strain-2': (c, r) => c - r,
  'principal-strain-3': (_c, _r, x, y, _xy, law) => thirdStrain(x, y, law),
  'shear-strain-in-plane': (_c, r) => 2 * r,
  'shear-strain-absolute': (c, r, x, y, _xy, law) =>
    greatestDifference(c + r, c - r, thirdStrain(x, y, law)),
  'stress-x': (_c, _r, x, y, _xy, law) => planeStress(x, y, law),
  'stress-y': (_c, _r, x, y, _xy, law) => planeStress(y, x, law),
  'shear-stress-xy': (_c, _r, _x, _y, xy, law) => shearStressFor(xy, law),
  'principal-stress-1': stress1,
  'principal-stress-2': stress2,
  'equivalent-stress': (c, r, x, y, xy, law) =>
    vonMises(stress1(c, r, x, y, xy, law), stress2(c, r, x, y, xy, law)),
  'shear-stress-in-plane': (_c, r, _x, _y, _xy, law) => shearStressFor(2 * r, law),
  'shear-stress-absolute': (c, r, x, y, xy, law) =>
    greatestDifference(stress1(c, r, x, y, xy, law), stress2(c, r, x, y, xy, law), 0) / 2,
  angle: (_c, _r, x, y, xy) => principalAngle(x, y, xy),
};

/**
 * One quantity of a rosette, sample by sample from its gauges' strains in m/m, all of one length,
 * without allocation. NaN where any gauge's is.
 */
export const fillRosette = (
  { toComponents: [toX, toY, toXy], law }: RosettePlan,
  quantity: RosetteQuantity,
  a: Float64Array,
  b: Float64Array,
  c: Float64Array,
  out: Float64Array,
): void => {
  const formula = FORMULAS[quantity];
  const [xa, xb, xc] = toX;
  const [ya, yb, yc] = toY;
  const [sa, sb, sc] = toXy;
  for (let i = 0; i < out.length; i++) {
    const ea = a[i] ?? NaN;
    const eb = b[i] ?? NaN;
    const ec = c[i] ?? NaN;
    const x = xa * ea + xb * eb + xc * ec;
    const y = ya * ea + yb * eb + yc * ec;
    const xy = sa * ea + sb * eb + sc * ec;
    out[i] = formula(centre(x, y), radius(x, y, xy), x, y, xy, law);
  }
};

export interface RosetteState {
  readonly strains: Readonly<Record<RosetteStrain, Strain>>;
  readonly stresses: Readonly<Record<RosetteStress, Pascal>>;
  /** From gauge a to the greater principal strain, −π/2 to π/2; null where all directions are. */
  readonly angle: Radian | null;
}

/** All of a rosette at one instant; for many samples see `fillRosette`. */
export const rosetteState = (plan: RosettePlan, a: Strain, b: Strain, c: Strain): RosetteState => {
  const [ea, eb, ec] = [Float64Array.of(a), Float64Array.of(b), Float64Array.of(c)];
  const value = new Float64Array(1);
  const at = (quantity: RosetteQuantity): number => {
    fillRosette(plan, quantity, ea, eb, ec, value);
    return value[0] ?? NaN;
  };
  const strainAt = (quantity: RosetteStrain) => strain(at(quantity));
  const stressAt = (quantity: RosetteStress) => pascal(at(quantity));
  const angle = at('angle');
  return {
    strains: {
      'strain-x': strainAt('strain-x'),
      'strain-y': strainAt('strain-y'),
      'shear-strain-xy': strainAt('shear-strain-xy'),
      'principal-strain-1': strainAt('principal-strain-1'),
      'principal-strain-2': strainAt('principal-strain-2'),
      'principal-strain-3': strainAt('principal-strain-3'),
      'shear-strain-in-plane': strainAt('shear-strain-in-plane'),
      'shear-strain-absolute': strainAt('shear-strain-absolute'),
    },
    stresses: {
      'stress-x': stressAt('stress-x'),
      'stress-y': stressAt('stress-y'),
      'shear-stress-xy': stressAt('shear-stress-xy'),
      'principal-stress-1': stressAt('principal-stress-1'),
      'principal-stress-2': stressAt('principal-stress-2'),
      'shear-stress-in-plane': stressAt('shear-stress-in-plane'),
      'shear-stress-absolute': stressAt('shear-stress-absolute'),
      'equivalent-stress': stressAt('equivalent-stress'),
    },
    angle: Number.isNaN(angle) ? null : radian(angle),
  };
};
