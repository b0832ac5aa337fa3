import type { Ohm, Strain } from '../model/units.ts';
import { judge, notJudged, type Band, type Check } from './verdict.ts';
import { inWords } from './words.ts';

/** Power in the grid over its area, and what its backing and the metal under it may take, W/m². */
export interface Heating {
  readonly density: number;
  /** `good`: the low end of the range allowed, `bad`: the high end. */
  readonly allowed: Band;
}

export const heatingCheck = (heating: Heating | null): Check => {
  const kind = 'self-heating';
  if (heating === null) {
    return notJudged(kind, 'W/m2', 'Excitation and grid area are not both stated.');
  }
  const { density, allowed } = heating;
  const verdict = judge(density, allowed);
  const [low, high] = [inWords(allowed.good, 'W/m2'), inWords(allowed.bad, 'W/m2')];
  return {
    kind,
    verdict,
    figure: density,
    unit: 'W/m2',
    why: `${inWords(density, 'W/m2')} of grid, of ${low} to ${high} that the metal under it carries off${
      verdict === 'fail' ? ': the excitation is too high, the gauge warms and drifts' : ''
    }.`,
    limits: allowed,
    also: [],
  };
};

/** Resistance of the gauge to ground as it was measured, and the strain that such a leak feigns. */
export interface Leak {
  readonly resistance: Ohm;
  /** Of the leak as a shunt across the gauge, m/m. */
  readonly falseStrain: Strain;
}

/** Judged by the resistance; the false strain says what is at stake. */
export const insulationCheck = (leak: Leak | null, limits: Band): Check => {
  if (leak === null) {
    return notJudged('insulation', 'Ohm', 'No resistance to ground has been entered.');
  }
  const { resistance, falseStrain } = leak;
  return {
    kind: 'insulation',
    verdict: judge(resistance, limits),
    figure: resistance,
    unit: 'Ohm',
    why: `${inWords(resistance, 'Ohm')} to ground: across the gauge such a leak feigns up to ${inWords(falseStrain, 'm/m')}.`,
    limits,
    also: [{ name: 'false strain of the leak', value: falseStrain, unit: 'm/m' }],
  };
};
