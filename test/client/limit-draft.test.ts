import { describe, expect, test } from 'vitest';
import type { Limit, LimitContext } from '../../shared/model/limit.ts';
import { pascal, seconds, share } from '../../shared/model/units.ts';
import { thresholdOf } from '../../shared/pipeline/5-alarm/threshold.ts';
import {
  basesFor,
  draftFaults,
  draftOf,
  limitOf,
  rebased,
} from '../../client/state/limit-draft.ts';

/** S275 of 16 < t ≤ 40 mm: fy 265 MPa, EN 10025-2:2019 Table 6; E 210 GPa, EN 1993-1-1:2005 §3.2.6. */
const STRAIN: LimitContext = {
  measurand: 'strain',
  stressPerStrain: pascal(210e9),
  yieldStrength: pascal(265e6),
  highestLimit: share(0.8),
};
const TEMPERATURE: LimitContext = {
  ...STRAIN,
  measurand: 'temperature',
  stressPerStrain: null,
  yieldStrength: null,
};
const SHARE: Limit = {
  level: 'caution',
  basis: 'share',
  value: 0.6,
  deadband: 0.02,
  onDelay: seconds(0.2),
};
const HOT: Limit = { ...SHARE, basis: 'value', value: 45, deadband: 2 };

describe('a limit in the form', () => {
  test('comes back as it went in, in every basis and both systems of units', () => {
    const limits: [Limit, LimitContext][] = [
      [SHARE, STRAIN],
      [{ ...SHARE, basis: 'stress', value: 140e6, deadband: 5e6 }, STRAIN],
      [{ ...SHARE, basis: 'strain', value: 650e-6, deadband: 15e-6 }, STRAIN],
      [HOT, TEMPERATURE],
    ];
    for (const [limit, context] of limits) {
      for (const units of ['si', 'us'] as const) {
        const back = limitOf(draftOf('caution', [limit], context, units), context, units);
        expect(back.value / limit.value).toBeCloseTo(1, 8);
        expect(back.deadband / limit.deadband).toBeCloseTo(1, 6);
        expect(back).toMatchObject({ level: 'caution', basis: limit.basis, onDelay: 0.2 });
      }
    }
  });

  test('a band of 2 °C is 3.6 °F, not 35.6 °F', () => {
    const draft = draftOf('caution', [HOT], TEMPERATURE, 'us');
    expect(draft).toMatchObject({ value: '113', deadband: '3.6' });
  });

  test('stated otherwise, stays where it was', () => {
    const before = thresholdOf(SHARE, STRAIN);
    const draft = draftOf('caution', [SHARE], STRAIN, 'si');
    const asStress = rebased(draft, 'stress', STRAIN, 'si');
    // 0.6 × 265 MPa = 159 MPa; 159 / 210 000 = 757.14 µε.
    expect(asStress.value).toBe('159');
    const asStrain = rebased(asStress, 'strain', STRAIN, 'si');
    expect(Number(asStrain.value)).toBeCloseTo(757.142857, 5);
    const after = thresholdOf(limitOf(asStrain, STRAIN, 'si'), STRAIN);
    expect(after.raise).toBeCloseTo(before.raise, 12);
    expect(after.clear).toBeCloseTo(before.clear, 12);
  });

  test('an empty field stated otherwise stays empty', () => {
    const draft = { ...draftOf('stop', [], STRAIN, 'si'), wanted: true };
    expect(rebased(draft, 'stress', STRAIN, 'si')).toEqual({ ...draft, basis: 'stress' });
  });

  test('names each field that holds no number, as the server would', () => {
    const drafts = [
      { ...draftOf('caution', [SHARE], STRAIN, 'si'), wanted: false, value: 'x' },
      { ...draftOf('stop', [], STRAIN, 'si'), wanted: true, value: '', onDelay: 'soon' },
    ];
    expect(draftFaults(drafts)).toEqual([
      { path: '/limits/0/value', expected: 'a number', came: 'nothing' },
      { path: '/limits/0/onDelay', expected: 'a number', came: 'soon' },
    ]);
  });

  test('a transducer takes a limit in its own unit only', () => {
    expect(basesFor(TEMPERATURE)).toEqual(['value']);
    expect(basesFor(STRAIN)).toEqual(['share', 'stress', 'strain']);
  });
});
