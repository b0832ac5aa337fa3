import { describe, expect, test } from 'vitest';
import type { BridgeCircuit, BridgeResponse, Leads } from '../../../shared/model/calibration.ts';
import { apply } from '../../../shared/model/fractional-linear.ts';
import { ohm, ratio } from '../../../shared/model/units.ts';
import {
  bridgeOutput,
  bridgeStrain,
  linearValue,
  zeroChange,
} from '../../../shared/pipeline/3-strain/bridge.ts';
import { leadFactor, leadFault } from '../../../shared/pipeline/3-strain/leads.ts';
import { PLAIN_GAUGE } from '../../helpers/plain-gauge.ts';

const NONE: Leads = { kind: 'none' };

const bridge = (circuit: BridgeCircuit, change: Partial<BridgeResponse> = {}): BridgeResponse => ({
  kind: 'bridge',
  circuit,
  gaugeFactor: 2,
  gaugeResistance: ohm(120),
  poisson: 0.3,
  leads: NONE,
  zero: ratio(0),
  ...PLAIN_GAUGE,
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

  // Computed: r = (1.02·(1 + d) − 1) / (2·(1.02·(1 + d) + 1)) with d = 0.002, and with d = 0.
  test('a gauge 2 % over nominal, then 1000 µε: zero after inversion gives 1000, a linear Δr 998.893', () => {
    const zero = 0.02 / 4.04;
    const loaded = (1.02 * 1.002 - 1) / (2 * (1.02 * 1.002 + 1));
    const response = bridge('quarter', { zero: ratio(zero) });
    expect(zeroChange(response)).toBeCloseTo(0.02, 12);
    expect(apply(bridgeStrain(response), loaded) * 1e6).toBeCloseTo(1000, 8);
    expect((((loaded - zero) * 4) / 2) * 1e6).toBeCloseTo(998.893, 3);
  });
});

// Two- and three-wire formulas: value from memory; rows computed from them.
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
    expect(1 / leadFactor(threeWire.leads, ohm(rg))).toBeCloseTo(factor, 9);
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

  const TWO_TRIMMED: Leads = { kind: 'two-wire', resistance: ohm(1), trimmed: true };
  const TWO_UNTRIMMED: Leads = { kind: 'two-wire', resistance: ohm(1), trimmed: false };
  const THREE: Leads = { kind: 'three-wire', resistance: ohm(1) };
  const EXCITATION: Leads = { kind: 'excitation', resistance: ohm(1) };

  test.each<[BridgeCircuit, readonly Leads[]]>([
    ['quarter', [NONE, TWO_TRIMMED, TWO_UNTRIMMED, THREE]],
    ['half-poisson', [NONE, TWO_TRIMMED, THREE]],
    ['half-bending', [NONE, TWO_TRIMMED, THREE]],
    ['half-opposite', [NONE, TWO_TRIMMED, TWO_UNTRIMMED, THREE]],
    ['full-bending', [NONE, EXCITATION]],
    ['full-bending-poisson', [NONE, EXCITATION]],
    ['full-axial-poisson', [NONE, EXCITATION]],
    ['full-torsion', [NONE, EXCITATION]],
  ])('%s admits the leads that it can have and no others', (circuit, admitted) => {
    for (const leads of [NONE, TWO_TRIMMED, TWO_UNTRIMMED, THREE, EXCITATION]) {
      expect(leadFault(circuit, leads) === null, leads.kind).toBe(admitted.includes(leads));
    }
  });

  test('the refusal says which', () => {
    expect(leadFault('half-bending', TWO_UNTRIMMED)).toEqual({
      expected: 'none, two-wire trimmed, three-wire with a half-bending bridge',
      came: 'two-wire untrimmed',
    });
  });
});

test('a load cell of 2 mV/V at 200 kN, 0.02 mV/V unloaded, reads 100 kN at 1.02 mV/V', () => {
  const cell = linearValue({ kind: 'linear', perUnit: 200e3 / 2e-3, zero: 0.02e-3 });
  expect(apply(cell, 1.02e-3)).toBeCloseTo(100e3, 6);
});
