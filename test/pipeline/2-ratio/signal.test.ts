import { describe, expect, test } from 'vitest';
import type { Excitation, Signal } from '../../../shared/model/calibration.ts';
import { apply } from '../../../shared/model/fractional-linear.ts';
import { volt } from '../../../shared/model/units.ts';
import {
  excitationInput,
  signalFault,
  signalMap,
} from '../../../shared/pipeline/2-ratio/signal.ts';

const FIVE: Excitation = { kind: 'stated', volts: volt(5) };
const MEASURED: Excitation = { kind: 'measured', input: 'ex' };

// 1000 µε on a quarter bridge is about 0.5 mV/V, 2.5 mV at 5 V (common practice, no source).
describe('2.5 mV at 5 V, however the node states it, is 0.5 mV/V', () => {
  test.each<[string, Signal, number]>([
    ['ratio', { kind: 'ratio' }, 0.5e-3],
    ['volts, stated excitation', { kind: 'volts', excitation: FIVE }, 2.5e-3],
    ['volts over measured excitation', { kind: 'volts', excitation: MEASURED }, 2.5e-3 / 5],
    [
      'counts of a 24-bit converter with ±20 mV range, as volts',
      { kind: 'counts', as: 'volts', perCount: 0.02 / 2 ** 23, zeroCount: 0, excitation: FIVE },
      (2.5e-3 / 0.02) * 2 ** 23,
    ],
    [
      'offset binary counts as ratio',
      { kind: 'counts', as: 'ratio', perCount: 1e-8, zeroCount: 32768 },
      32768 + 50_000,
    ],
  ])('%s', (_, signal, raw) => {
    expect(apply(signalMap(signal), raw)).toBeCloseTo(0.5e-3, 12);
  });
});

test('a sagging excitation leaves the ratio alone where it is measured, and not where it is stated', () => {
  const measured = signalMap({ kind: 'volts', excitation: MEASURED });
  const stated = signalMap({ kind: 'volts', excitation: FIVE });
  for (const supply of [5, 4.5, 3]) {
    const output = 0.5e-3 * supply;
    expect(apply(measured, output / supply)).toBeCloseTo(0.5e-3, 15);
    expect(apply(stated, output)).toBeCloseTo((0.5e-3 * supply) / 5, 15);
  }
});

test('counts over a measured excitation: only the gain is left to apply', () => {
  const perCount = 0.02 / 2 ** 23;
  const signal: Signal = {
    kind: 'counts',
    as: 'volts',
    perCount,
    zeroCount: 0,
    excitation: MEASURED,
  };
  expect(excitationInput(signal)).toBe('ex');
  expect(apply(signalMap(signal), 2.25e-3 / perCount / 4.5)).toBeCloseTo(0.5e-3, 15);
});

test('a transducer that states its SI unit is taken as it is', () => {
  expect(apply(signalMap({ kind: 'direct' }), 18.5)).toBe(18.5);
});

test('which input measures the excitation', () => {
  expect(excitationInput({ kind: 'volts', excitation: MEASURED })).toBe('ex');
  expect(excitationInput({ kind: 'volts', excitation: FIVE })).toBeNull();
  expect(excitationInput({ kind: 'ratio' })).toBeNull();
});

test('a zero count with a measured excitation is refused: it cannot be taken off a quotient', () => {
  const counts = (zeroCount: number): Signal => ({
    kind: 'counts',
    as: 'volts',
    perCount: 1e-9,
    zeroCount,
    excitation: MEASURED,
  });
  expect(signalFault(counts(0))).toBeNull();
  expect(signalFault(counts(7))).toEqual({
    expected: 'a zero count of 0 with a measured excitation',
    came: '7',
  });
});
