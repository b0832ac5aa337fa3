import type { HeatSink, Response } from '../model/calibration.ts';
import type { Ohm, SquareMetre, Volt } from '../model/units.ts';
import { shuntStrain } from '../pipeline/2-ratio/shunt.ts';
import {
  ALLOWABLE_DENSITY,
  dissipatedPower,
  powerDensity,
} from '../pipeline/3-strain/excitation.ts';
import { judge, notJudged, type Band, type Check } from './verdict.ts';
import { inWords } from './words.ts';

/** What warms a gauge's grid and what carries the warmth off. */
export interface Heating {
  /** Across the bridge. */
  readonly excitation: Volt;
  /** Length times width of the grid. */
  readonly gridArea: SquareMetre;
  readonly on: HeatSink;
}

/** Power over the grid's area against the range of Dally and Riley's table for what it sits on. */
export const heatingCheck = (response: Response, heating: Heating | null): Check => {
  const kind = 'self-heating';
  if (response.kind !== 'bridge') {
    return notJudged(kind, 'W/m2', 'A transducer states no grid that could warm.');
  }
  if (heating === null) {
    return notJudged(kind, 'W/m2', 'Excitation and grid area are not both stated.');
  }
  const power = dissipatedPower(heating.excitation, response.gaugeResistance);
  const density = powerDensity(power, heating.gridArea);
  const { low: good, high: bad } = ALLOWABLE_DENSITY[heating.on];
  const verdict = judge(density, { good, bad });
  const [low, high] = [inWords(good, 'W/m2'), inWords(bad, 'W/m2')];
  return {
    kind,
    verdict,
    figure: density,
    unit: 'W/m2',
    why: `${inWords(density, 'W/m2')} of grid, where ${low} to ${high} are carried off${
      verdict === 'fail' ? ': the excitation is too high, the gauge warms and drifts' : ''
    }.`,
    limits: { good, bad },
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
