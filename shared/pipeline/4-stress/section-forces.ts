import { accept, type Result } from '../../model/frame.ts';
import type { Matrix3, Triple } from '../../model/matrix3.ts';
import type { Section } from '../../model/site.ts';
import { newton, newtonMetre, type Pascal } from '../../model/units.ts';
import { fibreStress, type SectionForces, type SectionPoint } from './fibre.ts';
import { fitPlane, type PlaneFit } from './plane-fit.ts';
import { fillWeighted, weighted } from './weighted.ts';

export const SECTION_FORCES = ['axial', 'aboutY', 'aboutZ'] as const;
export type SectionForce = (typeof SECTION_FORCES)[number];

/** A section with gauges on it, with all that is worked out once for it. */
export interface SectionPlan {
  readonly fit: PlaneFit;
  readonly section: Section;
  /** EA in N, EIy and EIz in N·m². */
  readonly stiffness: Triple;
  /** By gauge: what a strain of 1 there adds to N (N), My, Mz (N·m). */
  readonly weights: Readonly<Record<SectionForce, Float64Array>>;
}

/**
 * N = EA·ε0, My = EIy·κy, Mz = EIz·κz of three or more gauges along the member, their places from
 * the centroid. Bernoulli's plane sections, Gere, Mechanics of Materials, bending with axial load;
 * axes EN 1993-1-1 §1.7. Refused as `fitPlane` refuses.
 */
export const planSection = (
  points: readonly SectionPoint[],
  section: Section,
  youngsModulus: Pascal,
): Result<SectionPlan> => {
  const fit = fitPlane(points);
  if (!fit.ok) return fit;
  const [along, aboutY, aboutZ] = fit.value.rows;
  const stiffness: Triple = [
    youngsModulus * section.area,
    youngsModulus * section.inertiaY,
    youngsModulus * section.inertiaZ,
  ];
  return accept({
    fit: fit.value,
    section,
    stiffness,
    weights: {
      axial: along.map((weight) => stiffness[0] * weight),
      aboutY: aboutY.map((weight) => stiffness[1] * weight),
      aboutZ: aboutZ.map((weight) => stiffness[2] * weight),
    },
  });
};

/** Of the gauges' strains at one instant, m/m; NaN where any of them is. */
export const sectionForces = (
  { weights }: SectionPlan,
  strains: ArrayLike<number>,
): SectionForces => ({
  axial: newton(weighted(weights.axial, strains)),
  aboutY: newtonMetre(weighted(weights.aboutY, strains)),
  aboutZ: newtonMetre(weighted(weights.aboutZ, strains)),
});

/** One of them sample by sample, N or N·m, without allocation. */
export const fillSectionForce = (
  { weights }: SectionPlan,
  force: SectionForce,
  gauges: readonly Float64Array[],
  out: Float64Array,
): void => fillWeighted(weights[force], gauges, out);

/** By gauge: what a strain of 1 there adds to the stress at a point of the section, Pa. */
export const fibreWeights = (plan: SectionPlan, point: SectionPoint): Float64Array =>
  Float64Array.from(plan.fit.points, (_, gauge) => {
    const forces = {
      axial: newton(plan.weights.axial[gauge] ?? NaN),
      aboutY: newtonMetre(plan.weights.aboutY[gauge] ?? NaN),
      aboutZ: newtonMetre(plan.weights.aboutZ[gauge] ?? NaN),
    };
    return fibreStress(forces, point, plan.section);
  });

/** (XᵀX)⁻¹ of ε0, κy, κz: 1, 1/m, 1/m² as they pair. */
export const normalInverse = ({ rows: [a, b, c] }: PlaneFit): Matrix3 => [
  [weighted(a, a), weighted(a, b), weighted(a, c)],
  [weighted(b, a), weighted(b, b), weighted(b, c)],
  [weighted(c, a), weighted(c, b), weighted(c, c)],
];

/**
 * Covariance of N, My, Mz where each gauge's strain has the standard deviation `deviation`, m/m,
 * independently: s²·(XᵀX)⁻¹ with the stiffnesses put in. With s of the residuals for it, n − 3
 * degrees of freedom.
 */
export const forceCovariance = ({ fit, stiffness }: SectionPlan, deviation: number): Matrix3 => {
  const [a, b, c] = normalInverse(fit);
  const scaled = (own: number, row: Triple): Triple => [
    deviation ** 2 * own * stiffness[0] * row[0],
    deviation ** 2 * own * stiffness[1] * row[1],
    deviation ** 2 * own * stiffness[2] * row[2],
  ];
  return [scaled(stiffness[0], a), scaled(stiffness[1], b), scaled(stiffness[2], c)];
};
