import type { Triple } from './matrix3.ts';
import { degreeToRadian, type Radian } from './units.ts';

/** Gauges a, b, c at 0/45/90 or 0/60/120 degrees from a, numbered counter-clockwise. */
export const ROSETTE_LAYOUTS = ['rectangular', 'delta'] as const;
export type RosetteLayout = (typeof ROSETTE_LAYOUTS)[number];

export const GAUGE_ANGLES: Readonly<Record<RosetteLayout, readonly [Radian, Radian, Radian]>> = {
  rectangular: [degreeToRadian(0), degreeToRadian(45), degreeToRadian(90)],
  delta: [degreeToRadian(0), degreeToRadian(60), degreeToRadian(120)],
};

/**
 * Factors of εx, εy, γxy in the normal strain at an angle from x: cos²θ, sin²θ, sinθ·cosθ. Strain
 * transformation, Gere, Mechanics of Materials, plane strain; ASTM E1561 §4.
 */
export const strainFactors = (angle: number): Triple => {
  const [c, s] = [Math.cos(angle), Math.sin(angle)];
  return [c * c, s * s, s * c];
};

/** m/m; shear strains are engineering shear strains γ. */
export const ROSETTE_STRAINS = [
  'strain-x',
  'strain-y',
  'shear-strain-xy',
  'principal-strain-1',
  'principal-strain-2',
  'principal-strain-3',
  'shear-strain-in-plane',
  'shear-strain-absolute',
] as const;

/** Pa. */
export const ROSETTE_STRESSES = [
  'stress-x',
  'stress-y',
  'shear-stress-xy',
  'principal-stress-1',
  'principal-stress-2',
  'shear-stress-in-plane',
  'shear-stress-absolute',
  'equivalent-stress',
] as const;

export type RosetteStrain = (typeof ROSETTE_STRAINS)[number];
export type RosetteStress = (typeof ROSETTE_STRESSES)[number];
/** `angle`: from gauge a to the greater principal strain, rad, NaN where it is undefined. */
export const ROSETTE_QUANTITIES = [...ROSETTE_STRAINS, ...ROSETTE_STRESSES, 'angle'] as const;
export type RosetteQuantity = (typeof ROSETTE_QUANTITIES)[number];
