import fc from 'fast-check';
import { section } from '../../../shared/catalogue/sections.ts';
import type { Section } from '../../../shared/model/site.ts';
import {
  megapascalToPascal,
  millimetreToMetre,
  quarticMetre,
  squareMillimetreToSquareMetre,
} from '../../../shared/model/units.ts';
import type { SectionPoint } from '../../../shared/pipeline/4-stress/fibre.ts';
import { normalInverse } from '../../../shared/pipeline/4-stress/section-forces.ts';
import { fitPlane, type PlaneFit } from '../../../shared/pipeline/4-stress/plane-fit.ts';

export const E = megapascalToPascal(210_000);

/** IPE 300 with A 5381.2 mm², Iy 8356.11e4, Iz 603.778e4 mm⁴ (EN 10365 dimensions, computed). */
export const ipe300 = (): Section => {
  const found = section('IPE 300');
  if (!found.ok) throw new Error(found.expected);
  return {
    ...found.value,
    area: squareMillimetreToSquareMetre(5381.2),
    inertiaY: quarticMetre(8356.11e-8),
    inertiaZ: quarticMetre(603.778e-8),
  };
};

/** In mm. */
export const at = (y: number, z: number): SectionPoint => ({
  y: millimetreToMetre(y),
  z: millimetreToMetre(z),
});

export const TIPS = [at(75, 150), at(-75, 150), at(75, -150), at(-75, -150)];

export const planeOf = (points: readonly SectionPoint[]): PlaneFit => {
  const fit = fitPlane(points);
  if (!fit.ok) throw new Error(fit.refusal.code);
  return fit.value;
};

/** Gauges so far apart that 1 µε of each is less than 100 µε/m of curvature. */
export const isTelling = (points: readonly SectionPoint[]): boolean => {
  const fit = fitPlane(points);
  if (!fit.ok) return false;
  const [, [, aboutY], [, , aboutZ]] = normalInverse(fit.value);
  return aboutY < 1e4 && aboutZ < 1e4;
};

const within = (half: number) => fc.double({ min: -half, max: half, noNaN: true });

/** Gauges anywhere within the outline of the IPE 300. */
export const places = (minLength: number, maxLength: number) =>
  fc
    .array(fc.tuple(within(75), within(150)), { minLength, maxLength })
    .map((points) => points.map(([y, z]) => at(y, z)))
    .filter(isTelling);
