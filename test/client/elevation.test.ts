import { describe, expect, test } from 'vitest';
import {
  arrangeViews,
  barShape,
  laneOffsets,
  layoutElevation,
  OVERSHOOT,
  viewExtent,
} from '../../client/state/elevation.ts';
import { demoSite } from '../demo/site.ts';

const site = await demoSite();
const [lift] = site.structures;
if (!lift) throw new Error('the demo has no structure');
const viewNamed = (name: string) => {
  const view = lift.elevations.find((candidate) => candidate.name === name);
  if (!view) throw new Error(`no view ${name}`);
  return view;
};
const MARGINS = { side: 50, top: 60, bottom: 20 };
const portal = layoutElevation(lift, viewNamed('Portal 1'), 700, 10_000, MARGINS);
const member = (id: string) => {
  const shape = portal.members.find((candidate) => candidate.member.id === id);
  if (!shape) throw new Error(`no member ${id}`);
  return shape;
};

// The travelling lift of the demo: span 6.0 m, beams' axis at 4.5 m, HE 300 B 300 mm and HE 200 B 200 mm high (EN 10365).
describe('a side view', () => {
  test('is to scale: span, height and depth of sections', () => {
    expect(viewExtent(lift, viewNamed('Portal 1'))).toEqual({ width: 6, height: 4.5 });
    expect(portal.scale).toBe(100);
    expect(member('B1').from).toEqual([50, 60]);
    expect(member('B1').to).toEqual([650, 60]);
    expect(member('B1').depth).toBeCloseTo(30, 9);
    expect(member('L1').depth).toBeCloseTo(20, 9);
    expect(portal.ground).toBe(60 + 450);
    expect(portal.height).toBe(60 + 450 + 20);
  });

  test('stands on the ground where legs end, once each', () => {
    expect(portal.supports).toEqual([
      [50, 510],
      [650, 510],
    ]);
  });

  test('has each station at its distance along the member', () => {
    const spots = new Map(portal.stations.map(({ station, at }) => [station.id, at]));
    expect(spots.get('B1-mid')).toEqual([350, 60]);
    expect(spots.get('B1-end')?.[0]).toBeCloseTo(90, 9);
    expect(spots.get('L2-mid')).toEqual([650, 285]);
  });

  test('turns bars so that tension is upward on beams and to the left on legs', () => {
    expect(member('B1').angle).toBe(0);
    expect(member('L1').angle).toBe(-90);
    const down = { ...member('L1').member };
    const turned = {
      ...lift,
      members: [{ ...down, from: down.to, to: down.from }],
    };
    const view = { name: 'turned', right: 'x' as const, members: ['L1'] };
    expect(layoutElevation(turned, view, 200, 600, MARGINS).members[0]?.angle).toBe(-90);
  });

  test('puts a name where no station is', () => {
    // B1 has stations at 0.4, 2, 3 and 4 m: the longest free stretch is 4 to 6 m.
    expect(member('B1').name).toEqual([550, 60]);
  });

  test('looked at from behind, runs the other way', () => {
    const behind = { ...viewNamed('Portal 1'), right: '-x' as const };
    const mirrored = layoutElevation(lift, behind, 700, 10_000, MARGINS);
    expect(mirrored.members.find(({ member: { id } }) => id === 'L1')?.from[0]).toBe(650);
  });

  test('gives up scale before it grows too high, and stays in the middle', () => {
    const low = layoutElevation(lift, viewNamed('Portal 1'), 700, 305, MARGINS);
    expect(low.scale).toBe(50);
    expect(low.height).toBe(305);
    expect(low.members[0]?.from[0]).toBe(200);
  });

  test('passes over members that the structure does not have', () => {
    const view = { name: 'x', right: 'x' as const, members: ['none'] };
    const empty = layoutElevation(lift, view, 300, 300, MARGINS);
    expect(empty.members).toEqual([]);
    expect(empty.height).toBe(80);
  });
});

describe('a two-sided bar', () => {
  test('goes up for tension and down for compression, full at its end mark', () => {
    expect(barShape(0.5, 40)).toEqual({ y: -20, height: 20, side: 'tension', beyond: false });
    expect(barShape(-1, 40)).toEqual({ y: 0, height: 40, side: 'compression', beyond: false });
  });

  test('past what it can show, says so', () => {
    const bar = barShape(-8, 40);
    expect(bar?.height).toBeCloseTo(40 * OVERSHOOT, 9);
    expect(bar?.beyond).toBe(true);
  });

  test('is not there without a figure', () => {
    expect(barShape(NaN, 40)).toBeNull();
  });
});

test('bars of one station stand side by side, centred', () => {
  expect(laneOffsets(4, 12)).toEqual([-18, -6, 6, 18]);
  expect(laneOffsets(1, 12)).toEqual([0]);
});

describe('views side by side', () => {
  test('share one scale while it is large enough, and stand alone on a phone', () => {
    expect(arrangeViews([6, 6, 4], 1000, 54, 8, 34)).toEqual({ perRow: 3, scale: 41.25 });
    expect(arrangeViews([6, 6, 4], 560, 54, 8, 25).perRow).toBe(2);
    expect(arrangeViews([6, 6, 4], 334, 54, 8, 34).perRow).toBe(1);
  });
});
