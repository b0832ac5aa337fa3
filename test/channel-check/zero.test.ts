import { describe, expect, test } from 'vitest';
import { STRAIN_ZERO, zeroOf } from '../../shared/channel-check/zero.ts';
import type { Watched } from '../../shared/channel-check/series.ts';
import { apply, inverse } from '../../shared/model/fractional-linear.ts';
import { seconds } from '../../shared/model/units.ts';
import { bridgeStrain } from '../../shared/pipeline/3-strain/bridge.ts';
import { bridge } from '../uncertainty/wiring.ts';
import { normal, sampled } from './signals.ts';

const MICRO = 1e-6;
const map = bridgeStrain(bridge('quarter'));

const reading = (rate: number, duration: number, at: (t: number) => number): Watched => {
  const raw = sampled(rate, duration, (t) => apply(inverse(map), at(t))).values;
  return { raw, input: raw, dt: seconds(1 / rate), map };
};
const refusalOf = (watched: Watched) => {
  const zero = zeroOf(watched, 'm/m', STRAIN_ZERO);
  return zero.ok ? null : zero.refusal;
};

test('mean, deviation, number and standard error of the raw figures, GUM 4.2 (computed)', () => {
  // 40 figures 0, 1, 0, 1 µV/V: s = √(10/39), s/√40.
  const raw = Float64Array.from({ length: 40 }, (_, i) => 1e-3 + (i % 2) * 1e-6);
  const zero = zeroOf({ raw, input: raw, dt: seconds(0.1), map }, 'm/m', STRAIN_ZERO);
  if (!zero.ok) throw new Error(zero.refusal.code);
  expect(zero.value.mean).toBeCloseTo(1.0005e-3, 14);
  expect(zero.value.deviation * 1e6).toBeCloseTo(Math.sqrt(10 / 39), 9);
  expect(zero.value.standardError * 1e6).toBeCloseTo(Math.sqrt(10 / 39 / 40), 9);
  expect(zero.value.samples).toBe(40);
});

test('a zero of noise comes back within three of its standard errors, 300 µε of unbalance', () => {
  const scatter = normal(21);
  const zero = zeroOf(
    reading(100, 10, () => 300 * MICRO + MICRO * scatter()),
    'm/m',
    STRAIN_ZERO,
  );
  if (!zero.ok) throw new Error(zero.refusal.code);
  const expected = apply(inverse(map), 300 * MICRO);
  expect(Math.abs(zero.value.mean - expected)).toBeLessThan(3 * zero.value.standardError);
  // 1 µε is 0.5 µV/V at a gauge factor of 2.
  expect(zero.value.deviation * 1e6).toBeCloseTo(0.5, 1);
});

// Limits: common practice, no source.
describe('refused with its reason', () => {
  const scatter = normal(22);
  test('drifting, 60 µε/min', () => {
    const refusal = refusalOf(reading(50, 20, (t) => MICRO * (t + scatter())));
    expect(refusal).toMatchObject({ code: 'drifting', field: 'drift' });
    expect(refusal?.expected).toBe('a drift of at most 5 µε/min');
    expect(refusal?.came).toMatch(/µε\/min$/);
  });

  test('noisy, 25 µε, and drift alone is not called noise', () => {
    const refusal = refusalOf(reading(50, 20, () => 25 * MICRO * scatter()));
    expect(refusal).toMatchObject({ code: 'noisy', expected: 'noise of at most 10 µε' });
    expect(refusalOf(reading(50, 60, (t) => 2 * MICRO * t))?.code).toBe('drifting');
  });

  test('too few samples', () => {
    expect(refusalOf(reading(10, 2, () => MICRO * scatter()))).toMatchObject({
      code: 'too-few-samples',
      expected: '30 or more',
      came: '20',
    });
    expect(refusalOf(reading(10, 0, () => 0))?.code).toBe('too-few-samples');
  });

  test('a fifth of the samples missing', () => {
    const gappy = reading(50, 20, (t) => (Math.round(t * 50) % 5 === 0 ? NaN : MICRO * scatter()));
    expect(refusalOf(gappy)).toMatchObject({ code: 'not-arriving', came: '800' });
  });

  test('a few missing ones are left out of the count', () => {
    const zero = zeroOf(
      reading(50, 20, (t) => (Math.round(t * 50) % 50 === 0 ? NaN : MICRO * scatter())),
      'm/m',
      STRAIN_ZERO,
    );
    expect(zero.ok && zero.value.samples).toBe(980);
  });
});
