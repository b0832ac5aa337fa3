import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { humCheck } from '../../shared/channel-check/hum.ts';
import { aliasOf, mainsShare } from '../../shared/channel-check/mains.ts';
import { even } from '../uncertainty/wiring.ts';
import { sampled, normal } from './signals.ts';

const told = (...args: Parameters<typeof mainsShare>) => {
  const share = mainsShare(...args);
  if (!share.told) throw new Error(share.why);
  return share;
};
const hum = (frequency: number, amplitude: number, t: number, phase = 0.7) =>
  amplitude * Math.sin(2 * Math.PI * frequency * t + phase);

describe('share of a sinusoid in noise: a²/2 of a²/2 + σ² (variance of a sine is half its square)', () => {
  test.each([
    [2000, 10],
    [500, 10],
    [250, 30],
    [1000, 1],
  ])('%d samples a second for %d s', (rate, duration) => {
    const noise = normal(1);
    const { values, dt } = sampled(rate, duration, (t) => hum(50, 2, t) + noise());
    const at50 = told(values, dt, 50);
    // 2²/2 = 2 of 2 + 1.
    expect(at50.share).toBeCloseTo(2 / 3, 1);
    expect(at50.rms).toBeCloseTo(Math.SQRT2, 1);
    expect(at50.seenAt).toBe(50);
    expect(told(values, dt, 60).share).toBeLessThan(0.03);
  });

  test('no noise: all of it, whatever the phase and where the window ends', () => {
    const phase = even(0, 7);
    const duration = even(0.6, 3);
    fc.assert(
      fc.property(phase, duration, fc.constantFrom(50 as const, 60 as const), (at, long, f) => {
        const { values, dt } = sampled(400, long, (t) => hum(f, 3e-6, t, at));
        const share = told(values, dt, f);
        expect(share.share).toBeCloseTo(1, 9);
        expect(share.rms / (3e-6 / Math.SQRT2)).toBeCloseTo(1, 1);
      }),
    );
  });

  test('white noise alone shows none of either', () => {
    for (const seed of [1, 2, 3, 4, 5]) {
      const noise = normal(seed);
      const { values, dt } = sampled(200, 20, noise);
      expect(told(values, dt, 50).share).toBeLessThan(0.012);
      expect(told(values, dt, 60).share).toBeLessThan(0.012);
    }
  });

  // EN 50160, 4.2.1 (value from memory): 50 Hz ± 1 % for 99.5 % of a year.
  test.each([49.5, 49.8, 50.2, 50.5])('mains that has wandered to %d Hz for a minute', (f) => {
    const { values, dt } = sampled(250, 60, (t) => hum(f, 1, t));
    expect(told(values, dt, 50).share).toBeGreaterThan(0.75);
  });

  test('a fifth of the samples missing changes little', () => {
    const noise = normal(9);
    const { values, dt } = sampled(500, 10, (t) => hum(60, 2, t) + noise());
    const holed = values.map((value, i) => (i % 5 === 2 || (i > 700 && i < 1200) ? NaN : value));
    expect(told(holed, dt, 60).share).toBeCloseTo(2 / 3, 1);
  });

  test('a slow swing of the structure is not taken for mains', () => {
    const { values, dt } = sampled(500, 20, (t) => hum(3.3, 10, t) + hum(50, 1, t));
    // ½ of ½ + 50.
    expect(told(values, dt, 50).share).toBeCloseTo(0.0099, 3);
    expect(told(values, dt, 60).share).toBeLessThan(0.001);
  });
});

describe('rates too low for mains: where it shows, Shannon 1949 (value from memory)', () => {
  test.each([
    [50, 64, 14],
    [60, 64, 4],
    [60, 100, 40],
    [50, 75, 25],
    [60, 25, 10],
    [50, 200, 50],
    [50, 10, 0],
  ])('%d Hz at %d samples a second shows at %d Hz', (frequency, rate, alias) => {
    expect(aliasOf(frequency, rate)).toBeCloseTo(alias, 9);
  });

  test('found at its alias', () => {
    const noise = normal(3);
    const { values, dt } = sampled(64, 30, (t) => hum(50, 2, t) + noise());
    const share = told(values, dt, 50);
    expect(share.seenAt).toBeCloseTo(14, 9);
    expect(share.share).toBeCloseTo(2 / 3, 1);
  });

  test.each([
    [10, 50, 'steady value'],
    [1, 60, 'steady value'],
    [100, 50, 'half the rate'],
    [120, 60, 'half the rate'],
    [110, 50, 'looks the same as 60 Hz'],
    [110, 60, 'looks the same as 50 Hz'],
  ] as const)('at %d samples a second %d Hz cannot be told: %s', (rate, frequency, why) => {
    const noise = normal(4);
    const { values, dt } = sampled(rate, 100, noise);
    const share = mainsShare(values, dt, frequency);
    expect(share.told ? '' : share.why).toContain(why);
  });

  test('nor from a tenth of a second, nor of what never changes', () => {
    const short = sampled(1000, 0.1, (t) => hum(50, 1, t));
    expect(mainsShare(short.values, short.dt, 50)).toEqual({
      told: false,
      why: '0.5 s of samples are needed',
    });
    const still = sampled(1000, 2, () => 0);
    expect(mainsShare(still.values, still.dt, 50).told).toBe(false);
  });
});

// Limits: common practice, no source.
describe('verdict', () => {
  const limits = { good: 0.1, bad: 0.5 };
  const noise = { good: 2e-6, bad: 10e-6 };
  const of = (rate: number, amplitude: number) => {
    const scatter = normal(5);
    return sampled(rate, 20, (t) => hum(50, amplitude, t) + 1e-6 * scatter());
  };
  test('12 µε of hum fails, a little hum in little noise is doubtful, none passes', () => {
    expect(humCheck(of(250, 12e-6), 'm/m', 50, limits, noise).verdict).toBe('fail');
    expect(humCheck(of(250, 2e-6), 'm/m', 50, limits, noise).verdict).toBe('doubtful');
    expect(humCheck(of(250, 0), 'm/m', 50, limits, noise).verdict).toBe('pass');
  });

  test('an alias never fails by itself and is named', () => {
    const check = humCheck(of(64, 12e-6), 'm/m', 50, limits, noise);
    expect(check.verdict).toBe('doubtful');
    expect(check.why).toContain('seen at 14 Hz');
  });

  test('what cannot be told is said so', () => {
    const check = humCheck(of(10, 12e-6), 'm/m', 50, limits, noise);
    expect([check.verdict, check.figure]).toEqual(['not-judged', null]);
    expect(check.why).toContain('Cannot be told: at 10 samples a second 50 Hz');
  });
});
