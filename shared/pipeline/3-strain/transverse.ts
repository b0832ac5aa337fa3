import { inverse3, multiply, type Matrix3, type Triple } from '../../model/matrix3.ts';
import { GAUGE_ANGLES, strainFactors, type RosetteLayout } from '../../model/rosette.ts';
import { strain, type Radian, type Strain } from '../../model/units.ts';

/**
 * Transverse sensitivity Kt = Ft/Fa (a share, 0.01 for 1 %): ΔR/R = Fa·(εa + Kt·εt), and as gauge
 * factors are found in a uniaxial stress field, GF = Fa·(1 − ν0·Kt). So a gauge indicates
 * ε̂ = (εa + Kt·εt)/(1 − ν0·Kt). ASTM E251, value from memory.
 */

/** ν0, Poisson's ratio of the bar that gauge factors are found on (value from memory). */
export const CALIBRATION_POISSON = 0.285;

/**
 * Relative error of one gauge whose Kt is not corrected for: Kt·(εt/εa + ν0)/(1 − ν0·Kt). 0 in a
 * uniaxial field on the material of ν0, where εt/εa = −ν0.
 */
export const transverseError = (
  kt: number,
  transverseOverAxial: number,
  poisson = CALIBRATION_POISSON,
): number => (kt * (transverseOverAxial + poisson)) / (1 - poisson * kt);

/** One gauge's indicated strain put right for a known ratio εt/εa. */
export const transverseCorrected = (
  indicated: Strain,
  kt: number,
  transverseOverAxial: number,
  poisson = CALIBRATION_POISSON,
): Strain => strain(indicated / (1 + transverseError(kt, transverseOverAxial, poisson)));

/** What one gauge indicates for each of εx, εy, γxy. */
const indicatedFactors = (angle: Radian, kt: number, poisson: number): Triple => {
  const [along, across] = [strainFactors(angle), strainFactors(angle + Math.PI / 2)];
  const scale = 1 / (1 - poisson * kt);
  return [
    scale * (along[0] + kt * across[0]),
    scale * (along[1] + kt * across[1]),
    scale * (along[2] + kt * across[2]),
  ];
};

/**
 * Indicated strains of a rosette's gauges a, b, c to those of gauges without transverse
 * sensitivity: the three are solved for the one state of strain that they all see, so each gauge
 * may have a Kt of its own. Of the pair at right angles, a and c of a rectangular rosette.
 */
export const transverseMatrix = (
  layout: RosetteLayout,
  [kta, ktb, ktc]: Triple,
  poisson = CALIBRATION_POISSON,
): Matrix3 => {
  const [a, b, c] = GAUGE_ANGLES[layout];
  const toIndicated: Matrix3 = [
    indicatedFactors(a, kta, poisson),
    indicatedFactors(b, ktb, poisson),
    indicatedFactors(c, ktc, poisson),
  ];
  const toTrue: Matrix3 = [strainFactors(a), strainFactors(b), strainFactors(c)];
  return multiply(toTrue, inverse3(toIndicated));
};

/**
 * Two gauges at right angles: εx = [(1−ν0·Kx)·ε̂x − Kx·(1−ν0·Ky)·ε̂y]/(1 − Kx·Ky), and y alike.
 * The two sensitivities may differ.
 */
export const transversePair = (
  [x, y]: readonly [Strain, Strain],
  [kx, ky]: readonly [number, number],
  poisson = CALIBRATION_POISSON,
): readonly [x: Strain, y: Strain] => {
  const [sx, sy] = [(1 - poisson * kx) * x, (1 - poisson * ky) * y];
  const determinant = 1 - kx * ky;
  return [strain((sx - kx * sy) / determinant), strain((sy - ky * sx) / determinant)];
};
