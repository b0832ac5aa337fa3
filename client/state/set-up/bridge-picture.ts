/** A bridge as it is drawn and told. Arms round the ring as in shared/pipeline/3-strain/circuits. */
import type { BridgeCircuit, BridgeResponse, Leads } from '../../../shared/model/calibration.ts';
import { NO_BREAK } from '../number-text.ts';
import { choiceText } from './words.ts';

export interface Arm {
  readonly isGauge: boolean;
  /** What it sees, beside the arm. */
  readonly mark: string;
  /** The same in a sentence. */
  readonly words: string;
}

const FIXED: Arm = { isGauge: false, mark: 'fixed', words: 'a fixed resistor' };
const gauge = (mark: string, words: string): Arm => ({ isGauge: true, mark, words });
const PLUS = gauge('gauge +ε', 'a gauge that sees the strain');
const MINUS = gauge('gauge −ε', 'a gauge on the opposite side that sees the strain reversed');
const CROSS = gauge('gauge −νε', 'a gauge crosswise that sees −ν times the strain');
const CROSS_BACK = gauge(
  'gauge +νε',
  'a gauge crosswise on the opposite side that sees +ν times the strain',
);
const UP = gauge('gauge +45°', 'a gauge at +45° that sees half the shear strain');
const DOWN = gauge('gauge −45°', 'a gauge at −45° that sees half the shear strain reversed');

const ARMS: Readonly<Record<BridgeCircuit, readonly [Arm, Arm, Arm, Arm]>> = {
  quarter: [PLUS, FIXED, FIXED, FIXED],
  'half-poisson': [PLUS, CROSS, FIXED, FIXED],
  'half-bending': [PLUS, MINUS, FIXED, FIXED],
  'half-opposite': [PLUS, FIXED, PLUS, FIXED],
  'full-bending': [PLUS, MINUS, PLUS, MINUS],
  'full-bending-poisson': [PLUS, MINUS, CROSS_BACK, CROSS],
  'full-axial-poisson': [PLUS, CROSS, PLUS, CROSS],
  'full-torsion': [UP, DOWN, UP, DOWN],
};

/** Arms 1 to 4 round the ring: excitation across 1|4 and 2|3, output across 1|2 and 3|4. */
export const armsOf = (circuit: BridgeCircuit): readonly [Arm, Arm, Arm, Arm] => ARMS[circuit];

/** How many conductors lie in each arm. */
export const leadMarks = ({
  circuit,
  leads,
}: Pick<BridgeResponse, 'circuit' | 'leads'>): readonly number[] => {
  const gauges = ARMS[circuit].map(({ isGauge }) => isGauge);
  switch (leads.kind) {
    case 'none':
    case 'excitation':
      return [0, 0, 0, 0];
    case 'two-wire':
      // Trimmed: the adjacent arm holds as much as the gauge's.
      return gauges.map((isGauge, i) => (isGauge || (leads.trimmed && gauges[i ^ 1]) ? 2 : 0));
    case 'three-wire':
      return gauges.map((isGauge, i) => (isGauge || gauges[i ^ 1] ? 1 : 0));
  }
};

const leadWords = (leads: Leads): string => {
  const ohms =
    'resistance' in leads && Number.isFinite(leads.resistance)
      ? `${leads.resistance}${NO_BREAK}Ω each`
      : 'resistance not stated';
  switch (leads.kind) {
    case 'none':
      return 'Leads: none worth counting.';
    case 'two-wire':
      return `Leads: two conductors in the arm of each gauge, ${ohms}${leads.trimmed ? '; the adjacent arm holds as much' : '; the adjacent arm holds none'}.`;
    case 'three-wire':
      return `Leads: one conductor in the arm of each gauge, one in the adjacent arm, the third in the output, ${ohms}.`;
    case 'excitation':
      return `Leads: the excitation drops along two conductors, ${ohms}.`;
  }
};

/** The drawing in words. */
export const bridgeWords = (bridge: BridgeResponse, excitation: string | null): string => {
  const arms = ARMS[bridge.circuit].map(({ words }, i) => `arm ${i + 1} is ${words}`).join(', ');
  const supply = excitation === null ? '' : ` Excitation: ${excitation}.`;
  return `${choiceText('circuit', bridge.circuit)}. Round the ring ${arms}. ${leadWords(bridge.leads)}${supply}`;
};
