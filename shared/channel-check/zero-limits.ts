import type { Newton } from '../model/units.ts';
import { STRAIN_ZERO, type ZeroLimits } from './zero.ts';
import type { ValueUnit } from './verdict.ts';

/** A load may scatter by this share of the safe working load, and drift by as much a minute. */
const LOAD_SHARE = 0.001;
/** m, and m a minute. */
const DISPLACEMENT = 0.1e-3;

/**
 * What a zero of a channel is judged by; null where none can be taken: of a temperature, and of a
 * load whose structure states no safe working load. Common practice, no source.
 */
export const zeroLimits = (unit: ValueUnit, safeWorkingLoad: Newton | null): ZeroLimits | null => {
  const of = (size: number): ZeroLimits => ({ ...STRAIN_ZERO, noise: size, drift: size / 60 });
  switch (unit) {
    case 'm/m':
      return STRAIN_ZERO;
    case 'N':
      return safeWorkingLoad === null ? null : of(LOAD_SHARE * safeWorkingLoad);
    case 'm':
      return of(DISPLACEMENT);
    case 'Cel':
      return null;
  }
};
