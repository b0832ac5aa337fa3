import type { BridgeResponse, LinearResponse } from '../../model/calibration.ts';
import {
  affine,
  apply,
  chain,
  inverse,
  type FractionalLinear,
} from '../../model/fractional-linear.ts';
import { CIRCUITS } from './circuits.ts';
import { excitationDrop, leadDesensitisation, leadUnbalance } from './leads.ts';

/** Exact inversion of the circuit, r = B·d/(4 + N·d): d = 4r/(B − N·r). */
export const armChange = ({ circuit, poisson }: BridgeResponse): FractionalLinear => {
  const { bridgeFactor, nonlinearity } = CIRCUITS[circuit];
  return { a: 4, b: 0, c: -nonlinearity(poisson), d: bridgeFactor(poisson) };
};

/** V/V at the instrument to d = ΔR/Rg of the gauge's arm without its leads, the zero still in it. */
const resistanceChange = (response: BridgeResponse): FractionalLinear =>
  chain(
    excitationDrop(response.leads, response.gaugeResistance),
    armChange(response),
    leadDesensitisation(response.leads, response.gaugeResistance),
  );

/** ΔR/Rg that the bridge shows in its zero state. */
export const zeroChange = (response: BridgeResponse): number =>
  apply(resistanceChange(response), response.zero);

/** What the gauge really has over its nominal resistance: its change is a share of that. */
const gaugeOverNominal = (response: BridgeResponse): number =>
  response.unbalance === 'gauge'
    ? 1 + zeroChange(response) - leadUnbalance(response.leads, response.gaugeResistance)
    : 1;

/**
 * V/V to strain of arm 1, m/m, tension positive: ε = (d − d0)/GF, GF as ASTM E251
 * defines it, (ΔR/R0)/ε. The zero is taken off after the exact inversion: taken
 * off as V/V it would leave an error that grows with the unbalance. For
 * `full-torsion` the strain is that of a gauge at 45°, γ/2.
 */
export const bridgeStrain = (response: BridgeResponse): FractionalLinear =>
  chain(
    resistanceChange(response),
    affine(1, -zeroChange(response)),
    affine(1 / (response.gaugeFactor * gaugeOverNominal(response))),
  );

/** Strain of arm 1 to the V/V of a bridge that shows `zero` without it. */
export const bridgeOutput = (response: BridgeResponse): FractionalLinear =>
  inverse(bridgeStrain(response));

/** A transducer's signal to N, m or °C. */
export const linearValue = ({ perUnit, zero }: LinearResponse): FractionalLinear =>
  affine(perUnit, -zero * perUnit);
