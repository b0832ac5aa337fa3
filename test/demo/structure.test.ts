import { beforeAll, describe, expect, test } from 'vitest';
import { influenceOf } from '../../server/demo/influence.ts';
import { channelsOf, measuredOf, type Site } from '../../shared/model/site.ts';
import { stressPerStrain, yieldFor } from '../../shared/pipeline/4-stress/stress.ts';
import { demoSite } from './site.ts';

let site: Site;
beforeAll(async () => {
  site = await demoSite();
});

const PROOF = 125e3;

/** What a channel shows, in its SI unit, with so much in the hook. */
const at = (id: string, hook = PROOF): number => {
  const entry = channelsOf(site).find(({ channel }) => channel.id === id);
  const influence = entry && influenceOf(entry.channel, entry.member, entry.station);
  if (!influence) throw new Error(`${id} has no place on the lift`);
  return influence.perNewton * hook;
};

const shareOfYield = (id: string, hook = PROOF): number => {
  const entry = channelsOf(site).find(({ channel }) => channel.id === id);
  if (!entry) throw new Error(id);
  const { measurand } = entry.channel;
  const perStrain = stressPerStrain(measurand, entry.member.material);
  const strength = yieldFor(measurand, entry.member.material);
  if (perStrain === null || strength === null) throw new Error(`${id} has no yield`);
  return (Math.abs(at(id, hook)) * perStrain) / strength;
};

/**
 * HE 300 B: Wel,y 1677.712 cm³, Iy 25165.68 cm⁴, Wpl,y 1868.67 cm³; HE 200 B: A 78.081 cm²,
 * Wel,y 569.618 cm³ (EN 10365 tables). E 210 GPa (EN 1993-1-1 §3.2.6).
 */
const E = 210e9;
/** Each of the two wheels of the trolley on B1, N, and its distance from the support, m. */
const [WHEEL, ARM, SPAN] = [(0.72 * PROOF) / 2, 2.8, 6];

describe('the lift under its proof load, by handbook formulas (Gere: beam with two equal loads)', () => {
  test('midspan moment P·a: the mean of the tips of each flange', () => {
    const expected = (WHEEL * ARM) / 1677.712e-6 / E;
    const mean = (face: string) => (at(`B1-mid-${face}-left`) + at(`B1-mid-${face}-right`)) / 2;
    expect(mean('bottom') / expected).toBeCloseTo(1, 5);
    expect(mean('top') / expected).toBeCloseTo(-1, 5);
  });

  test('tips of a section obey plane sections: the pattern +, −, −, + of the four vanishes', () => {
    for (const beam of ['B1', 'B2']) {
      const [a, b, c, d] = ['top-left', 'top-right', 'bottom-left', 'bottom-right'].map((tip) =>
        at(`${beam}-mid-${tip}`),
      );
      expect(((a ?? NaN) - (b ?? NaN) - (c ?? NaN) + (d ?? NaN)) * 1e6).toBeCloseTo(0, 9);
    }
  });

  test('slings pull the beams toward each other: tension grows on the side of the other', () => {
    expect(at('B1-mid-bottom-left')).toBeGreaterThan(at('B1-mid-bottom-right'));
    expect(at('B2-mid-bottom-right')).toBeGreaterThan(at('B2-mid-bottom-left'));
  });

  test('thirds: moment P·x before the load, the same from both sides', () => {
    const expected = (WHEEL * 2) / 1677.712e-6 / E;
    expect(at('B1-third1-bending') / expected).toBeCloseTo(1, 5);
    expect(at('B1-third2-bending') / expected).toBeCloseTo(1, 5);
  });

  test('deflection P·a(3L²−4a²)/24EI', () => {
    const sag = (WHEEL * ARM * (3 * SPAN ** 2 - 4 * ARM ** 2)) / (24 * E * 25165.68e-8);
    expect(at('B1-mid-deflection') / sag).toBeCloseTo(1, 5);
  });

  test('web: the strut toward the support is shortened by γ/2, τ = V·S/(I·t) with t 11 mm', () => {
    const stress = (WHEEL * (1868.67e-6 / 2)) / (25165.68e-8 * 0.011);
    const expected = -stress / (E / 2.6) / 2;
    expect(at('B1-end-web-45') / expected).toBeCloseTo(1, 4);
    expect(at('B1-end-web-0')).toBe(0);
    expect(at('B1-end-web-90')).toBe(0);
    expect(at('B2-end-web-shear') / at('B1-end-web-45')).toBeCloseTo(0.28 / 0.72, 9);
  });

  test('legs stand under half a beam each: σ = N/A, and all four carry the hook', () => {
    expect(at('L1-mid-axial') / (-WHEEL / 78.081e-4 / E)).toBeCloseTo(1, 4);
    const sum = ['L1', 'L2', 'L3', 'L4'].reduce((all, leg) => all + at(`${leg}-mid-axial`), 0);
    expect((sum * E * 78.081e-4) / -PROOF).toBeCloseTo(1, 4);
    expect(at('L1-mid-bending') / ((WHEEL * 0.15) / 2 / 569.618e-6 / E)).toBeCloseTo(1, 4);
  });

  test('every measured channel of the site has a place', () => {
    const without = measuredOf(site).filter((c) => !influenceOf(c.channel, c.member, c.station));
    expect(without.map(({ channel }) => channel.id)).toEqual([]);
  });
});

describe('the proof load is worth watching and hurts nothing', () => {
  test('the busiest flange tip lies between 0.35 and 0.65 of yield', () => {
    const share = shareOfYield('B1-mid-bottom-left');
    expect(share).toBeGreaterThan(0.35);
    expect(share).toBeLessThan(0.65);
  });

  test('no limit of any channel is reached, with six times the noise on top', () => {
    for (const { channel, member, station } of channelsOf(site)) {
      const influence = influenceOf(channel, member, station);
      if (!influence || channel.id === 'hook-load') continue;
      const warm = Math.abs(influence.perSteelKelvin) * 1.5;
      const most =
        Math.abs(influence.atRest + influence.perNewton * PROOF) + warm + 6 * influence.noise;
      const perStrain = stressPerStrain(channel.measurand, member.material) ?? NaN;
      const strength = yieldFor(channel.measurand, member.material) ?? NaN;
      for (const { basis, value } of channel.limits) {
        const factor = { strain: 1, stress: perStrain, share: perStrain / strength, value: 1 };
        expect(most * factor[basis], `${channel.id} ${basis}`).toBeLessThan(value);
      }
    }
  });
});
