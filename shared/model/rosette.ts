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
