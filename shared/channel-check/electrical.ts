import type { Response } from '../model/calibration.ts';
import type { Ohm } from '../model/units.ts';
import { shuntStrain } from '../pipeline/2-ratio/shunt.ts';
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

/**
 * Resistance of the gauge to ground as it was measured, and the strain that it feigns where it
 * leaks past the gauge. Judged by the resistance; the false strain says what is at stake.
 */
export const insulationCheck = (response: Response, measured: Ohm | null, limits: Band): Check => {
  if (response.kind !== 'bridge') {
    return notJudged('insulation', 'Ohm', 'A transducer states no gauge to leak past.', measured);
  }
  if (measured === null) {
    return notJudged('insulation', 'Ohm', 'No resistance to ground has been entered.');
  }
  const falseStrain = shuntStrain(response.gaugeResistance, response.gaugeFactor, measured);
  return {
    kind: 'insulation',
    verdict: judge(measured, limits),
    figure: measured,
    unit: 'Ohm',
    why: `${inWords(measured, 'Ohm')} to ground: past the gauge such a leak feigns ${inWords(falseStrain, 'm/m')}.`,
    limits,
    also: [{ name: 'false strain of the leak', value: falseStrain, unit: 'm/m' }],
  };
};
