import { describe, expect, test } from 'vitest';
import { readSite } from '../../server/site/read.ts';
import { channelsOf } from '../../shared/model/site.ts';
import { limitContextOf } from '../../shared/pipeline/index.ts';
import { demoWith, placeOf } from './edit.ts';

const AT = `${placeOf('B1-end')}/virtual`;
const ROSETTE = {
  ...{ kind: 'rosette', layout: 'rectangular', quantity: 'equivalent-stress' },
  gauges: ['B1-end-web-0', 'B1-end-web-45', 'B1-end-web-90'],
};
const channel = (definition: object, more: object = {}) => ({
  ...{ id: 'v', name: 'Virtual', definition },
  ...more,
});
const read = (...virtual: object[]) => readSite(demoWith({ [AT]: virtual }));
const faultsOf = (...virtual: object[]) => {
  const site = read(...virtual);
  return site.ok ? [] : site.faults;
};
const contextOf = (definition: object) => {
  const site = read(channel(definition));
  if (!site.ok) throw new Error(JSON.stringify(site.faults));
  const found = channelsOf(site.site).find((one) => one.channel.id === 'v');
  if (!found) throw new Error('no channel');
  return limitContextOf(found.channel, found.member, site.site);
};

test('an equivalent stress is limited by yield, a shear stress by yield over √3 (von Mises)', () => {
  const yielding = contextOf(ROSETTE);
  expect(yielding).toMatchObject({ measurand: 'stress', stressPerStrain: 1 });
  const shear = contextOf({ ...ROSETTE, quantity: 'shear-stress-in-plane' });
  const ratio = (yielding.yieldStrength ?? NaN) / (shear.yieldStrength ?? NaN);
  expect(ratio).toBeCloseTo(Math.sqrt(3), 12);
});

test('a strain of a rosette has no uniaxial stress, a mean of gauges has', () => {
  expect(contextOf({ ...ROSETTE, quantity: 'principal-strain-1' }).stressPerStrain).toBeNull();
  const mean = { kind: 'mean', of: ['B1-mid-top-left', 'B1-mid-top-right'] };
  expect(contextOf(mean).stressPerStrain).toBeGreaterThan(1e11);
});

describe('refused with its place', () => {
  const limit = { level: 'stop', basis: 'stress_MPa', deadband: 1, on_delay_s: 0 };
  test.each([
    [channel({ ...ROSETTE, gauges: ['x', 'B1-end-web-45', 'B1-end-web-90'] }), 'gauges/0', 'known'],
    [channel({ ...ROSETTE, gauges: ['steel', 'B1-end-web-45', 'B1-end-web-90'] }), 'gauges/0', 'a'],
    [channel({ kind: 'mean', of: ['hook-load', 'steel'] }), 'of/1', 'a channel of force'],
    [channel({ kind: 'mean', of: ['v', 'hook-load'] }), 'of/0', 'stands before'],
    [
      channel({
        ...{ kind: 'expression', text: 'a + b', measurand: 'force' },
        names: { a: 'hook-load', b: 'steel' },
      }),
      'text',
      'units that go together',
    ],
    [
      channel({
        ...{ kind: 'section', quantity: 'axial' },
        gauges: [
          { channel: 'B1-mid-top-left', y_mm: 0, z_mm: 0 },
          { channel: 'B1-mid-top-right', y_mm: 10, z_mm: 10 },
          { channel: 'B1-mid-bottom-left', y_mm: 20, z_mm: 20 },
        ],
      }),
      'gauges',
      '',
    ],
  ])('%#', (virtual, place, words) => {
    const faults = faultsOf(virtual);
    expect(faults.map(({ path }) => path)).toContain(`${AT}/0/definition/${place}`);
    expect(faults[0]?.expected).toContain(words);
  });

  test('a limit above what the site allows', () => {
    const [fault] = faultsOf(channel(ROSETTE, { limits: [{ ...limit, value: 250 }] }));
    expect(fault).toMatchObject({ path: `${AT}/0/limits/0/value` });
    expect(faultsOf(channel(ROSETTE, { limits: [{ ...limit, value: 150 }] }))).toEqual([]);
  });
});
