import type { Material } from '../../model/site.ts';
import { shearModulus } from './stress.ts';

/**
 * Mohr's circle of plane strain and Hooke's law in plane stress, on bare numbers, for it runs a
 * sample: strains m/m (shear: engineering shear strain γ), stresses Pa, angles rad counter-clockwise
 * from x. ASTM E1561 §4 (equations from memory); Gere, Mechanics of Materials, plane strain and
 * plane stress.
 */
export const centre = (x: number, y: number): number => (x + y) / 2;

export const radius = (x: number, y: number, xy: number): number =>
  Math.sqrt((x - y) ** 2 + xy ** 2) / 2;

/** A circle this much smaller than the strains themselves is a point that rounding blew up. */
const POINT = 1e-12;

/** From x to the greater principal strain, −π/2 to π/2; NaN where every direction is principal. */
export const principalAngle = (x: number, y: number, xy: number): number =>
  radius(x, y, xy) > POINT * (Math.abs(x) + Math.abs(y)) ? Math.atan2(xy, x - y) / 2 : NaN;

/** What Hooke's law needs of a material, worked out once. */
export interface PlaneLaw {
  /** E/(1−ν²), Pa. */
  readonly plane: number;
  readonly poisson: number;
  /** G, Pa. */
  readonly shear: number;
}

export const planeLaw = (material: Material): PlaneLaw => ({
  plane: material.youngsModulus / (1 - material.poisson ** 2),
  poisson: material.poisson,
  shear: shearModulus(material),
});

/** Through the thickness: ε3 = −ν/(1−ν)·(ε1 + ε2). */
export const thirdStrain = (one: number, two: number, { poisson }: PlaneLaw): number =>
  (-poisson / (1 - poisson)) * (one + two);

/** σ = E/(1−ν²)·(ε + ν·ε⊥), in principal or any other directions at right angles. */
export const planeStress = (along: number, across: number, { plane, poisson }: PlaneLaw): number =>
  plane * (along + poisson * across);

/** τ = G·γ. */
export const shearStressFor = (shearStrain: number, { shear }: PlaneLaw): number =>
  shear * shearStrain;

/** Of three principal strains, or of stresses. */
export const greatestDifference = (one: number, two: number, three: number): number =>
  Math.max(one, two, three) - Math.min(one, two, three);

/** Von Mises with σ3 = 0: √(σ1² − σ1·σ2 + σ2²). */
export const vonMises = (one: number, two: number): number =>
  Math.sqrt(one ** 2 - one * two + two ** 2);
