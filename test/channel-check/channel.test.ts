import { describe, expect, test } from 'vitest';
import {
  channelVerdict,
  checkChannel,
  type ChannelFacts,
} from '../../shared/channel-check/channel.ts';
import { heatingCheck, insulationCheck } from '../../shared/channel-check/electrical.ts';
import { defaultLimits } from '../../shared/channel-check/limits.ts';
import type { Watched } from '../../shared/channel-check/series.ts';
import { gravest, judge } from '../../shared/channel-check/verdict.ts';
import { offsetCheck, rangeCheck } from '../../shared/channel-check/wiring.ts';
import { inWords } from '../../shared/channel-check/words.ts';
import type { BridgeResponse, Signal } from '../../shared/model/calibration.ts';
import { apply, compose, inverse } from '../../shared/model/fractional-linear.ts';
import { ohm, seconds, squareMetre, volt } from '../../shared/model/units.ts';
import { signalMap } from '../../shared/pipeline/2-ratio/signal.ts';
import { bridgeStrain } from '../../shared/pipeline/3-strain/bridge.ts';
import { bridge } from '../uncertainty/wiring.ts';
import { normal, sampled, watched } from './signals.ts';

// Limits of every verdict here but where a source stands beside it: common practice, no source.
const LIMITS = defaultLimits('bridge');
const VOLTS: Signal = { kind: 'volts', excitation: { kind: 'stated', volts: volt(5) } };

/** Volts of a quarter bridge at 5 V for a strain over time. */
const volts = (
  response: BridgeResponse,
  rate: number,
  duration: number,
  strainAt: (t: number) => number,
): Watched => {
  const map = compose(signalMap(VOLTS), bridgeStrain(response));
  const raw = sampled(rate, duration, (t) => apply(inverse(map), strainAt(t))).values;
  return { raw, input: raw, dt: seconds(1 / rate), map };
};

const facts = (response: BridgeResponse, change: Partial<ChannelFacts> = {}): ChannelFacts => ({
  unit: 'm/m',
  record: { signal: VOLTS, response },
  range: [-0.025, 0.025],
  insulation: null,
  heating: null,
  push: null,
  ...change,
});

describe('a whole channel', () => {
  const response = bridge('quarter');
  const scatter = normal(11);
  const quiet = volts(response, 250, 120, () => 300e-6 + 0.8e-6 * scatter());
  const verdicts = (checks: ReturnType<typeof checkChannel>) =>
    Object.fromEntries(checks.map(({ kind, verdict }) => [kind, verdict]));

  test('in order: every check that has what it needs passes, the others are not judged', () => {
    const checks = checkChannel(quiet, facts(response), LIMITS);
    expect(verdicts(checks)).toEqual({
      alive: 'pass',
      frozen: 'pass',
      range: 'pass',
      offset: 'pass',
      noise: 'pass',
      'mains-50': 'pass',
      'mains-60': 'pass',
      drift: 'pass',
      sign: 'not-judged',
      insulation: 'not-judged',
      'self-heating': 'not-judged',
    });
    expect(channelVerdict(checks)).toBe('pass');
    expect((checks.find(({ kind }) => kind === 'noise')?.figure ?? NaN) * 1e6).toBeCloseTo(0.8, 1);
    expect(checks.every(({ why }) => why.length > 10)).toBe(true);
  });

  test('hum, moisture drift and a wrong push, each found by its own check', () => {
    const bad = volts(
      response,
      250,
      120,
      (t) => 15e-6 * Math.sin(2 * Math.PI * 50 * t) + (20e-6 / 60) * t + 0.8e-6 * scatter(),
    );
    const push = {
      series: sampled(50, 10, (t) => (t > 5 && t < 7 ? -50e-6 : 0) + 1e-6 * scatter()),
      expected: 1 as const,
      timesNoise: 5,
    };
    const checks = checkChannel(bad, facts(response, { push }), LIMITS);
    expect(verdicts(checks)).toMatchObject({
      alive: 'pass',
      'mains-50': 'fail',
      'mains-60': 'pass',
      drift: 'fail',
      sign: 'fail',
    });
    expect(channelVerdict(checks)).toBe('fail');
  });

  test('a broken wire: nothing believed, not alive, all else not judged', () => {
    const raw = Float64Array.from({ length: 500 }, () => NaN);
    const checks = checkChannel({ ...quiet, raw, input: raw }, facts(response), LIMITS);
    const { alive, ...others } = verdicts(checks);
    expect(alive).toBe('fail');
    expect(new Set(Object.values(others))).toEqual(new Set(['not-judged']));
  });

  test('a hook’s load cell: told, judged only by what needs no limit of its own', () => {
    const load = watched(sampled(50, 90, () => 1000 + 5 * scatter()));
    const record = {
      signal: { kind: 'direct' },
      response: { kind: 'linear', perUnit: 1, zero: 0 },
    } as const;
    const checks = checkChannel(
      load,
      { ...facts(response), unit: 'N', record, range: [-5e5, 5e5] },
      defaultLimits('linear'),
    );
    expect(verdicts(checks)).toMatchObject({
      alive: 'pass',
      range: 'pass',
      noise: 'not-judged',
      offset: 'not-judged',
      drift: 'not-judged',
    });
    expect(checks.find(({ kind }) => kind === 'noise')?.figure).toBeCloseTo(5, 0);
  });
});

describe('unloaded offset', () => {
  const record = (change: Partial<BridgeResponse> = {}) => ({
    signal: VOLTS,
    response: bridge('quarter', change),
  });
  const at = (millivolts: number) => watched(sampled(10, 5, () => millivolts / 1e3));

  test.each([
    [5, 'pass'],
    [-5, 'pass'],
    [15, 'doubtful'],
    [-40, 'fail'],
  ])('%d mV at 5 V: %s', (millivolts, verdict) => {
    const check = offsetCheck(at(millivolts), record(), LIMITS.offset);
    expect((check.figure ?? NaN) * 1e3).toBeCloseTo(millivolts / 5, 12);
    expect(check.verdict).toBe(verdict);
  });

  test('what two untrimmed wires of 5 Ω bring, 20 mV/V (computed, nodal solve), is allowed for', () => {
    const leads = { kind: 'two-wire', resistance: ohm(5), trimmed: false } as const;
    const check = offsetCheck(at(100.5), record({ leads }), LIMITS.offset);
    expect(check.also[0]?.value).toBeCloseTo(0.02, 12);
    expect((check.figure ?? NaN) * 1e3).toBeCloseTo(0.1, 12);
    expect(check.verdict).toBe('pass');
  });
});

describe('input range', () => {
  const at = (...figures: number[]) => ({
    ...watched(sampled(1, figures.length, (t) => figures[t] ?? NaN)),
  });
  test.each([
    [[0, 1, -2], 0.4, 'pass'],
    [[0, 8.5], 0.075, 'doubtful'],
    [[-9.9, 0], 0.005, 'fail'],
    [[0, 11], 0, 'fail'],
  ])('%j of ±10: %d of the span left, %s', (figures, left, verdict) => {
    const check = rangeCheck(at(...figures), [-10, 10], LIMITS.range);
    expect(check.figure).toBeCloseTo(left, 12);
    expect(check.verdict).toBe(verdict);
  });

  test('no range, no verdict', () => {
    expect(rangeCheck(at(1), null, LIMITS.range).verdict).toBe('not-judged');
  });
});

// Verdict: ASTM E1237 and textbooks (value from memory), 100 MΩ in the field, look into it below
// 10 MΩ. False strain at GF 2, −Rg/(GF·(Rg + R)) (computed).
test.each([
  [120, 1e6, -59.993, 'fail'],
  [120, 10e6, -5.99993, 'doubtful'],
  [120, 100e6, -0.6, 'pass'],
  [120, 1e9, -0.06, 'pass'],
  [350, 1e6, -174.94, 'fail'],
  [350, 10e6, -17.499, 'doubtful'],
  [350, 100e6, -1.75, 'pass'],
  [350, 1e9, -0.175, 'pass'],
])('gauge of %d Ω, %d Ω to ground: %d µε feigned, %s', (gauge, resistance, feigned, verdict) => {
  const response = bridge('quarter', { gaugeResistance: ohm(gauge) });
  const check = insulationCheck(response, ohm(resistance), LIMITS.insulation);
  expect(check.verdict).toBe(verdict);
  expect(((check.also[0]?.value ?? NaN) * 1e6) / feigned).toBeCloseTo(1, 4);
});

// Dally & Riley, Experimental Stress Analysis (value from memory): 0.003 to 0.008 W/mm² of grid on
// thick steel, 0.0015 to 0.003 on thin; V²/4R over 18 mm² (computed).
test.each([
  [5, 120, 'thick-steel', 2.8935e-3, 'pass'],
  [5, 120, 'thin-steel', 2.8935e-3, 'doubtful'],
  [5, 350, 'thin-steel', 9.9206e-4, 'pass'],
  [10, 120, 'thick-steel', 1.1574e-2, 'fail'],
  [5, 120, 'unfilled-plastic', 2.8935e-3, 'fail'],
] as const)('%d V on %d Ω, %s: %d W/mm², %s', (excitation, gauge, on, density, verdict) => {
  const response = bridge('quarter', { gaugeResistance: ohm(gauge) });
  const heating = { excitation: volt(excitation), gridArea: squareMetre(18e-6), on };
  const check = heatingCheck(response, heating);
  expect((check.figure ?? NaN) / 1e6 / density).toBeCloseTo(1, 4);
  expect(check.verdict).toBe(verdict);
});

test('bands judge upward and downward, ends belong to the better side', () => {
  const low = { good: 1, bad: 2 };
  expect([0, 1, 1.5, 2, 3, NaN].map((figure) => judge(figure, low))).toEqual([
    'pass',
    'pass',
    'doubtful',
    'doubtful',
    'fail',
    'not-judged',
  ]);
  const high = { good: 2, bad: 1 };
  expect([3, 2, 1.5, 1, 0].map((figure) => judge(figure, high))).toEqual([
    'pass',
    'pass',
    'doubtful',
    'doubtful',
    'fail',
  ]);
  expect(gravest(['pass', 'not-judged', 'doubtful'])).toBe('doubtful');
  expect(gravest(['not-judged'])).toBe('not-judged');
  expect(gravest([])).toBe('not-judged');
});

test('figures in words have three digits and the unit that people read', () => {
  expect(inWords(12.3456e-6, 'm/m')).toBe('12.3 µε');
  expect(inWords(1e-6 / 60, 'm/m/s')).toBe('1 µε/min');
  expect(inWords(0.0052, 'V/V')).toBe('5.2 mV/V');
  expect(inWords(12345, 'N')).toBe('12.3 kN');
  expect(inWords(2893.5, 'W/m2')).toBe('0.00289 W/mm²');
  expect(inWords(0.333, '1')).toBe('33.3 %');
});
