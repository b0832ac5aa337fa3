import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { aliveCheck, frozenCheck } from '../../shared/channel-check/alive.ts';
import { driftCheck, driftOf } from '../../shared/channel-check/drift.ts';
import { defaultLimits } from '../../shared/channel-check/limits.ts';
import { noiseCheck, noiseOf } from '../../shared/channel-check/noise.ts';
import { signCheck } from '../../shared/channel-check/push.ts';
import { median } from '../../shared/channel-check/series.ts';
import { even } from '../uncertainty/wiring.ts';
import { normal, sampled } from './signals.ts';

// Limits of every verdict here: common practice, no source.
const LIMITS = defaultLimits('bridge');
const MICRO = 1e-6;

describe('alive', () => {
  const steady = sampled(10, 10, (t) => t);
  const losing = (each: number) => ({
    ...steady,
    values: steady.values.map((value, i) => (i % each === 0 ? NaN : value)),
  });
  test.each([
    ['all', steady, 1, 'pass'],
    ['a twentieth missing', losing(20), 0.95, 'doubtful'],
    ['a fifth missing', losing(5), 0.8, 'fail'],
    ['none', losing(1), 0, 'fail'],
  ])('%s', (_name, series, figure, verdict) => {
    const check = aliveCheck(series, LIMITS.alive);
    expect(check.figure).toBeCloseTo(figure, 12);
    expect(check.verdict).toBe(verdict);
  });

  test('before any sample was due nothing is judged', () => {
    expect(
      aliveCheck(
        sampled(10, 0, () => 0),
        LIMITS.alive,
      ).verdict,
    ).toBe('not-judged');
  });
});

describe('frozen', () => {
  const scatter = normal(1);
  test('a value that never changes fails, gaps or not; noise passes', () => {
    const still = sampled(10, 30, (t) => (t > 3 && t < 5 ? NaN : 5 * MICRO));
    expect(frozenCheck(still, LIMITS.frozen)).toMatchObject({ verdict: 'fail', figure: 1 });
    expect(frozenCheck(sampled(10, 30, scatter), LIMITS.frozen).verdict).toBe('pass');
  });

  test('hung for half of the window: doubtful, and for how long', () => {
    const hung = sampled(10, 30, (t) => (t < 15 ? scatter() : 3));
    const check = frozenCheck(hung, LIMITS.frozen);
    expect(check.verdict).toBe('doubtful');
    expect(check.also[0]?.value).toBeCloseTo(15, 6);
  });

  test('nine samples are too few', () => {
    expect(
      frozenCheck(
        sampled(1, 9, () => 0),
        LIMITS.frozen,
      ).verdict,
    ).toBe('not-judged');
  });
});

describe('noise', () => {
  test('deviation and robust deviation of normal noise are σ, drift is no noise', () => {
    const scatter = normal(2);
    const noise = noiseOf(sampled(100, 100, (t) => 3 * scatter() + 50 * t));
    expect(noise.deviation / 3).toBeCloseTo(1, 1);
    expect(noise.robust / 3).toBeCloseTo(1, 1);
    expect(noise.samples).toBe(10_000);
  });

  test('figures without scatter: exactly that of the residuals, NIST StRD method of line fit', () => {
    // Residuals −1, 3, −3, 1 of a line: √(20/2).
    const values = Float64Array.of(-1 + 0, 3 + 5, -3 + 10, 1 + 15);
    const noise = noiseOf({ ...sampled(1, 4, () => 0), values });
    expect(noise.deviation).toBeCloseTo(Math.sqrt(10), 12);
    expect(noise.peakToPeak).toBeCloseTo(6, 12);
    // Median magnitude 2.
    expect(noise.robust).toBeCloseTo(2 * 1.482602218505602, 12);
  });

  const of = (sigma: number, spike = 0) => {
    const scatter = normal(3);
    return sampled(50, 60, (t) => sigma * MICRO * scatter() + (t % 20 === 7 ? spike * MICRO : 0));
  };
  test.each([
    [0.7, 'pass'],
    [4, 'doubtful'],
    [20, 'fail'],
  ])('%d µε: %s', (sigma, verdict) => {
    expect(noiseCheck(of(sigma), 'm/m', LIMITS.noise).verdict).toBe(verdict);
  });

  test('three spikes in quiet noise are doubtful and named', () => {
    const check = noiseCheck(of(0.2, 40), 'm/m', LIMITS.noise);
    expect(check.verdict).toBe('doubtful');
    expect(check.why).toContain('spikes');
  });

  test('coarse steps are not taken for spikes', () => {
    const scatter = normal(4);
    const coarse = sampled(50, 60, () => MICRO * Math.round(0.4 * scatter()));
    expect(noiseOf(coarse).step).toBeCloseTo(MICRO, 12);
    expect(noiseCheck(coarse, 'm/m', LIMITS.noise).verdict).toBe('pass');
  });

  test('a load cell without a limit is told its noise, not judged; two samples are none', () => {
    const check = noiseCheck(sampled(10, 5, normal(5)), 'N', null);
    expect(check.verdict).toBe('not-judged');
    expect(check.figure).toBeGreaterThan(0.5);
    expect(
      noiseCheck(
        sampled(1, 2, () => 1),
        'm/m',
        LIMITS.noise,
      ).figure,
    ).toBeNull();
  });
});

describe('drift', () => {
  const drifting = (perMinute: number, sigma: number, duration = 300) => {
    const scatter = normal(6);
    return sampled(20, duration, (t) => MICRO * (200 + (perMinute / 60) * t + sigma * scatter()));
  };

  test('slope of the line, and an error that shrinks with time', () => {
    const short = driftOf(drifting(3, 1, 60));
    const long = driftOf(drifting(3, 1, 600));
    expect(((long?.slope ?? NaN) / MICRO) * 60).toBeCloseTo(3, 1);
    expect(long?.error).toBeLessThan((short?.error ?? NaN) / 5);
  });

  test('of 200 windows of noise, about 19 in 20 have no slope within their interval, GUM 6.2', () => {
    const scatter = normal(7);
    const within = Array.from({ length: 200 }, () => driftOf(sampled(10, 60, scatter))).filter(
      (drift) => drift !== null && Math.abs(drift.slope) <= drift.halfWidth,
    ).length;
    expect(within).toBeGreaterThan(178);
    expect(within).toBeLessThan(200);
  });

  test.each([
    [0, 1, 'pass'],
    [0.8, 0.5, 'pass'],
    [3, 1, 'doubtful'],
    [-3, 1, 'doubtful'],
    [12, 1, 'fail'],
    [-12, 1, 'fail'],
    // What cannot be told apart from either limit for its noise.
    [0, 100, 'doubtful'],
    [5, 100, 'doubtful'],
  ])('%d µε/min in %d µε of noise over five minutes: %s', (perMinute, sigma, verdict) => {
    expect(driftCheck(drifting(perMinute, sigma), 'm/m', LIMITS.drift, 60).verdict).toBe(verdict);
  });

  test('half a minute is too short', () => {
    const check = driftCheck(drifting(12, 1, 30), 'm/m', LIMITS.drift, 60);
    expect([check.verdict, check.figure]).toEqual(['not-judged', null]);
    expect(check.why).toBe('At least 60 s of samples are needed, 30 s came.');
  });

  test('any straight drift comes back, whatever is missing', () => {
    const rate = even(-1, 1);
    fc.assert(
      fc.property(rate, fc.integer({ min: 2, max: 9 }), (slope, each) => {
        const series = sampled(10, 100, (t) => slope * t);
        // A whole piece or none is missing, so that each mean lies at its piece's middle.
        const values = series.values.map((value, i) =>
          Math.floor(i / (1000 / 60)) % each === 1 ? NaN : value,
        );
        expect(driftOf({ ...series, values })?.slope).toBeCloseTo(slope, 2);
      }),
    );
  });
});

describe('sign by a push', () => {
  const pushed = (size: number, back = 0, sigma = 1) => {
    const scatter = normal(8);
    return sampled(50, 10, (t) => {
      const push = t > 4 && t < 6 ? size : t > 6 && t < 7 ? back : 0;
      return MICRO * (-300 + push + sigma * scatter());
    });
  };
  const of = (size: number, back = 0, sigma = 1) =>
    signCheck({ series: pushed(size, back, sigma), expected: 1, timesNoise: 5 }, 'm/m');

  test('to the side expected passes, to the other fails, and says by how much', () => {
    expect(of(40).verdict).toBe('pass');
    expect((of(40).figure ?? NaN) / MICRO).toBeCloseTo(40, -1);
    expect(of(-40).verdict).toBe('fail');
    expect((of(-40).figure ?? NaN) / MICRO).toBeCloseTo(-40, -1);
  });

  test('lost in noise, or to both sides: doubtful', () => {
    expect(of(2).verdict).toBe('doubtful');
    expect(of(40, -35).verdict).toBe('doubtful');
    expect(of(40, -10).verdict).toBe('pass');
  });

  test('without a rest before it nothing is judged', () => {
    const series = sampled(2, 5, () => 0);
    expect(signCheck({ series, expected: 1, timesNoise: 5 }, 'm/m').verdict).toBe('not-judged');
  });

  test('an input that stands still shows no push', () => {
    const series = sampled(50, 10, () => 1);
    expect(signCheck({ series, expected: 1, timesNoise: 5 }, 'm/m').verdict).toBe('doubtful');
  });
});

test('median: the middle one, the mean of two, none of nothing', () => {
  expect(median([3, NaN, 1, 2])).toBe(2);
  expect(median([4, 1, 2, 3])).toBe(2.5);
  expect(median([])).toBeNaN();
});
