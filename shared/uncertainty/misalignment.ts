/**
 * Share by which a gauge at `angle` (rad) to a uniaxial stress reads off its strain, −(1+ν)·sin²β:
 * Mohr's circle, (1−ν)/2 + (1+ν)/2·cos 2β − 1. Never above 0; Dally and Riley, Experimental Stress
 * Analysis. As a tolerance its magnitude is the half-width for a gauge within ± angle.
 */
export const misalignmentError = (angle: number, poisson: number): number =>
  -(1 + poisson) * Math.sin(angle) ** 2;
