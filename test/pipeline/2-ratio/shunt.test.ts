import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { BridgeCircuit, BridgeResponse, Leads } from '../../../shared/model/calibration.ts';
import { microstrainToStrain, ohm, ratio } from '../../../shared/model/units.ts';
import {
  dummyArm,
  shuntedOutput,
  shuntFault,
  shuntResistor,
  shuntStrain,
  type Arm,
  type Shunt,
} from '../../../shared/pipeline/2-ratio/shunt.ts';
import { shownChange } from '../../../shared/pipeline/3-strain/shown-change.ts';
import { nodeVoltages, type Resistor } from '../3-strain/nodal.ts';
import { PLAIN_GAUGE } from '../../helpers/plain-gauge.ts';

const quarter = (change: Partial<BridgeResponse> = {}): BridgeResponse => ({
  ...{ kind: 'bridge', circuit: 'quarter', gaugeFactor: 2, gaugeResistance: ohm(120) },
  ...{ poisson: 0.3, leads: { kind: 'none' }, zero: ratio(0) },
  ...PLAIN_GAUGE,
  ...change,
});
const across = (resistance: number, at: Shunt['at'] = 'arm', arm: Arm = 1): Shunt => ({
  ...{ arm, at, resistance: ohm(resistance) },
});
const shown = (of: BridgeResponse, shunt: Shunt) =>
  shownChange(of, shuntedOutput(of, null), shuntedOutput(of, shunt)) * 1e6;
/** What an instrument with the small-signal scale 4r/GF shows. */
const linear = (of: BridgeResponse, shunt: Shunt) =>
  (4e6 * (shuntedOutput(of, shunt) - shuntedOutput(of, null))) / of.gaugeFactor;

// ΔR/R = −Rg/(Rg+Rs), parallel resistors; rows computed. The small-signal scale shows more.
describe('shunt across a gauge without leads', () => {
  test.each([
    [120, 2.0, 59_880, -1000.0, -0.500500501, -1001.001001, -1002.00401],
    [120, 2.1, 59_880, -952.380952, -0.500500501, -953.334287, -954.289531],
    [120, 2.0, 100_000, -599.280863, -0.299820108, -599.640216, -600.0],
    [120, 2.0, 174_800, -343.013949, -0.171565824, -343.131648, -343.249428],
    [350, 2.0, 59_880, -2905.52881, -1.45699775, -2913.9955, -2922.51169],
    [350, 2.0, 100_000, -1743.89636, -0.873471425, -1746.94285, -1750.0],
    [350, 2.1, 100_000, -1660.85368, -0.873471425, -1663.7551, -1666.66667],
    [350, 2.0, 174_800, -999.143591, -0.500071439, -1000.14288, -1001.14416],
    [350, 2.0, 174_650, -1000.0, -0.500500501, -1001.001001, -1002.00401],
  ])('%d Ω, GF %d, %d Ω: %d µε', (rg, gaugeFactor, rs, exact, millivolt, asLinear, rough) => {
    const of = quarter({ gaugeFactor, gaugeResistance: ohm(rg) });
    expect(shuntStrain(ohm(rg), gaugeFactor, ohm(rs)) * 1e6).toBeCloseTo(exact, 4);
    expect(shuntedOutput(of, across(rs)) * 1e3).toBeCloseTo(millivolt, 8);
    expect(shown(of, across(rs))).toBeCloseTo(exact, 4);
    expect(linear(of, across(rs))).toBeCloseTo(asLinear, 4);
    expect((-1e6 * rg) / (gaugeFactor * rs)).toBeCloseTo(rough, 4);
  });

  // Rs = Rg·(1/(GF·ε) − 1), computed.
  test.each([
    [120, 2.0, 59_880.0],
    [350, 2.0, 174_650.0],
    [120, 2.1, 57_022.857],
  ])('for 1000 µε, %d Ω and GF %d: %d Ω', (rg, gaugeFactor, expected) => {
    const resistor = shuntResistor(ohm(rg), gaugeFactor, microstrainToStrain(-1000));
    expect(resistor).toBeCloseTo(expected, 3);
  });
});

// Computed from the network; 120 Ω, GF 2, 59 880 Ω, three wires of 2 Ω.
describe('where the shunt lies, three-wire leads', () => {
  const three = quarter({ leads: { kind: 'three-wire', resistance: ohm(2) } });
  const bare = (shunt: Shunt) =>
    shownChange(quarter(), ratio(0), shuntedOutput(three, shunt)) * 1e6;

  test('at the gauge: linear −984.57499, exact −983.60656, −1000 with the leads in the record', () => {
    expect(linear(three, across(59_880))).toBeCloseTo(-984.57499, 5);
    expect(bare(across(59_880))).toBeCloseTo(-983.60656, 5);
    expect(shown(three, across(59_880))).toBeCloseTo(-1000, 5);
  });

  test('at the instrument, across gauge and one lead: linear −1017.66737', () => {
    expect(linear(three, across(59_880, 'instrument'))).toBeCloseTo(-1017.66737, 5);
  });

  test('across the internal dummy arm: linear +984.57499', () => {
    expect(dummyArm('quarter')).toBe(2);
    expect(linear(three, across(59_880, 'arm', 2))).toBeCloseTo(984.57499, 5);
  });
});

// −Rg/(GF·(Rg+R_ins)), GF 2: computed.
describe('insulation leakage reads as a compression', () => {
  test.each([
    [120, 1e6, -59.993],
    [120, 10e6, -5.99993],
    [120, 100e6, -0.6],
    [120, 1e9, -0.06],
    [350, 1e6, -174.94],
    [350, 10e6, -17.499],
    [350, 100e6, -1.75],
    [350, 1e9, -0.175],
  ])('%d Ω gauge, %d Ω to ground: %d µε', (rg, insulation, expected) => {
    const leak = shuntStrain(ohm(rg), 2, ohm(insulation));
    expect(leak * 1e6).toBeCloseTo(expected, 2);
    expect(shuntResistor(ohm(rg), 2, leak) / insulation).toBeCloseTo(1, 8);
  });
});

/** The solve's own rounding, V/V, with conductors of 0.1 Ω in series with arms of 1 kΩ. */
const SOLVE_ROUNDING = 1e-10;

const ENDS = { 1: ['P', 'A'], 2: ['A', 'Q'], 3: ['Q', 'B'], 4: ['B', 'P'] } as const;

/** The bridge drawn conductor by conductor: gauges between their own ends, leads outside of them. */
const network = ({ circuit, leads, gaugeResistance: rg }: BridgeResponse, shunt: Shunt): number => {
  const wire = leads.kind === 'none' ? 0 : leads.resistance;
  const hasGaugesOpposite = circuit === 'half-opposite';
  const inArm = (arm: Arm): number => {
    if (arm > 2 && !hasGaugesOpposite) return 0;
    if (leads.kind === 'three-wire') return wire;
    if (leads.kind !== 'two-wire') return 0;
    return arm === 1 || arm === 3 || leads.trimmed ? 2 * wire : 0;
  };
  const resistors: Resistor[] = [];
  for (const arm of [1, 2, 3, 4] as const) {
    const [from, to] = ENDS[arm];
    const inner = inArm(arm) > 0 ? `gauge ${arm}` : from;
    if (inArm(arm) > 0) resistors.push([from, inner, inArm(arm)]);
    resistors.push([inner, to, rg]);
    if (shunt.arm === arm && shunt.at === 'arm') resistors.push([inner, to, shunt.resistance]);
  }
  const third: Record<string, string> = {};
  if (leads.kind === 'three-wire') {
    third.A = 'sense A';
    if (hasGaugesOpposite) third.B = 'sense B';
  }
  for (const [corner, end] of Object.entries(third)) resistors.push([corner, end, wire]);
  const isExcited = leads.kind === 'excitation';
  if (isExcited) resistors.push(['supply', 'P', wire], ['Q', 'return', wire]);
  if (shunt.at !== 'arm') {
    const outside = (node: string) => {
      if (isExcited && node === 'P') return 'supply';
      if (isExcited && node === 'Q') return 'return';
      return shunt.at === 'output-wire' ? (third[node] ?? node) : node;
    };
    const [from, to] = ENDS[shunt.arm];
    resistors.push([outside(from), outside(to), shunt.resistance]);
  }
  const held: Record<string, number> = isExcited ? { supply: 1, return: 0 } : { P: 1, Q: 0 };
  const voltages = nodeVoltages(resistors, held);
  return (voltages.get(third.B ?? 'B') ?? NaN) - (voltages.get(third.A ?? 'A') ?? NaN);
};

const within = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const anyLeads = within(0.1, 20)
  .map(ohm)
  .chain((resistance) =>
    fc.constantFrom<Leads>(
      { kind: 'none' },
      { kind: 'three-wire', resistance },
      { kind: 'two-wire', resistance, trimmed: true },
      { kind: 'two-wire', resistance, trimmed: false },
      { kind: 'excitation', resistance },
    ),
  );

// Independent of the formula: Kirchhoff's law at every node by elimination.
test('any arm, place and leads: the output is that of the network solved node by node', () => {
  fc.assert(
    fc.property(
      anyLeads,
      fc.constantFrom<Arm>(1, 2, 3, 4),
      fc.constantFrom<Shunt['at']>('arm', 'instrument', 'output-wire'),
      fc.constantFrom(120, 350, 1000),
      within(1e3, 1e6),
      fc.constantFrom<BridgeCircuit>('quarter', 'half-opposite'),
      (leads, arm, at, rg, rs, half) => {
        const circuit = leads.kind === 'excitation' ? 'full-bending' : half;
        const shunt = across(rs, at, arm);
        fc.pre(shuntFault(circuit, leads, shunt) === null);
        const of = quarter({ circuit, leads, gaugeResistance: ohm(rg) });
        expect(Math.abs(shuntedOutput(of, shunt) - network(of, shunt))).toBeLessThan(
          SOLVE_ROUNDING,
        );
      },
    ),
    { numRuns: 1000 },
  );
});

test('with its leads in the record a shunt at the gauge shows its own strain, whatever the leads', () => {
  fc.assert(
    fc.property(anyLeads, within(1e4, 1e6), (leads, rs) => {
      fc.pre(leads.kind !== 'excitation');
      const of = quarter({ leads });
      const expected = shuntStrain(of.gaugeResistance, of.gaugeFactor, ohm(rs)) * 1e6;
      expect(Math.abs(shown(of, across(rs)) - expected)).toBeLessThan(1e-6);
    }),
  );
});

// Returning by the third wire, the drop of the shunt's own current counts as output: by the nodal
// solve about 2·RL/Rg more, here 3.3 % (computed).
test('a shunt that returns by the output wire reads more still, and is refused without that wire', () => {
  const leads: Leads = { kind: 'three-wire', resistance: ohm(2) };
  const of = quarter({ leads });
  const shunt = across(59_880, 'output-wire');
  const solved = (4e6 * network(of, shunt)) / 2;
  expect(linear(of, shunt)).toBeCloseTo(solved, 6);
  expect(solved).toBeCloseTo(-1050.99845, 4);
  expect(shuntFault('quarter', leads, shunt)).toBeNull();
  expect(shuntFault('quarter', { kind: 'none' }, shunt)).toEqual({
    expected: 'an arm with three-wire leads',
    came: 'arm 1, none leads',
  });
  expect(shuntFault('quarter', leads, across(59_880, 'output-wire', 3))).not.toBeNull();
});

test('only a full bridge has no fixed arm beside arm 1, and a shunt there reads as tension', () => {
  for (const circuit of ['quarter', 'half-poisson', 'half-bending', 'half-opposite'] as const) {
    const arm = dummyArm(circuit) ?? 1;
    expect(shuntedOutput(quarter({ circuit }), across(59_880, 'arm', arm))).toBeGreaterThan(4e-4);
  }
  expect(dummyArm('full-torsion')).toBeNull();
});
