import fc from 'fast-check';
import type { BridgeCircuit, BridgeResponse, Leads } from '../../shared/model/calibration.ts';
import { ohm, ratio } from '../../shared/model/units.ts';
import { PLAIN_GAUGE } from '../helpers/plain-gauge.ts';

/** A bridge of GF 2 and 120 Ω without leads or unbalance, changed where a test needs it. */
export const bridge = (
  circuit: BridgeCircuit,
  change: Partial<BridgeResponse> = {},
): BridgeResponse => ({
  kind: 'bridge',
  circuit,
  gaugeFactor: 2,
  gaugeResistance: ohm(120),
  poisson: 0.3,
  leads: { kind: 'none' },
  zero: ratio(0),
  ...PLAIN_GAUGE,
  ...change,
});

const HALVES: readonly BridgeCircuit[] = [
  'quarter',
  'half-poisson',
  'half-bending',
  'half-opposite',
];
const FULLS: readonly BridgeCircuit[] = [
  'full-bending',
  'full-bending-poisson',
  'full-axial-poisson',
  'full-torsion',
];

/** Evenly spread: fast-check's own doubles crowd round zero, where hardly anything shows. */
export const even = (min: number, max: number): fc.Arbitrary<number> =>
  fc.integer({ min: 0, max: 1_000_000 }).map((n) => min + ((max - min) * n) / 1_000_000);

const resistance = even(0.1, 10).map(ohm);
const halfLeads: fc.Arbitrary<Leads> = fc.oneof(
  fc.constant<Leads>({ kind: 'none' }),
  resistance.map((r): Leads => ({ kind: 'three-wire', resistance: r })),
  fc
    .tuple(resistance, fc.boolean())
    .map(([r, trimmed]): Leads => ({ kind: 'two-wire', resistance: r, trimmed })),
);
const fullLeads: fc.Arbitrary<Leads> = fc.oneof(
  fc.constant<Leads>({ kind: 'none' }),
  resistance.map((r): Leads => ({ kind: 'excitation', resistance: r })),
);

/** Any circuit with any leads it may have, unbalanced by up to 2 % of an arm. */
export const anyBridge: fc.Arbitrary<BridgeResponse> = fc
  .oneof(
    fc.tuple(fc.constantFrom(...HALVES), halfLeads),
    fc.tuple(fc.constantFrom(...FULLS), fullLeads),
  )
  .chain(([circuit, leads]) =>
    fc
      .record({
        gaugeFactor: even(1.8, 2.3),
        gaugeResistance: fc.constantFrom(120, 350, 1000).map(ohm),
        poisson: even(0.2, 0.4),
        zero: even(-5e-3, 5e-3).map(ratio),
      })
      .map((data) => bridge(circuit, { leads, ...data })),
  );

/** Strain up to the 5 % that the longest gauges bear, m/m. */
export const anyStrain = even(-0.05, 0.05);
