/** Whatever the circuit, leads, gauge and zero: held to the network solved node by node. */
import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { BridgeResponse, Leads } from '../../../shared/model/calibration.ts';
import { apply, chain, isRising } from '../../../shared/model/fractional-linear.ts';
import { ohm, ratio } from '../../../shared/model/units.ts';
import { bridgeOutput, bridgeStrain } from '../../../shared/pipeline/3-strain/bridge.ts';
import { leadFault } from '../../../shared/pipeline/3-strain/leads.ts';
import { networkOutput } from './wiring.ts';
import { PLAIN_GAUGE } from '../../helpers/plain-gauge.ts';

const within = (min: number, max: number) => fc.double({ min, max, noNaN: true });

const circuit = fc.constantFrom(
  'quarter' as const,
  'half-poisson' as const,
  'half-bending' as const,
  'half-opposite' as const,
  'full-bending' as const,
  'full-bending-poisson' as const,
  'full-axial-poisson' as const,
  'full-torsion' as const,
);
const resistance = within(0.01, 20).map(ohm);
const leads = fc.oneof(
  fc.constant<Leads>({ kind: 'none' }),
  resistance.map((r): Leads => ({ kind: 'three-wire', resistance: r })),
  resistance.map((r): Leads => ({ kind: 'excitation', resistance: r })),
  fc
    .tuple(resistance, fc.boolean())
    .map(([r, trimmed]): Leads => ({ kind: 'two-wire', resistance: r, trimmed })),
);
const response = fc
  .record({
    kind: fc.constant('bridge' as const),
    circuit,
    leads,
    gaugeFactor: within(1.8, 2.2),
    gaugeResistance: fc.constantFrom(ohm(120), ohm(350), ohm(1000)),
    poisson: within(0, 0.5),
    zero: fc.constant(ratio(0)),
  })
  .map((one) => ({ ...one, ...PLAIN_GAUGE }))
  .filter((candidate) => leadFault(candidate.circuit, candidate.leads) === null);
const microstrain = within(-20_000, 20_000);
const RUNS = { numRuns: 2000 };
/** The solve's own rounding, with conductors of 10 mΩ in series with arms of 1 kΩ. */
const SOLVE_ROUNDING = 1e-10;
const SOLVE_ROUNDING_MICROSTRAIN = 1e-3;

/** The same bridge with its unloaded output, as the network has it, for a zero. */
const zeroed = (of: BridgeResponse, off?: Parameters<typeof networkOutput>[2]): BridgeResponse => ({
  ...of,
  zero: ratio(networkOutput(of, 0, off)),
});

test('forward and back are the network, conductor by conductor, over ±20,000 µε', () => {
  fc.assert(
    fc.property(response, microstrain, (balanced, eps) => {
      const of = zeroed(balanced);
      const solved = networkOutput(of, eps * 1e-6);
      expect(Math.abs(apply(bridgeOutput(of), eps * 1e-6) - solved)).toBeLessThan(SOLVE_ROUNDING);
      const strain = apply(bridgeStrain(of), solved) * 1e6;
      expect(Math.abs(strain - eps)).toBeLessThan(SOLVE_ROUNDING_MICROSTRAIN);
    }),
    RUNS,
  );
});

test('a gauge up to 5 % off its nominal resistance is exact in a quarter bridge, leads and all', () => {
  fc.assert(
    fc.property(response, within(0.95, 1.05), microstrain, (balanced, off, eps) => {
      const arms = [off, 1, 1, 1] as const;
      const of = zeroed({ ...balanced, circuit: 'quarter' }, arms);
      fc.pre(leadFault(of.circuit, of.leads) === null);
      const solved = networkOutput(of, eps * 1e-6, arms);
      const strain = apply(bridgeStrain(of), solved) * 1e6;
      expect(Math.abs(strain - eps)).toBeLessThan(SOLVE_ROUNDING_MICROSTRAIN);
    }),
    RUNS,
  );
});

test('arms each up to 0.5 % off and an input offset of 1 mV/V cost less than 0.05 % of the strain', () => {
  const arm = within(0.995, 1.005);
  fc.assert(
    fc.property(
      response.filter((of) => of.leads.kind === 'none'),
      fc.tuple(arm, arm, arm, arm),
      within(-1e-3, 1e-3),
      within(-3000, 3000),
      (balanced, off, offset, eps) => {
        const of = { ...balanced, zero: ratio(networkOutput(balanced, 0, off) + offset) };
        const solved = networkOutput(of, eps * 1e-6, off) + offset;
        const strain = apply(bridgeStrain(of), solved) * 1e6;
        expect(Math.abs(strain - eps)).toBeLessThanOrEqual(5e-4 * Math.abs(eps) + 1e-6);
      },
    ),
    RUNS,
  );
});

test('inverse of forward is identity over ±20,000 µε, whatever the zero', () => {
  fc.assert(
    fc.property(response, within(-20e-3, 20e-3).map(ratio), microstrain, (bare, zero, eps) => {
      const of = { ...bare, zero };
      const there = apply(bridgeOutput(of), eps * 1e-6);
      const tolerance = 1e-9 * Math.abs(eps) + 1e-8;
      expect(Math.abs(apply(bridgeStrain(of), there) * 1e6 - eps)).toBeLessThan(tolerance);
      const round = chain(bridgeOutput(of), bridgeStrain(of));
      expect(Math.abs(apply(round, eps * 1e-6) * 1e6 - eps)).toBeLessThan(tolerance);
      expect(Math.abs(apply(bridgeStrain(of), zero))).toBeLessThan(1e-15);
    }),
    RUNS,
  );
});

test('tension raises the output, compression lowers it, and more strain gives more output', () => {
  fc.assert(
    fc.property(response, microstrain, microstrain, (balanced, one, other) => {
      fc.pre(Math.abs(one - other) > 1e-3);
      const of = zeroed(balanced);
      const [low, high] = [Math.min(one, other), Math.max(one, other)].map((eps) =>
        apply(bridgeOutput(of), eps * 1e-6),
      );
      expect(high).toBeGreaterThan(low ?? NaN);
      expect(isRising(bridgeStrain(of))).toBe(true);
    }),
  );
});

test('a linear circuit is odd in strain; any other gives more in compression than in tension', () => {
  fc.assert(
    fc.property(response, microstrain, (of, eps) => {
      fc.pre(of.leads.kind !== 'two-wire' || of.leads.trimmed);
      const at = (strain: number) => apply(bridgeOutput(of), strain * 1e-6);
      switch (of.circuit) {
        case 'half-bending':
        case 'full-bending':
        case 'full-bending-poisson':
        case 'full-torsion':
          expect(at(-eps)).toBeCloseTo(-at(eps), 14);
          break;
        case 'quarter':
        case 'half-poisson':
        case 'half-opposite':
        case 'full-axial-poisson':
          fc.pre(Math.abs(eps) > 1);
          expect(Math.abs(at(-Math.abs(eps)))).toBeGreaterThan(at(Math.abs(eps)));
      }
    }),
  );
});
