import type { BridgeResponse, Leads } from '../model/calibration.ts';
import { apply, type FractionalLinear } from '../model/fractional-linear.ts';
import { ohm } from '../model/units.ts';
import { circuitChange, unbalanceFactor } from '../pipeline/3-strain/bridge.ts';
import { CIRCUITS } from '../pipeline/3-strain/circuits.ts';
import { leadFactor, leadUnbalance } from '../pipeline/3-strain/leads.ts';
import {
  outputChange,
  quadraticAt,
  scaled,
  substituted,
  sum,
  type Quadratic,
} from './quadratic.ts';

/** What a strain may be uncertain by, and the unit in which that is stated. */
export const STRAIN_INPUTS = {
  /** Share of the gauge factor. */
  gaugeFactor: '1',
  /** Share of the bridge output; the zero was read through the same input. */
  inputGain: '1',
  /** Share of the excitation that the output is divided by, at the zero as well. */
  excitation: '1',
  /** Of one conductor. */
  leadResistance: 'Ohm',
  /** Poisson's ratio itself. */
  poisson: '1',
  /** Share of the strain that a gauge off its direction, or its transverse sensitivity, may add. */
  misalignment: '1',
  thermalOutput: 'm/m',
  zero: 'm/m',
  zeroSignal: 'V/V',
  noise: 'm/m',
  noiseSignal: 'V/V',
  resolution: 'm/m',
  resolutionSignal: 'V/V',
} as const;
export type StrainInput = keyof typeof STRAIN_INPUTS;

/** What moves in ε = (x − x0)/S, S = GF·K/L, per unit of an input. x is `circuitChange` of r. */
interface Movement {
  /** Of x, as a quadratic in x. */
  readonly output: Quadratic;
  /** Of x0. */
  readonly zero: number;
  readonly leadFactor: number;
  readonly leadUnbalance: number;
  readonly nonlinearity: number;
}

const NOTHING: Quadratic = [0, 0, 0];
const STILL: Movement = {
  output: NOTHING,
  zero: 0,
  leadFactor: 0,
  leadUnbalance: 0,
  nonlinearity: 0,
};

/** The strain's answer to a movement, through bridge, leads and the zero's unbalance. */
const answer = (response: BridgeResponse, moved: Movement): Quadratic => {
  const { circuit, gaugeFactor, gaugeResistance, leads, poisson, zero } = response;
  const lead = leadFactor(leads, gaugeResistance);
  const x0 = apply(circuitChange(response), zero);
  const factor = unbalanceFactor(response);
  const slope = (gaugeFactor * factor) / lead;
  // K = 1 + N/2·(L·x0 − w), as unbalanceFactor has it.
  const unbalance = lead * x0 - leadUnbalance(leads, gaugeResistance);
  const factorMoved =
    (moved.nonlinearity * unbalance +
      CIRCUITS[circuit].nonlinearity(poisson) *
        (moved.leadFactor * x0 + lead * moved.zero - moved.leadUnbalance)) /
    2;
  const slopeMoved = factorMoved / factor - moved.leadFactor / lead;
  return sum(
    scaled(substituted(moved.output, slope, x0), 1 / slope),
    [-moved.zero / slope, 0, 0],
    [0, -slopeMoved, 0],
  );
};

/** Movement of x with the circuit's map, at the reading and (or) at the zero. */
const mapMoved = (response: BridgeResponse, change: FractionalLinear): Movement => {
  const map = circuitChange(response);
  const output = outputChange(map, change);
  return { ...STILL, output, zero: quadraticAt(output, apply(map, response.zero)) };
};

/** r → r + q: only the columns of the map that meet r move. */
const signalMoved = (response: BridgeResponse): Movement => {
  const { a, c } = circuitChange(response);
  return mapMoved(response, { a: 0, b: a, c: 0, d: c });
};

/** r → r·(1 + q). */
const gainMoved = (response: BridgeResponse): Movement => {
  const { a, c } = circuitChange(response);
  return mapMoved(response, { a, b: 0, c, d: 0 });
};

/** B and N of every circuit are linear in Poisson's ratio: a step of 1 has their slope exactly. */
const poissonMoved = (response: BridgeResponse): Movement => {
  const [at0, at1] = [0, 1].map((poisson) => circuitChange({ ...response, poisson }));
  const { nonlinearity } = CIRCUITS[response.circuit];
  if (!at0 || !at1) return STILL;
  const change = { a: at1.a - at0.a, b: at1.b - at0.b, c: at1.c - at0.c, d: at1.d - at0.d };
  return { ...mapMoved(response, change), nonlinearity: nonlinearity(1) - nonlinearity(0) };
};

/** The factor and unbalance of leads are linear in their resistance: 1 Ω has their slope exactly. */
const leadMoved = ({ leads, gaugeResistance }: BridgeResponse): Movement => {
  if (leads.kind === 'none') return STILL;
  const of = (resistance: number): Leads => ({ ...leads, resistance: ohm(resistance) });
  return {
    ...STILL,
    leadFactor: leadFactor(of(1), gaugeResistance) - leadFactor(of(0), gaugeResistance),
    leadUnbalance: leadUnbalance(of(1), gaugeResistance) - leadUnbalance(of(0), gaugeResistance),
  };
};

/**
 * ∂ε/∂input at a strain ε, m/m per unit of the input: exactly a quadratic in ε for every circuit,
 * for the conversion is fractional-linear. Other inputs stay, the node's figure as well.
 */
export const strainSensitivity = (response: BridgeResponse, input: StrainInput): Quadratic => {
  switch (input) {
    case 'gaugeFactor':
      return [0, -1, 0];
    case 'inputGain':
      return answer(response, gainMoved(response));
    case 'excitation':
      return scaled(answer(response, gainMoved(response)), -1);
    case 'leadResistance':
      return answer(response, leadMoved(response));
    case 'poisson':
      return answer(response, poissonMoved(response));
    case 'misalignment':
      return [0, 1, 0];
    case 'zeroSignal':
      return answer(response, { ...signalMoved(response), output: NOTHING });
    case 'noiseSignal':
    case 'resolutionSignal':
      return answer(response, { ...signalMoved(response), zero: 0 });
    case 'thermalOutput':
    case 'zero':
      return [-1, 0, 0];
    case 'noise':
    case 'resolution':
      return [1, 0, 0];
  }
};
