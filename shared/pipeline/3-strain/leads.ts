import type { BridgeCircuit, Leads } from '../../model/calibration.ts';
import type { Ohm } from '../../model/units.ts';

const nameOf = (leads: Leads): string =>
  leads.kind === 'two-wire' ? `two-wire ${leads.trimmed ? 'trimmed' : 'untrimmed'}` : leads.kind;

const ONE_GAUGE_A_HALF = ['none', 'two-wire trimmed', 'two-wire untrimmed', 'three-wire'];
/** The adjacent arm is a gauge as well: its own two wires hold as much. */
const TWO_GAUGES_A_HALF = ['none', 'two-wire trimmed', 'three-wire'];
const FULL = ['none', 'excitation'];

const ADMITTED: Readonly<Record<BridgeCircuit, readonly string[]>> = {
  quarter: ONE_GAUGE_A_HALF,
  'half-poisson': TWO_GAUGES_A_HALF,
  'half-bending': TWO_GAUGES_A_HALF,
  'half-opposite': ONE_GAUGE_A_HALF,
  'full-bending': FULL,
  'full-bending-poisson': FULL,
  'full-axial-poisson': FULL,
  'full-torsion': FULL,
};

/** Leads for which a circuit has no exact model, or null where it has one. */
export const leadFault = (
  circuit: BridgeCircuit,
  leads: Leads,
): { expected: string; came: string } | null => {
  const admitted = ADMITTED[circuit];
  const came = nameOf(leads);
  return admitted.includes(came)
    ? null
    : { expected: `${admitted.join(', ')} with a ${circuit} bridge`, came };
};

/**
 * What d = ΔR/Rg of the gauge is over the d that the circuit's exact inversion gives, at least 1.
 * Leads share the resistance of the arms they lie in: with three wires one conductor in each of
 * two adjacent arms, with two trimmed ones two. In r = B·d/(4k + N·d) of a full bridge, k is the
 * same factor: its resistance, Rg·(1 + N·d/4), divides the excitation with two conductors. Two
 * untrimmed wires only add to the arm's ΔR, and the factor is 1.
 */
export const leadFactor = (leads: Leads, gaugeResistance: Ohm): number => {
  switch (leads.kind) {
    case 'none':
      return 1;
    case 'three-wire':
      return (gaugeResistance + leads.resistance) / gaugeResistance;
    case 'two-wire':
      return leads.trimmed ? (gaugeResistance + 2 * leads.resistance) / gaugeResistance : 1;
    case 'excitation':
      return (gaugeResistance + 2 * leads.resistance) / gaugeResistance;
  }
};

/** ΔR/Rg that two untrimmed wires add to the arm, and so to the zero; else 0. */
export const leadUnbalance = (leads: Leads, gaugeResistance: Ohm): number =>
  leads.kind === 'two-wire' && !leads.trimmed ? (2 * leads.resistance) / gaugeResistance : 0;
