import type { BridgeCircuit, BridgeResponse, Leads } from '../../model/calibration.ts';
import { ohm, ratio, strain, type Ohm, type Ratio, type Strain } from '../../model/units.ts';

/** Round the ring; arm 1 sees the strain that is reported. */
export type Arm = 1 | 2 | 3 | 4;

/**
 * A resistor laid across one arm of a bridge. `arm`: across that arm's own resistor, leads outside
 * of it: at the gauge, or inside the instrument on a fixed resistor. `instrument`: at the
 * instrument's terminals, across the gauge and the conductors in its arm, on a wire of its own.
 * `output-wire`: the same, but the shunt's current returns by the third wire, whose drop the
 * instrument then sees.
 */
export interface Shunt {
  readonly arm: Arm;
  readonly at: 'arm' | 'instrument' | 'output-wire';
  readonly resistance: Ohm;
}

/** A fixed resistor beside arm 1, whose shunt reads as tension; null where every arm is a gauge. */
export const dummyArm = (circuit: BridgeCircuit): Arm | null => {
  switch (circuit) {
    case 'quarter':
    case 'half-opposite':
      return 2;
    case 'half-poisson':
    case 'half-bending':
      return 4;
    case 'full-bending':
    case 'full-bending-poisson':
    case 'full-axial-poisson':
    case 'full-torsion':
      return null;
  }
};

/**
 * Strain of a gauge that changes it as a resistor across it does: −Rg/(GF·(Rg+Rs)), exact. A
 * leaking insulation is such a resistor, and this the false strain that it brings. Source: parallel
 * resistors and the gauge factor of ASTM E251, ΔR/R = GF·ε.
 */
export const shuntStrain = (gaugeResistance: Ohm, gaugeFactor: number, across: Ohm): Strain =>
  strain(-gaugeResistance / (gaugeFactor * (gaugeResistance + across)));

/**
 * The resistor across a gauge that stands for a compression: Rs = Rg·(1/(GF·|ε|) − 1), the inverse
 * of `shuntStrain`. Also the insulation resistance that a false strain would come from. Infinity
 * for a strain of 0.
 */
export const shuntResistor = (
  gaugeResistance: Ohm,
  gaugeFactor: number,
  compression: Strain,
): Ohm => ohm(gaugeResistance * (1 / (gaugeFactor * Math.abs(compression)) - 1));

type Four = readonly [number, number, number, number];

/** Conductors in series with each arm; a half bridge's gauges are wired alike. */
const conductors = (circuit: BridgeCircuit, leads: Leads): Four => {
  const isBothHalves = circuit === 'half-opposite';
  switch (leads.kind) {
    case 'three-wire':
      return isBothHalves ? [1, 1, 1, 1] : [1, 1, 0, 0];
    case 'two-wire': {
      const adjacent = leads.trimmed ? 2 : 0;
      return isBothHalves ? [2, adjacent, 2, adjacent] : [2, adjacent, 0, 0];
    }
    case 'none':
    case 'excitation':
      return [0, 0, 0, 0];
  }
};

/** A place where a shunt cannot be, or null. */
export const shuntFault = (
  circuit: BridgeCircuit,
  leads: Leads,
  { arm, at }: Shunt,
): { expected: string; came: string } | null => {
  if (at !== 'output-wire') return null;
  const hasThirdWire = leads.kind === 'three-wire' && conductors(circuit, leads)[arm - 1] === 1;
  return hasThirdWire
    ? null
    : { expected: 'an arm with three-wire leads', came: `arm ${arm}, ${leads.kind} leads` };
};

/** Conductances between the supply's terminals P, Q and the output's corners A, B, 1/Ω. */
interface Mesh {
  readonly pa: number;
  readonly qa: number;
  readonly qb: number;
  readonly pb: number;
  readonly ab: number;
}

/** The ring with a conductor in each supply line: both supply corners by star to delta. */
const meshOf = ([r1, r2, r3, r4]: Four, line: number): Mesh => ({
  pa: 1 / (line + r1 + (line * r1) / r4),
  pb: 1 / (line + r4 + (line * r4) / r1),
  qa: 1 / (line + r2 + (line * r2) / r3),
  qb: 1 / (line + r3 + (line * r3) / r2),
  ab: 1 / (r1 + r4 + (r1 * r4) / line) + 1 / (r2 + r3 + (r2 * r3) / line),
});

/** Voltages of A and B, and B − A without their cancellation, over the supply. */
const solve = ({ pa, qa, qb, pb, ab }: Mesh) => {
  const [atA, atB] = [pa + qa + ab, pb + qb + ab];
  const determinant = atA * atB - ab * ab;
  return {
    a: (atB * pa + ab * pb) / determinant,
    b: (atA * pb + ab * pa) / determinant,
    output: (pb * qa - pa * qb) / determinant,
  };
};

const BETWEEN = { 1: 'pa', 2: 'qa', 3: 'qb', 4: 'pb' } as const;

const parallel = (one: number, other: number): number => (one * other) / (one + other);

/** Drop along the third wire that the shunt's current passes, toward the output. */
const wireDrop = (arm: Arm, a: number, b: number): number => {
  switch (arm) {
    case 1:
      return a - 1;
    case 2:
      return a;
    case 3:
      return -b;
    case 4:
      return 1 - b;
  }
};

/**
 * Bridge output over excitation, V/V, of unstrained gauges of the stated resistance, with a shunt
 * or none (null); exact, leads and all. Excitation is that at the instrument's terminals. For what
 * `shuntFault` passes. Source: Kirchhoff's current law at both output corners.
 */
export const shuntedOutput = (
  { circuit, leads, gaugeResistance }: BridgeResponse,
  shunt: Shunt | null,
): Ratio => {
  const conductor = leads.kind === 'none' ? 0 : leads.resistance;
  const counts = conductors(circuit, leads);
  const armWith = (arm: Arm): number =>
    (shunt?.at === 'arm' && shunt.arm === arm
      ? parallel(gaugeResistance, shunt.resistance)
      : gaugeResistance) +
    (counts[arm - 1] ?? 0) * conductor;
  const line = leads.kind === 'excitation' ? conductor : 0;
  const mesh = meshOf([armWith(1), armWith(2), armWith(3), armWith(4)], line);
  if (shunt === null || shunt.at === 'arm') return ratio(solve(mesh).output);
  const wire = shunt.at === 'output-wire' ? conductor : 0;
  const way = BETWEEN[shunt.arm];
  const path = shunt.resistance + wire;
  const { a, b, output } = solve({ ...mesh, [way]: mesh[way] + 1 / path });
  return ratio(output + (wire / path) * wireDrop(shunt.arm, a, b));
};
