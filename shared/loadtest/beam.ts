import {
  metre,
  newton,
  newtonMetre,
  pascal,
  type Metre,
  type Newton,
  type NewtonMetre,
  type Pascal,
  type QuarticMetre,
} from '../model/units.ts';

export { fibreStrain, type SectionForces } from '../pipeline/4-stress/fibre.ts';

/** Simply supported at 0 and `span`. */
export interface Beam {
  readonly span: Metre;
  /** About the axis that the loads bend it about. */
  readonly inertia: QuarticMetre;
  readonly youngsModulus: Pascal;
}

/** A force across the beam, `at` from its start, 0 to span. */
export interface PointLoad {
  readonly force: Newton;
  readonly at: Metre;
}

/**
 * Responses to one point load at `x`, 0 to span; several loads add up. Gere, Mechanics of
 * Materials, table of deflections and slopes of simple beams; Roark's Formulas for Stress and
 * Strain, simply supported beam with an intermediate load.
 */

/** Positive where the side toward which the force acts is in tension. */
export const moment = ({ span }: Beam, { force, at }: PointLoad, x: Metre): NewtonMetre =>
  newtonMetre(x <= at ? (force * (span - at) * x) / span : (force * at * (span - x)) / span);

/** Positive between the start and the load; at the load itself the value before it. */
export const shear = ({ span }: Beam, { force, at }: PointLoad, x: Metre): Newton =>
  newton(x <= at ? (force * (span - at)) / span : (-force * at) / span);

/** In the direction of the force. */
export const deflection = (beam: Beam, { force, at }: PointLoad, x: Metre): Metre => {
  const { span, inertia, youngsModulus } = beam;
  const [far, near] = x <= at ? [span - at, x] : [at, span - x];
  return metre(
    (force * far * near * (span ** 2 - far ** 2 - near ** 2)) /
      (6 * span * youngsModulus * inertia),
  );
};

/**
 * τ = V·S/(I·t): S is the first moment of the part of the section beyond the point, in m³, and
 * t its thickness there. Jourawski; Gere, Mechanics of Materials, shear stresses in beams.
 */
export const shearStress = (
  force: Newton,
  firstMoment: number,
  inertia: QuarticMetre,
  thickness: Metre,
): Pascal => pascal((force * firstMoment) / (inertia * thickness));
