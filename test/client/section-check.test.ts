import { describe, expect, test } from 'vitest';
import { sectionFinding } from '../../client/state/section-check.ts';
import { millimetreToMetre } from '../../shared/model/units.ts';

const gauge = (channel: string, y: number, z: number) => ({
  ...{ channel, y: millimetreToMetre(y), z: millimetreToMetre(z) },
});
const TIPS = [
  gauge('tl', 75, 150),
  gauge('tr', -75, 150),
  gauge('bl', 75, -150),
  gauge('br', -75, -150),
];
const of = (gauges: typeof TIPS) => ({ kind: 'section', quantity: 'residual', gauges }) as const;

// IPE 300, N 100 kN, My 40 kN·m, Mz 2 kN·m: plane sections, Gere; strains worked out apart.
const PLANE = [312.111397e-6, 548.716809e-6, -371.733803e-6, -135.128391e-6];
const off = (i: number, by: number) => PLANE.map((x, j) => (i === j ? x + by : x));

test('gauges on a plane agree', () => {
  expect(sectionFinding(of(TIPS), PLANE)).toMatchObject({ isDoubted: false, suspects: [] });
});

describe('a gauge that comes off', () => {
  test('among four: that one is wrong, or the section warps; which, four cannot say', () => {
    const finding = sectionFinding(of(TIPS), off(2, 200e-6));
    expect(finding?.words).toMatch(/one of these is wrong, or the section warps/);
    expect(finding?.suspects).toEqual(['tl', 'tr', 'bl', 'br']);
  });

  test('among six it is named', () => {
    const six = [...TIPS, gauge('left', 75, 20), gauge('top', 10, 150)];
    // ε0 + κy·z − κz·y of the same state, µε and 1/mm.
    const at = (y: number, z: number) => (88.491503 + 2.279484 * z - 1.577369 * y) * 1e-6;
    const strains = [...off(1, 200e-6), at(75, 20), at(10, 150)];
    expect(sectionFinding(of(six), strains)).toMatchObject({
      ...{ isDoubted: true, suspects: ['tr'] },
      words: expect.stringContaining('not to be believed'),
    });
  });
});

test('with a gauge that is not believed nothing is said', () => {
  expect(sectionFinding(of(TIPS), [...PLANE.slice(0, 3), null])).toBeNull();
});

test('three gauges check nothing, and that is said', () => {
  const finding = sectionFinding(of(TIPS.slice(0, 3)), PLANE.slice(0, 3));
  expect(finding).toMatchObject({ isDoubted: false, deviation: null });
  expect(finding?.words).toContain('none of them is checked');
});
