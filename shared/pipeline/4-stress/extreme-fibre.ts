import type { Section } from '../../model/site.ts';
import { metre, type Pascal } from '../../model/units.ts';
import { fibreStress, fibreStressAt, type SectionForces, type SectionPoint } from './fibre.ts';

/**
 * Corners of the rectangle that a doubly symmetric section fills: flange tips of I and H, the
 * corners of a flat. For rounded corners and for circular sections they lie outside, and their
 * stress is an upper bound: by up to √2 of the bending in a circular one bent both ways.
 */
export const corners = ({ height, width }: Section): readonly SectionPoint[] => {
  const [y, z] = [width / 2, height / 2];
  return [
    { y: metre(y), z: metre(z) },
    { y: metre(-y), z: metre(z) },
    { y: metre(y), z: metre(-z) },
    { y: metre(-y), z: metre(-z) },
  ];
};

export const cornerStresses = (
  forces: SectionForces,
  section: Section,
): { readonly point: SectionPoint; readonly stress: Pascal }[] =>
  corners(section).map((point) => ({ point, stress: fibreStress(forces, point, section) }));

/**
 * The most tensile (`highest`) or most compressive (`lowest`) stress of a section's corners, sample
 * by sample from N in N and My, Mz in N·m, in Pa, without allocation.
 */
export const fillExtremeStress = (
  side: 'highest' | 'lowest',
  section: Section,
  axial: Float64Array,
  aboutY: Float64Array,
  aboutZ: Float64Array,
  out: Float64Array,
): void => {
  const toward = side === 'highest' ? 1 : -1;
  const [halfWidth, halfHeight] = [section.width / 2, section.height / 2];
  for (let i = 0; i < out.length; i++) {
    const my = aboutY[i] ?? NaN;
    const mz = aboutZ[i] ?? NaN;
    // At the corner where both moments add to that side.
    const y = mz > 0 ? -toward * halfWidth : toward * halfWidth;
    const z = my > 0 ? toward * halfHeight : -toward * halfHeight;
    out[i] = fibreStressAt(axial[i] ?? NaN, my, mz, y, z, section);
  }
};
