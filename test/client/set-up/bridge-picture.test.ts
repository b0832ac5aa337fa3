import { describe, expect, test } from 'vitest';
import { armsOf, bridgeWords, leadMarks } from '../../../client/state/set-up/bridge-picture.ts';
import { expectedOutput } from '../../../client/state/set-up/expected-output.ts';
import { bridgeOf } from '../../../client/state/set-up/record-of-file.ts';
import { microstrainToStrain } from '../../../shared/model/units.ts';
import { CIRCUITS } from '../../../shared/pipeline/3-strain/circuits.ts';
import type { BridgeCircuit } from '../../../shared/model/calibration.ts';

const CIRCUIT_NAMES = Object.keys(CIRCUITS) as BridgeCircuit[];

const bridge = (circuit: BridgeCircuit, leads: object = { kind: 'none' }, over: object = {}) => {
  const response = {
    ...{ kind: 'bridge', circuit, gauge_factor: 2, gauge_resistance_ohm: 120 },
    ...{ leads: leads as never, zero_mV_per_V: 0, ...over },
  };
  const found = bridgeOf(response, 0.3);
  if (!found) throw new Error(`no bridge of ${circuit}`);
  return found;
};

const SEEN: Readonly<Record<string, (nu: number) => number>> = {
  fixed: () => 0,
  'gauge +ε': () => 1,
  'gauge −ε': () => -1,
  'gauge +νε': (nu) => nu,
  'gauge −νε': (nu) => -nu,
  'gauge +45°': () => 1,
  'gauge −45°': () => -1,
};

// r ≈ ¼·(δ1 − δ2 + δ3 − δ4): Dally and Riley, Experimental Stress Analysis, the Wheatstone bridge.
test.each(CIRCUIT_NAMES)('the arms drawn of %s make its bridge factor', (circuit) => {
  const [a = 0, b = 0, c = 0, d = 0] = armsOf(circuit).map(({ mark }) => SEEN[mark]?.(0.3));
  expect(a - b + c - d).toBeCloseTo(CIRCUITS[circuit].bridgeFactor(0.3), 12);
});

// Exact output from a nodal solution of the ring, GF 2, ν 0.3, mV/V at 1000 µε.
test.each([
  ['quarter', 0.4995004995],
  ['half-poisson', 0.649545318277],
  ['half-bending', 1],
  ['half-opposite', 0.999000999001],
  ['full-bending', 2],
  ['full-axial-poisson', 1.29909063655],
  ['full-bending-poisson', 1.3],
] as const)('%s is expected to show %d mV/V at 1000 µε', (circuit, output) => {
  const expected = expectedOutput(bridge(circuit), 5, microstrainToStrain(1000));
  expect(expected?.output).toBeCloseTo(output, 9);
  expect(expected?.millivolts).toBeCloseTo(output * 5, 8);
});

// 120 Ω, three wires of 2 Ω, 1000 µε, GF 2: change of 0.491320013 mV/V, from a nodal solution.
test('lead wires and the zero are in the expected output', () => {
  const wired = bridge('quarter', { kind: 'three-wire', resistance_ohm: 2 });
  const strain = microstrainToStrain(1000);
  expect(expectedOutput(wired, null, strain)?.output).toBeCloseTo(0.491320013, 8);
  const shifted = bridge('half-bending', { kind: 'none' }, { zero_mV_per_V: 0.25 });
  expect(expectedOutput(shifted, null, strain)).toEqual({
    output: expect.closeTo(1.25, 9),
    ...{ zero: 0.25, millivolts: null },
  });
});

test('nothing is expected of a bridge without its figures', () => {
  const bare = bridgeOf({ circuit: 'quarter', leads: { kind: 'none' } }, 0.3);
  expect(bare && expectedOutput(bare, null, microstrainToStrain(1000))).toBeNull();
  expect(bridgeOf({ kind: 'linear' }, 0.3)).toBeNull();
});

describe('conductors are drawn in the arms they lie in', () => {
  test.each([
    ['quarter', { kind: 'three-wire', resistance_ohm: 1 }, [1, 1, 0, 0]],
    ['quarter', { kind: 'two-wire', resistance_ohm: 1, trimmed: false }, [2, 0, 0, 0]],
    ['quarter', { kind: 'two-wire', resistance_ohm: 1, trimmed: true }, [2, 2, 0, 0]],
    ['half-opposite', { kind: 'three-wire', resistance_ohm: 1 }, [1, 1, 1, 1]],
    ['half-bending', { kind: 'two-wire', resistance_ohm: 1, trimmed: true }, [2, 2, 0, 0]],
    ['full-bending', { kind: 'excitation', resistance_ohm: 1 }, [0, 0, 0, 0]],
  ] as const)('%s, %j', (circuit, leads, marks) => {
    expect(leadMarks(bridge(circuit, leads))).toEqual(marks);
  });
});

test('the drawing has words that say the same', () => {
  const words = bridgeWords(bridge('quarter', { kind: 'three-wire', resistance_ohm: 0.7 }), '5 V');
  expect(words).toBe(
    'Quarter bridge. Round the ring arm 1 is a gauge that sees the strain, arm 2 is a fixed resistor, arm 3 is a fixed resistor, arm 4 is a fixed resistor. Leads: one conductor in the arm of each gauge, one in the adjacent arm, the third in the output, 0.7\u00a0Ω each. Excitation: 5 V.',
  );
});
