import { describe, expect, test } from 'vitest';
import { readSite } from '../../server/site/read.ts';
import { measuredOf, type Site } from '../../shared/model/site.ts';
import { demoWith, placeOf } from './edit.ts';

const siteWith = (changes: Readonly<Record<string, unknown>>): Site => {
  const read = readSite(demoWith(changes));
  if (!read.ok) throw new Error(JSON.stringify(read.faults, null, 2));
  return read.site;
};
const channelWith = (id: string, changes: Readonly<Record<string, unknown>> = {}) => {
  const found = measuredOf(siteWith(changes)).find(({ channel }) => channel.id === id);
  if (!found) throw new Error(`no channel ${id}`);
  return found;
};
const recordOf = (id: string, changes: Readonly<Record<string, unknown>> = {}) => {
  const [record] = channelWith(id, changes).channel.calibration;
  if (!record) throw new Error(`no record of ${id}`);
  return record;
};

const B1 = placeOf('B1');
const TIP = placeOf('B1-mid-top-left');

describe("people's units in the file are SI inside", () => {
  test('a gauge: mV/V, Ω, a lead of one conductor, the time as UTC', () => {
    const record = recordOf('B1-mid-top-left', {
      [`${TIP}/calibration/0/valid_from`]: '2024-05-06T09:30:00+02:00',
    });
    expect(record.validFrom).toBe(Date.UTC(2024, 4, 6, 7, 30) / 1000);
    expect(record.response).toMatchObject({
      ...{ circuit: 'quarter', gaugeFactor: 2.11, gaugeResistance: 350, poisson: 0.3 },
      leads: { kind: 'three-wire', resistance: 0.9 },
    });
    expect(record.response.zero).toBeCloseTo(0.38e-3, 12);
  });

  test("Poisson's ratio is the material's unless the record gives it", () => {
    const own = { [`${TIP}/calibration/0/response/poisson`]: 0.28 };
    expect(recordOf('B1-mid-top-left', own).response).toMatchObject({ poisson: 0.28 });
  });

  test('counts: 2^23 of them are 4 mV/V, or 20 mV', () => {
    const ratio = recordOf('L3-mid-bending').signal;
    if (ratio.kind !== 'counts') throw new Error('expected counts');
    expect(ratio).toMatchObject({ as: 'ratio', zeroCount: 0 });
    expect(ratio.perCount * 2 ** 23).toBeCloseTo(4e-3, 12);
    const volts = recordOf('B2-end-web-shear').signal;
    if (volts.kind !== 'counts') throw new Error('expected counts');
    expect(volts).toMatchObject({ as: 'volts', zeroCount: 12, excitation: { volts: 5 } });
    expect(volts.perCount * 2 ** 23).toBeCloseTo(20e-3, 12);
  });

  test('transducers: kN a mV/V, mm a V, °C as they come', () => {
    const load = recordOf('hook-load').response;
    if (load.kind !== 'linear') throw new Error('expected a line');
    expect((2.0012e-3 + 0.0231e-3 - load.zero) * load.perUnit).toBeCloseTo(200e3, 6);
    const sag = recordOf('B1-mid-deflection').response;
    if (sag.kind !== 'linear') throw new Error('expected a line');
    expect((1.25 + 0.5 - sag.zero) * sag.perUnit).toBeCloseTo(5e-3, 12);
    expect(recordOf('steel').response).toEqual({ kind: 'linear', perUnit: 1, zero: 0 });
  });

  test('limits: MPa, µε, kN, mm, °C and shares', () => {
    const limitsOf = (id: string) =>
      channelWith(id).channel.limits.map(({ basis, value, deadband }) => [basis, value, deadband]);
    const close = (id: string, rows: readonly (readonly [string, number, number])[]) => {
      rows.forEach(([basis, value, deadband], i) => {
        const [gotBasis, gotValue, gotDeadband] = limitsOf(id)[i] ?? [];
        expect(gotBasis).toBe(basis);
        expect(Number(gotValue) / value).toBeCloseTo(1, 12);
        expect(Number(gotDeadband) / deadband).toBeCloseTo(1, 12);
      });
    };
    close('L1-mid-axial', [['stress', 140e6, 3e6]]);
    close('B1-third1-bending', [['strain', 650e-6, 15e-6]]);
    close('hook-load', [['value', 128e3, 1e3]]);
    close('B1-mid-deflection', [['value', 8e-3, 0.2e-3]]);
    close('steel', [['value', 45, 1]]);
    close('B1-mid-top-left', [['share', 0.6, 0.02]]);
    expect(channelWith('B1-mid-top-left').channel.limits[0]?.onDelay).toBe(0.2);
  });
});

describe('limits of a channel', () => {
  const caution = { level: 'caution', basis: 'stress_MPa', value: 90, deadband: 2, on_delay_s: 0 };

  test('are the default ones of a strain channel that has none of its own', () => {
    expect(channelWith('B1-end-web-0').channel.limits.length).toBe(2);
    expect(channelWith('B2-end-web-shear').channel.limits.length).toBe(2);
    expect(channelWith('air').channel.limits).toEqual([]);
    expect(channelWith('air', { [`${placeOf('air')}/limits`]: undefined }).channel.limits).toEqual(
      [],
    );
  });

  test('are its own in place of the default ones, or none at all', () => {
    const own = { [`${TIP}/limits`]: [caution] };
    expect(channelWith('B1-mid-top-left', own).channel.limits.length).toBe(1);
    const none = { [`${TIP}/limits`]: [] };
    expect(channelWith('B1-mid-top-left', none).channel.limits).toEqual([]);
  });

  test('are judged in shear by yield over √3', () => {
    // S275, t = 19 mm: 265/√3 = 153.0 MPa (EN 1993-1-1 §6.2.6); the site allows 80 % of it.
    const at = `${placeOf('B2-end-web-shear')}/limits`;
    expect(readSite(demoWith({ [at]: [{ ...caution, value: 122 }] })).ok).toBe(true);
    const read = readSite(demoWith({ [at]: [{ ...caution, value: 123 }] }));
    expect(read.ok ? [] : read.faults).toEqual([
      {
        path: `${at}/0/value`,
        expected: 'at most 80 % of yield, the highest the site allows',
        came: '123 as stress_MPa, 80.3933 % of yield',
      },
    ]);
  });
});

describe('a member', () => {
  test('takes the thickness that is stated in place of the flange', () => {
    const changes = { [`${B1}/thickness_mm`]: 11 };
    expect(channelWith('B1-mid-top-left', changes).member.material.yieldStrength).toBe(275e6);
  });

  test('takes a material and a section of its own', () => {
    const { member } = channelWith('B1-mid-top-left', {
      [`${B1}/material`]: {
        name: 'Found by coupon test',
        source: 'Laboratory report',
        youngs_modulus_GPa: 205,
        poisson: 0.29,
        expansion_microstrain_per_K: 11.5,
        yield_MPa: 301,
      },
      [`${B1}/section`]: {
        name: 'Riveted girder',
        source: 'Survey',
        height_mm: 600,
        width_mm: 250,
        thickness_mm: 20,
        area_cm2: 180,
        inertia_y_cm4: 98000,
        inertia_z_cm4: 5200,
        modulus_y_cm3: 3266,
        modulus_z_cm3: 416,
      },
    });
    expect(member.material).toMatchObject({ designation: 'Found by coupon test', poisson: 0.29 });
    expect(member.material.youngsModulus).toBeCloseTo(205e9, 0);
    expect(member.material.expansion).toBeCloseTo(11.5e-6, 12);
    expect(member.material.yieldStrength).toBe(301e6);
    expect(member.section.height).toBeCloseTo(0.6, 12);
    expect(member.section.area).toBeCloseTo(0.018, 12);
    expect(member.section.inertiaY).toBeCloseTo(98e-5, 12);
    expect(member.section.modulusY).toBeCloseTo(3.266e-3, 12);
    expect(member.section.thickness).toBeCloseTo(0.02, 12);
  });

  test('may have a station at its very end, whatever the rounding of its length', () => {
    const leaning = { [`${placeOf('T1')}/to_m`]: [0.1, 4, 4.7] };
    const length = Math.hypot(0.1, 4, 0.2);
    const site = siteWith({ ...leaning, [`${placeOf('T1-mid')}/at_m`]: Number(length.toFixed(6)) });
    expect(site.structures[0]?.members.length).toBe(7);
  });
});
