import { expect, test } from 'vitest';
import { defaultLimits } from '../../shared/channel-check/limits.ts';
import { placedShunt, shuntCheck, type ShuntPlace } from '../../shared/channel-check/shunt.ts';
import type { BridgeResponse, Leads } from '../../shared/model/calibration.ts';
import { ohm, ratio } from '../../shared/model/units.ts';
import { PLAIN_GAUGE } from '../helpers/plain-gauge.ts';
import { normal } from './signals.ts';

// Limits: common practice, no source.
const LIMITS = defaultLimits('bridge').shunt;
const LEADS: Leads = { kind: 'three-wire', resistance: ohm(2) };
const quarter = (change: Partial<BridgeResponse> = {}): BridgeResponse => ({
  ...{ kind: 'bridge', circuit: 'quarter', gaugeFactor: 2, gaugeResistance: ohm(120) },
  ...{ poisson: 0.3, leads: { kind: 'none' }, zero: ratio(0) },
  ...PLAIN_GAUGE,
  ...change,
});

/** 50 samples about a level, V/V, of so much noise. */
const level = (mean: number, noise = 0, seed = 1) => {
  const scatter = normal(seed);
  return Float64Array.from({ length: 50 }, () => mean + noise * scatter());
};

interface Laid {
  readonly response?: BridgeResponse;
  readonly place?: ShuntPlace;
  readonly noise?: number;
  readonly moved?: number;
}

const check = (step: number, laid: Laid = {}) => {
  const { response = quarter(), place = 'gauge', noise = 0, moved = 0 } = laid;
  const placed = placedShunt(response, place, 1, ohm(59_880));
  if (!placed.ok) throw new Error(placed.expected);
  const readings = {
    before: level(1e-4, noise, 1),
    during: level(1e-4 + step, noise, 2),
    after: level(1e-4 + moved, noise, 3),
  };
  return shuntCheck(readings, { signal: { kind: 'ratio' }, response }, placed.shunt, LIMITS);
};

// 59 880 Ω across 120 Ω puts out −Rg/(4Rs + 2Rg) = −0.500500501 mV/V, which is −1000 µε of a gauge
// of factor 2: parallel resistors, ASTM E251's gauge factor; computed.
const DUE = -0.500500501e-3;

test('the output that parallel resistors bring about passes, and says −1000 µε', () => {
  const { verdict, figure, also, why } = check(DUE);
  expect(verdict).toBe('pass');
  expect(Math.abs(figure ?? NaN)).toBeLessThan(5e-4);
  expect((also[1]?.value ?? NaN) * 1e6).toBeCloseTo(-1000, 5);
  expect(why).toContain('-1000 µε are due');
});

test.each([
  ['a factor 2 % off', 1.02, 'doubtful'],
  ['a resistor of another size', 0.9, 'fail'],
  ['nothing at all', 0.001, 'fail'],
  ['the other side', -1, 'fail'],
])('%s: %d of what is due', (_, share, verdict) => {
  expect(check(share * DUE).verdict).toBe(verdict);
});

test('the wrong side and nothing at all are told apart', () => {
  expect(check(-DUE).why).toContain('wrong side');
  expect(check(0.001 * DUE).why).toContain('does not show');
});

test('noise that could turn the verdict makes it doubtful', () => {
  expect(check(DUE, { noise: 1e-6 }).verdict).toBe('pass');
  expect(check(DUE, { noise: 3e-5 })).toMatchObject({ verdict: 'doubtful' });
});

test('a level that moves by a twentieth of the step meanwhile is not to be judged by', () => {
  const { verdict, why } = check(DUE, { moved: DUE / 20 });
  expect([verdict, why]).toEqual(['doubtful', expect.stringContaining('moved meanwhile')]);
});

// 120 Ω, 2 Ω a conductor, GF 2: on a linear scale −984.57499 µε at the gauge, +984.57499 on the
// internal dummy, −1017.66737 at the instrument; Kirchhoff, computed. µε/2000 is mV/V (4r/GF).
test.each([
  ['gauge', -984.57499],
  ['internal-dummy', 984.57499],
  ['instrument', -1017.66737],
] as const)('leads: a shunt at the %s is judged by what is due there', (place, linear) => {
  const response = quarter({ leads: LEADS });
  const step = linear * 1e-6 * 0.5;
  expect(check(step, { response, place })).toMatchObject({ verdict: 'pass' });
  const elsewhere = place === 'instrument' ? 'gauge' : 'instrument';
  expect(check(step, { response, place: elsewhere }).verdict).not.toBe('pass');
});

test('a place that the bridge does not have is refused', () => {
  const full = quarter({ circuit: 'full-bending' });
  expect(placedShunt(full, 'internal-dummy', 1, ohm(1e5))).toMatchObject({ ok: false });
  expect(placedShunt(quarter(), 'third-wire', 1, ohm(1e5))).toMatchObject({ ok: false });
});

test('nine samples are too few, and a transducer has no gauge', () => {
  const few = { before: level(0).slice(0, 9), during: level(DUE), after: null };
  const placed = placedShunt(quarter(), 'gauge', 1, ohm(59_880));
  if (!placed.ok) throw new Error(placed.expected);
  const record = { signal: { kind: 'ratio' }, response: quarter() } as const;
  expect(shuntCheck(few, record, placed.shunt, LIMITS).verdict).toBe('not-judged');
  const linear = { kind: 'linear', perUnit: 1, zero: 0 } as const;
  const full = { before: level(0), during: level(DUE), after: null };
  const cell = { signal: record.signal, response: linear };
  expect(shuntCheck(full, cell, placed.shunt, LIMITS).verdict).toBe('not-judged');
});
