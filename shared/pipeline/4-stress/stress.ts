import type { Material, Measurand } from '../../model/site.ts';
import { pascal, share, type Pascal, type Share, type Strain } from '../../model/units.ts';

/** G = E / 2(1+ν), isotropic; EN 1993-1-1:2005 §3.2.6. */
export const shearModulus = ({ youngsModulus, poisson }: Material): Pascal =>
  pascal(youngsModulus / (2 * (1 + poisson)));

/**
 * Stress for a value of 1: σ = E·ε in a uniaxial field (Hooke's law), for a gauge at 45° in pure
 * shear τ = G·γ = 2G·ε, and 1 for a channel that is stress already. null for all else.
 */
export const stressPerStrain = (measurand: Measurand, material: Material): Pascal | null => {
  switch (measurand) {
    case 'strain':
      return material.youngsModulus;
    case 'shear':
      return pascal(2 * shearModulus(material));
    case 'stress':
      return pascal(1);
    case 'force':
    case 'displacement':
    case 'temperature':
    case 'moment':
    case 'angle':
    case 'number':
      return null;
  }
};

/**
 * Yield in the measurand's kind of stress: fy, or fy/√3 in shear by the von Mises criterion;
 * EN 1993-1-1:2005 §6.2.1(5), §6.2.6(4). null for what is neither strain nor stress.
 */
export const yieldFor = (measurand: Measurand, material: Material): Pascal | null => {
  switch (measurand) {
    case 'strain':
    case 'stress':
      return material.yieldStrength;
    case 'shear':
      return pascal(material.yieldStrength / Math.sqrt(3));
    case 'force':
    case 'displacement':
    case 'temperature':
    case 'moment':
    case 'angle':
    case 'number':
      return null;
  }
};

export const stressOf = (value: Strain, perStrain: Pascal): Pascal => pascal(value * perStrain);

/** Stress over yield, unsigned: 1 is at yield. */
export const utilisation = (stress: Pascal, yieldStrength: Pascal): Share =>
  share(Math.abs(stress) / yieldStrength);
