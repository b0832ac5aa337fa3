import type { BridgeResponse, LinearResponse } from '../../model/calibration.ts';
import {
  affine,
  apply,
  chain,
  inverse,
  type FractionalLinear,
} from '../../model/fractional-linear.ts';
import { CIRCUITS } from './circuits.ts';
import { leadFactor, leadUnbalance } from './leads.ts';

/** V/V to the d of the circuit, its exact inversion: r = B·d/(4 + N·d), so d = 4r/(B − N·r). */
export const circuitChange = ({ circuit, poisson }: BridgeResponse): FractionalLinear => {
  const { bridgeFactor, nonlinearity } = CIRCUITS[circuit];
  return { a: 4, b: 0, c: -nonlinearity(poisson), d: bridgeFactor(poisson) };
};

/** V/V to d = ΔR/Rg of the gauge, leads accounted for, the zero still in it. */
export const gaugeChange = (response: BridgeResponse): FractionalLinear =>
  chain(circuitChange(response), affine(leadFactor(response.leads, response.gaugeResistance)));

/** ΔR/Rg that the bridge shows in its zero state. */
export const zeroChange = (response: BridgeResponse): number =>
  apply(gaugeChange(response), response.zero);

/**
 * By how much the slope of the inversion at the zero exceeds that of a balanced bridge:
 * 1 + N/2·d0, with what untrimmed wires add left out of d0, for it alone does not scale the gauge.
 * A quarter bridge whose gauge or adjacent resistor is off its nominal value has exactly this
 * factor (R = Rg·(1+d0)·(1+GF·ε)); any other unbalance of any circuit, and an input's offset,
 * to the second order of d0: about 0.01 % of the strain for arms 2 % apart.
 */
export const unbalanceFactor = (response: BridgeResponse): number => {
  const unbalance = zeroChange(response) - leadUnbalance(response.leads, response.gaugeResistance);
  return 1 + (CIRCUITS[response.circuit].nonlinearity(response.poisson) / 2) * unbalance;
};

/**
 * V/V to strain of arm 1, m/m, tension positive: ε = (d − d0)/(GF·(1 + N/2·d0)), GF as ASTM E251
 * defines it, (ΔR/R0)/ε. The zero is taken off after the exact inversion, never as V/V with the
 * linear formula. For `full-torsion` the strain is that of a gauge at 45°, γ/2.
 */
export const bridgeStrain = (response: BridgeResponse): FractionalLinear =>
  chain(
    gaugeChange(response),
    affine(1, -zeroChange(response)),
    affine(1 / (response.gaugeFactor * unbalanceFactor(response))),
  );

/** Strain of arm 1, m/m, to the V/V of a bridge that shows `zero` without it. */
export const bridgeOutput = (response: BridgeResponse): FractionalLinear =>
  inverse(bridgeStrain(response));

/** A transducer's signal to N, m or °C. */
export const linearValue = ({ perUnit, zero }: LinearResponse): FractionalLinear =>
  affine(perUnit, -zero * perUnit);
