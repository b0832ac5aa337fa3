import type { Section } from '../../model/site.ts';
import {
  pascal,
  strain,
  type Metre,
  type Newton,
  type NewtonMetre,
  type Pascal,
  type Strain,
} from '../../model/units.ts';

/** Axial force, tension positive, and moments about the strong and the weak axis. */
export interface SectionForces {
  readonly axial: Newton;
  readonly aboutY: NewtonMetre;
  readonly aboutZ: NewtonMetre;
}

/** A place in a section from its centroid; axes of EN 1993-1-1 §1.7, y to the side, z up. */
export interface SectionPoint {
  readonly y: Metre;
  readonly z: Metre;
}

/**
 * σ = N/A + My·z/Iy − Mz·y/Iz, in Pa on bare numbers, for it runs a sample. Plane sections stay
 * plane; My > 0 brings tension at +z, Mz > 0 at −y.
 */
export const fibreStressAt = (
  axial: number,
  aboutY: number,
  aboutZ: number,
  y: number,
  z: number,
  { area, inertiaY, inertiaZ }: Section,
): number => axial / area + (aboutY * z) / inertiaY - (aboutZ * y) / inertiaZ;

export const fibreStress = (
  { axial, aboutY, aboutZ }: SectionForces,
  { y, z }: SectionPoint,
  section: Section,
): Pascal => pascal(fibreStressAt(axial, aboutY, aboutZ, y, z, section));

/** ε = σ/E of the fibre. */
export const fibreStrain = (
  forces: SectionForces,
  point: SectionPoint,
  section: Section,
  youngsModulus: Pascal,
): Strain => strain(fibreStress(forces, point, section) / youngsModulus);
