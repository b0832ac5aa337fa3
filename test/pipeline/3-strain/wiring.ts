import type { BridgeCircuit, BridgeResponse } from '../../../shared/model/calibration.ts';
import { nodeVoltages, type Resistor } from './nodal.ts';

type Four = readonly [number, number, number, number];

/** Changes of arms 1 to 4 as multiples of d, as the trade draws each circuit. */
const ARMS: Record<BridgeCircuit, (nu: number) => Four> = {
  quarter: () => [1, 0, 0, 0],
  'half-poisson': (nu) => [1, -nu, 0, 0],
  'half-bending': () => [1, -1, 0, 0],
  'half-opposite': () => [1, 0, 1, 0],
  'full-bending': () => [1, -1, 1, -1],
  'full-bending-poisson': (nu) => [1, -1, nu, -nu],
  'full-axial-poisson': (nu) => [1, -nu, 1, -nu],
  'full-torsion': () => [1, -1, 1, -1],
};

/** Conductors in series with arms 1 to 4. A half bridge's gauges are wired alike. */
const conductorsInArms = ({ circuit, leads }: BridgeResponse): Four => {
  const bothHalves = circuit === 'half-opposite';
  switch (leads.kind) {
    case 'three-wire':
      return bothHalves ? [1, 1, 1, 1] : [1, 1, 0, 0];
    case 'two-wire': {
      const adjacent = leads.trimmed ? 2 : 0;
      return bothHalves ? [2, adjacent, 2, adjacent] : [2, adjacent, 0, 0];
    }
    case 'none':
    case 'excitation':
      return [0, 0, 0, 0];
  }
};

/** Corners of the ring that arms 1 to 4 lie between; A and B are the output. */
const CORNERS = [
  ['P', 'A'],
  ['A', 'Q'],
  ['Q', 'B'],
  ['B', 'P'],
] as const;

/**
 * Output over a supply of 1 V of the bridge, drawn with each conductor as a resistor of its own.
 * `off` are the ratios of arms 1 to 4 to the nominal resistance before any strain.
 */
export const networkOutput = (of: BridgeResponse, strain: number, off: Four = [1, 1, 1, 1]) => {
  const conductor = of.leads.kind === 'none' ? 0 : of.leads.resistance;
  const changes = ARMS[of.circuit](of.poisson);
  const inArms = conductorsInArms(of);
  const network: Resistor[] = [];
  CORNERS.forEach(([from, to], i) => {
    const change = (changes[i] ?? NaN) * of.gaugeFactor * strain;
    let at: string = from;
    for (let n = 0; n < (inArms[i] ?? NaN); n++) {
      network.push([at, `${from}${to}${n}`, conductor]);
      at = `${from}${to}${n}`;
    }
    network.push([at, to, of.gaugeResistance * (off[i] ?? NaN) * (1 + change)]);
  });
  // Third wires end in an input that draws no current.
  if (of.leads.kind === 'three-wire') network.push(['A', 'input+', conductor]);
  const excitationLeads = of.leads.kind === 'excitation';
  if (excitationLeads) network.push(['supply', 'P', conductor], ['Q', 'return', conductor]);
  const held: Record<string, number> = excitationLeads ? { supply: 1, return: 0 } : { P: 1, Q: 0 };
  const voltages = nodeVoltages(network, held);
  const output = of.leads.kind === 'three-wire' ? 'input+' : 'A';
  // Positive for arm 1 in tension.
  return (voltages.get('B') ?? NaN) - (voltages.get(output) ?? NaN);
};
