import { describe, expect, test } from 'vitest';
import type { Limit, LimitContext } from '../../../shared/model/limit.ts';
import {
  gigapascalToPascal,
  megapascalToPascal,
  microstrainToStrain,
  seconds,
  share,
} from '../../../shared/model/units.ts';
import { limitFaults } from '../../../shared/pipeline/5-alarm/check-limits.ts';
import { shareOfThreshold, thresholdOf } from '../../../shared/pipeline/5-alarm/threshold.ts';

/** S275 up to 16 mm, EN 10025-2: ReH 275 MPa; E 210 GPa, EN 1993-1-1 §3.2.6. */
const S275: LimitContext = {
  measurand: 'strain',
  stressPerStrain: gigapascalToPascal(210),
  yieldStrength: megapascalToPascal(275),
  highestLimit: share(0.9),
};
const LOAD: LimitContext = {
  measurand: 'force',
  stressPerStrain: null,
  yieldStrength: null,
  highestLimit: share(0.9),
};

const limit = (partial: Partial<Limit>): Limit => ({
  level: 'stop',
  basis: 'strain',
  value: microstrainToStrain(900),
  deadband: 0,
  onDelay: seconds(0),
  ...partial,
});

describe('a limit in µε, MPa or share of yield is one and the same strain', () => {
  // Yield strain of S275 at 210 GPa: 1309.52 µε, computed from EN values.
  test.each([
    ['strain', microstrainToStrain(654.7619047619), 654.7619],
    ['stress', megapascalToPascal(137.5), 654.7619],
    ['share', 0.5, 654.7619],
  ] as const)('%s', (basis, value, microstrain) => {
    const threshold = thresholdOf(limit({ basis, value }), S275);
    expect(threshold.raise * 1e6).toBeCloseTo(microstrain, 3);
    expect(shareOfThreshold(-threshold.raise / 2, threshold)).toBeCloseTo(0.5, 12);
  });

  test('the deadband is taken in the same basis', () => {
    const threshold = thresholdOf(limit({ basis: 'share', value: 0.6, deadband: 0.06 }), S275);
    expect(threshold.clear / threshold.raise).toBeCloseTo(0.9, 12);
  });
});

const pathsOf = (limits: Limit[], context = S275) =>
  limitFaults(limits, context).map((f) => f.path);

describe('limits that are refused, with the reason', () => {
  test('at yield, above yield, above the share that the site allows', () => {
    const at = (value: number) => limitFaults([limit({ basis: 'share', value })], S275);
    expect(at(0.9)).toEqual([]);
    expect(at(0.91)).toEqual([
      {
        path: '/limits/0/value',
        expected: 'at most 90 % of yield, the highest the site allows',
        came: '91 % of yield',
      },
    ]);
    expect(at(1)).toMatchObject([{ expected: 'below yield', came: '100 % of yield' }]);
    // The wrong unit typed: 900 MPa meant as 900 µε.
    expect(
      limitFaults([limit({ basis: 'stress', value: megapascalToPascal(900) })], S275),
    ).toMatchObject([{ expected: 'below yield', came: '327.273 % of yield' }]);
  });

  test('caution at or above stop, in whatever bases they are stated', () => {
    const stop = limit({ basis: 'share', value: 0.5 });
    const caution = (value: number) => limit({ level: 'caution', basis: 'stress', value });
    expect(pathsOf([caution(megapascalToPascal(137)), stop])).toEqual([]);
    expect(limitFaults([caution(megapascalToPascal(137.5)), stop], S275)).toEqual([
      {
        path: '/limits/0/value',
        expected: 'below the stop limit of 50 % of yield',
        came: '137.5 MPa (50 % of yield)',
      },
    ]);
  });

  test('in the unit that each is stated in, not in SI', () => {
    const came = (limits: Limit[], context: LimitContext) =>
      limitFaults(limits, context).map((fault) => [fault.expected, fault.came]);
    const caution = { level: 'caution', value: microstrainToStrain(950) } as const;
    expect(came([limit(caution), limit({})], S275)).toEqual([
      ['below the stop limit of 900 µε', '950 µε'],
    ]);
    const wide = limit({ deadband: microstrainToStrain(901) });
    expect(came([wide], S275)).toEqual([[`from 0 to below the limit's value of 900 µε`, '901 µε']]);
    const values: [LimitContext['measurand'], number, string][] = [
      ['force', 125e3, '125 kN'],
      ['displacement', 0.0123, '12.3 mm'],
      ['temperature', 60, '60 °C'],
      ['moment', 40e3, '40 kN·m'],
      ['angle', Math.PI / 6, '30°'],
      ['number', 1.25, '1.25'],
    ];
    for (const [measurand, value, words] of values) {
      const pair = [
        limit({ level: 'caution', basis: 'value', value }),
        limit({ basis: 'value', value }),
      ];
      expect(came(pair, { ...LOAD, measurand })).toEqual([
        [`below the stop limit of ${words}`, words],
      ]);
    }
  });

  test('every fault at once', () => {
    const faults = limitFaults(
      [
        limit({ value: 0 }),
        limit({ value: NaN }),
        limit({ level: 'caution', basis: 'value', deadband: -1, onDelay: seconds(4000) }),
      ],
      S275,
    );
    expect(faults.map(({ path }) => path)).toEqual([
      '/limits/0/value',
      '/limits/1/level',
      '/limits/1/value',
      '/limits/2/basis',
      '/limits/2/deadband',
      '/limits/2/onDelay',
    ]);
  });

  test('a load cell has no yield and takes no stress limit', () => {
    expect(pathsOf([limit({ basis: 'value', value: 125e3 })], LOAD)).toEqual([]);
    expect(pathsOf([limit({ basis: 'stress', value: 1 })], LOAD)).toEqual(['/limits/0/basis']);
  });
});
