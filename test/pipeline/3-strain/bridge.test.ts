import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { BridgeCircuit, BridgeResponse, Leads } from '../../../shared/model/calibration.ts';
import { apply, chain } from '../../../shared/model/fractional-linear.ts';
import { ohm, ratio } from '../../../shared/model/units.ts';
import {
  bridgeOutput,
  bridgeStrain,
  zeroChange,
} from '../../../shared/pipeline/3-strain/bridge.ts';
import { CIRCUITS } from '../../../shared/pipeline/3-strain/circuits.ts';
import { leadFault } from '../../../shared/pipeline/3-strain/leads.ts';
import { nodalOutput } from './nodal.ts';

const NONE: Leads = { kind: 'none' };

const bridge = (circuit: BridgeCircuit, change: Partial<BridgeResponse> = {}): BridgeResponse => ({
  kind: 'bridge',
  circuit,
  gaugeFactor: 2,
  gaugeResistance: ohm(120),
  poisson: 0.3,
  leads: NONE,
  zero: ratio(0),
  unbalance: 'circuit',
  ...change,
});

const outputMillivolt = (response: BridgeResponse, microstrain: number) =>
  apply(bridgeOutput(response), microstrain * 1e-6) * 1e3;

// r = R1/(R1+R2) − R4/(R3+R4) worked out per circuit, mV/V at GF 2 and ν 0.3 (computed from a
// nodal solve; formula: Dally & Riley, Experimental Stress Analysis, value from memory).
describe('bridge output of each circuit, mV/V', () => {
  const circuits = [
    ...(['quarter', 'half-poisson', 'half-bending', 'half-opposite'] as const),
    ...(['full-bending', 'full-axial-poisson', 'full-bending-poisson'] as const),
  ];
  test.each([
    [1000, [0.4995004995, 0.649545318277, 1, 0.999000999001, 2, 1.29909063655, 1.3]],
    [-1000, [-0.500500500501, -0.650455318723, -1, -1.001001001, -2, -1.30091063745, -1.3]],
    [2000, [0.998003992016, 1.29818254444, 2, 1.99600798403, 4, 2.59636508888, 2.6]],
    [10000, [4.9504950495, 6.454816286, 10, 9.90099009901, 20, 12.909632572, 13]],
  ] as const)('%d µε', (microstrain, expected) => {
    circuits.forEach((circuit, i) => {
      expect(outputMillivolt(bridge(circuit), microstrain)).toBeCloseTo(expected[i] ?? NaN, 8);
    });
  });

  test('torsion: CHS 168.3×6.3, 10 kNm, G 81 000: 246.551642 µε at 45° gives 0.493103285 mV/V', () => {
    expect(outputMillivolt(bridge('full-torsion'), 246.551642)).toBeCloseTo(0.493103285, 8);
  });

  test('a quarter bridge gives more for −1000 µε than for +1000 µε', () => {
    const at = (microstrain: number) => Math.abs(outputMillivolt(bridge('quarter'), microstrain));
    expect(at(-1000)).toBeGreaterThan(at(1000));
  });

  test('Poisson half bridges are not linear, bending half and full bridges are', () => {
    const error = (circuit: BridgeCircuit) =>
      outputMillivolt(bridge(circuit), 10000) / (10 * outputMillivolt(bridge(circuit), 1000)) - 1;
    expect(error('half-poisson')).toBeLessThan(-0.005);
    for (const circuit of ['half-bending', 'full-bending', 'full-bending-poisson'] as const) {
      expect(error(circuit)).toBeCloseTo(0, 12);
    }
  });
});

describe('exact inversion where a linear formula would be wrong', () => {
  // What 4r/GF would read, µε (computed): 1/(1 + d/2) of the true strain.
  test.each([
    [100, 99.99],
    [500, 499.75012],
    [1000, 999.000999],
    [-1000, -1001.001001],
    [2000, 1996.00798],
    [3000, 2991.02692],
    [5000, 4975.12438],
    [10000, 9900.9901],
  ])('%d µε would read %d linearly', (microstrain, linear) => {
    const r = outputMillivolt(bridge('quarter'), microstrain) / 1e3;
    expect(((4 * r) / 2) * 1e6).toBeCloseTo(linear, 4);
    expect(apply(bridgeStrain(bridge('quarter')), r) * 1e6).toBeCloseTo(microstrain, 8);
  });

  test('Wheeler & Ganji, Introduction to Engineering Experimentation, ch. 8: 12.5 mV of 2 V, S 2.09', () => {
    const response = bridge('quarter', { gaugeFactor: 2.09 });
    expect(apply(bridgeStrain(response), 12.5e-3 / 2) * 1e6).toBeCloseTo(12113.14, 2);
  });

  test('r 0.5 mV/V at GF 2.10 is 953.334287 µε', () => {
    // The small-signal figure is 4r/GF = 952.380952 µε.
    const response = bridge('quarter', { gaugeFactor: 2.1 });
    expect(apply(bridgeStrain(response), 0.5e-3) * 1e6).toBeCloseTo(953.334287, 6);
  });

  test('a gauge 2 % over nominal: exact inversion, then the zero, gives 1000 µε; a linear Δr 998.893', () => {
    const arms = (d: number) => [120 * 1.02 * (1 + d), 120, 120, 120] as const;
    const [zero, loaded] = [0, 2e-3].map((d) => nodalOutput({ arms: arms(d), supplyLead: 0 }));
    const response = bridge('quarter', { zero: ratio(zero ?? NaN), unbalance: 'gauge' });
    expect(zeroChange(response)).toBeCloseTo(0.02, 9);
    expect(apply(bridgeStrain(response), loaded ?? NaN) * 1e6).toBeCloseTo(1000, 6);
    expect((((loaded ?? NaN) - (zero ?? NaN)) * 4e6) / 2).toBeCloseTo(998.893, 3);
  });
});

describe('lead wires, quarter bridge at 1000 µε and GF 2, change in mV/V', () => {
  const rows = [
    [120, 1, 0.491320013, 4.1322314, 0.491282466, 0.495376486, 0.991735537],
    [120, 2, 0.483403158, 8.19672131, 0.483265587, 0.491320013, 0.983606557],
    [120, 5, 0.461112819, 20.0, 0.460358056, 0.479539642, 0.96],
    [350, 1, 0.496665248, 1.42450142, 0.496659811, 0.498078839, 0.997150997],
    [350, 2, 0.493862001, 2.84090909, 0.493843286, 0.496665248, 0.994318182],
  ] as const;

  test.each(rows)('%d Ω, %d Ω a conductor', (rg, rl, trimmed, offset, untrimmed, three, factor) => {
    const leads = (kind: Leads): BridgeResponse =>
      bridge('quarter', { gaugeResistance: ohm(rg), leads: kind });
    const twoTrimmed = leads({ kind: 'two-wire', resistance: ohm(rl), trimmed: true });
    expect(outputMillivolt(twoTrimmed, 1000)).toBeCloseTo(trimmed, 8);
    const threeWire = leads({ kind: 'three-wire', resistance: ohm(rl) });
    expect(outputMillivolt(threeWire, 1000)).toBeCloseTo(three, 8);
    const bare = apply(bridgeStrain(bridge('quarter')), three / 1e3) * 1e6;
    expect(bare / 1000).toBeCloseTo(factor, 7);
    const twoUntrimmed = bridge('quarter', {
      gaugeResistance: ohm(rg),
      leads: { kind: 'two-wire', resistance: ohm(rl), trimmed: false },
      zero: ratio(offset / 1e3),
    });
    expect(outputMillivolt(twoUntrimmed, 1000) - offset).toBeCloseTo(untrimmed, 7);
  });

  test('full bridge of 350 Ω, 1 Ω in each excitation conductor: × 0.994318182', () => {
    const response = bridge('full-bending', {
      gaugeResistance: ohm(350),
      leads: { kind: 'excitation', resistance: ohm(1) },
    });
    expect(outputMillivolt(response, 1000) / 2).toBeCloseTo(0.994318182, 9);
  });

  test('a circuit is refused leads it cannot have', () => {
    const threeWire: Leads = { kind: 'three-wire', resistance: ohm(1) };
    expect(leadFault('quarter', threeWire)).toBeNull();
    expect(leadFault('full-bending', threeWire)).toEqual({
      expected: 'none, excitation with a full-bending bridge',
      came: 'three-wire',
    });
  });
});

const circuit = fc.constantFrom(...(Object.keys(CIRCUITS) as BridgeCircuit[]));
const resistance = fc.double({ min: 0.01, max: 20, noNaN: true });
const leads = fc.oneof(
  fc.constant(NONE),
  resistance.map((r): Leads => ({ kind: 'three-wire', resistance: ohm(r) })),
  resistance.map((r): Leads => ({ kind: 'two-wire', resistance: ohm(r), trimmed: true })),
  resistance.map((r): Leads => ({ kind: 'excitation', resistance: ohm(r) })),
);
const response = fc
  .record({
    circuit,
    unbalance: fc.constant('circuit' as const),
    leads,
    gaugeFactor: fc.double({ min: 1.8, max: 2.2, noNaN: true }),
    gaugeResistance: fc.constantFrom(ohm(120), ohm(350), ohm(1000)),
    poisson: fc.double({ min: 0, max: 0.5, noNaN: true }),
    zero: fc.constant(ratio(0)),
  })
  .filter((candidate) => leadFault(candidate.circuit, candidate.leads) === null)
  .map((candidate): BridgeResponse => ({ kind: 'bridge', ...candidate }));
const microstrain = fc.double({ min: -20_000, max: 20_000, noNaN: true });

/** Resistances that the leads add to arms 1 to 4. */
const added = ({ leads: kind }: BridgeResponse): [number, number, number, number] => {
  switch (kind.kind) {
    case 'three-wire':
      return [kind.resistance, kind.resistance, 0, 0];
    case 'two-wire':
      return [2 * kind.resistance, kind.trimmed ? 2 * kind.resistance : 0, 0, 0];
    case 'none':
    case 'excitation':
      return [0, 0, 0, 0];
  }
};

/** The circuit's arms as the trade draws them; written down here again, from the check values. */
const ARMS: Record<BridgeCircuit, (nu: number) => readonly [number, number, number, number]> = {
  quarter: () => [1, 0, 0, 0],
  'half-poisson': (nu) => [1, -nu, 0, 0],
  'half-bending': () => [1, -1, 0, 0],
  'half-opposite': () => [1, 0, 1, 0],
  'full-bending': () => [1, -1, 1, -1],
  'full-bending-poisson': (nu) => [1, -1, nu, -nu],
  'full-axial-poisson': (nu) => [1, -nu, 1, -nu],
  'full-torsion': () => [1, -1, 1, -1],
};

const networkOutput = (of: BridgeResponse, eps: number): number => {
  const rg = of.gaugeResistance;
  const extra = added(of);
  const arms = ARMS[of.circuit](of.poisson).map(
    (k, i) => rg * (1 + k * of.gaugeFactor * eps) + (extra[i] ?? 0),
  );
  const [r1 = NaN, r2 = NaN, r3 = NaN, r4 = NaN] = arms;
  const supplyLead = of.leads.kind === 'excitation' ? of.leads.resistance : 0;
  return nodalOutput({ arms: [r1, r2, r3, r4], supplyLead });
};

test('the forward map is the circuit solved node by node, leads and all', () => {
  fc.assert(
    fc.property(response, microstrain, (of, eps) => {
      const solved = networkOutput(of, eps * 1e-6);
      // A full bridge's own resistance changes with unequal arms; its excitation drop is then
      // right to the second order of d only, which the table of leads states for equal arms.
      const drops = of.leads.kind === 'excitation';
      const linear = CIRCUITS[of.circuit].nonlinearity(of.poisson) === 0;
      const tolerance = drops ? (linear ? 2e-4 : 2e-2) * Math.abs(solved) + 1e-12 : 1e-11;
      expect(Math.abs(apply(bridgeOutput(of), eps * 1e-6) - solved)).toBeLessThan(tolerance);
    }),
    { numRuns: 1000 },
  );
});

test('two untrimmed wires: the offset that they make is solved, and zero takes it off whole', () => {
  fc.assert(
    fc.property(resistance, microstrain, (rl, eps) => {
      const of = (zero: number) =>
        bridge('quarter', {
          leads: { kind: 'two-wire', resistance: ohm(rl), trimmed: false },
          zero: ratio(zero),
        });
      const unloaded = networkOutput(of(0), 0);
      const loaded = networkOutput(of(0), eps * 1e-6);
      expect(apply(bridgeStrain(of(unloaded)), loaded)).toBeCloseTo(eps * 1e-6, 11);
    }),
  );
});

test('inverse of forward is identity over ±20,000 µε, whatever the circuit, leads and zero', () => {
  fc.assert(
    fc.property(
      response,
      fc.double({ min: -5e-3, max: 5e-3, noNaN: true }),
      microstrain,
      (of, zero, eps) => {
        const offset = { ...of, zero: ratio(zero) };
        const round = chain(bridgeOutput(offset), bridgeStrain(offset));
        const r = apply(bridgeOutput(offset), eps * 1e-6);
        expect(Math.abs(apply(bridgeStrain(offset), r) * 1e6 - eps)).toBeLessThan(1e-6);
        expect(Math.abs(apply(round, eps * 1e-6) * 1e6 - eps)).toBeLessThan(1e-6);
        expect(apply(bridgeStrain(offset), zero)).toBeCloseTo(0, 15);
      },
    ),
    { numRuns: 1000 },
  );
});
