import type { BridgeCircuit, Leads } from '../../model/calibration.ts';
import { affine, IDENTITY, type FractionalLinear } from '../../model/fractional-linear.ts';
import type { Ohm } from '../../model/units.ts';
import { CIRCUITS } from './circuits.ts';

const ADMITTED: Readonly<Record<1 | 2 | 4, readonly Leads['kind'][]>> = {
  1: ['none', 'two-wire', 'three-wire'],
  2: ['none', 'three-wire'],
  4: ['none', 'excitation'],
};

/** Leads that a circuit cannot have, or null. */
export const leadFault = (
  circuit: BridgeCircuit,
  leads: Leads,
): { expected: string; came: string } | null => {
  const admitted =
    circuit === 'half-opposite' ? (['none'] as const) : ADMITTED[CIRCUITS[circuit].gauges];
  return admitted.some((kind) => kind === leads.kind)
    ? null
    : { expected: `${admitted.join(', ')} with a ${circuit} bridge`, came: leads.kind };
};

/**
 * True bridge output r from that seen at the instrument: the excitation of a
 * full bridge drops along two conductors, Rb/(Rb + 2·RL). A full bridge of equal
 * arms has Rb = Rg.
 */
export const excitationDrop = (leads: Leads, gaugeResistance: Ohm): FractionalLinear =>
  leads.kind === 'excitation'
    ? affine((gaugeResistance + 2 * leads.resistance) / gaugeResistance)
    : IDENTITY;

/**
 * True d = ΔR/Rg from that of the whole arm. Leads in an arm share its
 * resistance: with three wires one conductor lies in each of two adjacent arms,
 * with two trimmed ones both in the gauge's and as much in the adjacent arm.
 * With two wires untrimmed the bridge is unbalanced by them and the zero, taken
 * off after the exact inversion, removes that: d stays whole.
 */
export const leadDesensitisation = (leads: Leads, gaugeResistance: Ohm): FractionalLinear => {
  switch (leads.kind) {
    case 'none':
    case 'excitation':
      return IDENTITY;
    case 'three-wire':
      return affine((gaugeResistance + leads.resistance) / gaugeResistance);
    case 'two-wire':
      return leads.trimmed
        ? affine((gaugeResistance + 2 * leads.resistance) / gaugeResistance)
        : IDENTITY;
  }
};

/** ΔR/Rg by which two untrimmed wires put a quarter bridge out of balance. */
export const leadUnbalance = (leads: Leads, gaugeResistance: Ohm): number =>
  leads.kind === 'two-wire' && !leads.trimmed ? (2 * leads.resistance) / gaugeResistance : 0;
