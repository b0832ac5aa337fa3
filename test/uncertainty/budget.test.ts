import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  gigapascalToPascal,
  ohm,
  pascalToMegapascal,
  pascal,
  strain,
} from '../../shared/model/units.ts';
import {
  budgetAt,
  stressTerms,
  strainTerms,
  type Tolerances,
} from '../../shared/uncertainty/budget.ts';
import { inSteps, type Knowledge } from '../../shared/uncertainty/knowledge.ts';
import { liveUncertainty } from '../../shared/uncertainty/live.ts';
import { anyBridge, anyStrain, bridge, even } from './wiring.ts';

const within = (halfWidth: number): Knowledge => ({ kind: 'rectangular', halfWidth });

// A linear circuit, whose gain and leads change the strain by exactly their own share.
const gauge = bridge('half-bending', { leads: { kind: 'three-wire', resistance: ohm(1) } });
const stated: Tolerances = {
  gaugeFactor: within(0.01),
  inputGain: within(0.001),
  excitation: within(0.0005),
  leadResistance: within(0.002 * 121),
  misalignment: within(0.003),
  resolution: inSteps(1e-6),
  noise: { kind: 'normal', expanded: 0.5e-6, k: 1 },
  thermalOutput: within(5e-6),
  zero: within(2e-6),
};

describe('worked budget (JCGM 100:2008 5.1.2; computed from rectangular half-widths)', () => {
  const terms = strainTerms(gauge, stated);
  test.each([
    [100, 3.22193, 6.44386],
    [500, 4.418239, 8.836477],
    [1000, 6.934215, 13.868429],
  ])('%d µε: u_c %d, 2·u_c %d µε', (microstrain, combined, doubled) => {
    const budget = budgetAt(terms, strain(microstrain * 1e-6), 0.9545);
    expect(budget.combined * 1e6).toBeCloseTo(combined, 6);
    expect(2 * budget.combined * 1e6).toBeCloseTo(doubled, 6);
    expect(budget.effectiveDegrees).toBe(Infinity);
    expect(budget.k).toBeCloseTo(2, 4);
    expect(budget.expanded * 1e6).toBeCloseTo(doubled, 4);
  });

  test('u² = c0 + c1·ε + c2·ε², with √c0 = √10 µε and √c2 = 0.617116953 %', () => {
    const { variance } = liveUncertainty(terms, 0.95);
    expect(variance).toHaveLength(3);
    expect(Math.sqrt(variance[0] ?? NaN) * 1e6).toBeCloseTo(Math.sqrt(10), 8);
    expect(variance[1]).toBe(0);
    expect(Math.sqrt(variance[2] ?? NaN) * 100).toBeCloseTo(0.617116953, 9);
  });

  test('stress with E within 2 %, 210 GPa, 1000 µε: u 1.346910 %, 2·u 5.657022 MPa', () => {
    const perStrain = gigapascalToPascal(210);
    const budget = budgetAt(stressTerms(terms, perStrain, within(0.02)), strain(1000e-6), 0.95);
    expect((budget.combined / 210e6) * 100).toBeCloseTo(1.34691, 6);
    expect(pascalToMegapascal(pascal(2 * budget.combined))).toBeCloseTo(5.657022, 6);
    expect(budget.lines.at(-1)?.name).toBe('Young’s modulus');
    // Without a statement about E the stress is as uncertain as the strain, in proportion.
    const sure = budgetAt(stressTerms(terms, perStrain, null), strain(1000e-6), 0.95);
    expect(sure.combined / 210e9).toBeCloseTo(6.934215e-6, 11);
  });

  test('each line: name, figure of its input, share of the variance; shares come to 1', () => {
    const { lines } = budgetAt(terms, strain(1000e-6), 0.95);
    expect(lines.map(({ name }) => name)).toEqual([
      'gauge factor',
      'input gain',
      'excitation',
      'lead resistance',
      'misalignment',
      'thermal output',
      'zero',
      'noise',
      'resolution',
    ]);
    const factor = lines[0];
    expect(factor?.standard).toBeCloseTo(0.01 / Math.sqrt(3), 14);
    expect(factor?.sensitivity).toBeCloseTo(-1e-3, 14);
    expect((factor?.contribution ?? NaN) * 1e6).toBeCloseTo(10 / Math.sqrt(3), 8);
    // (10/√3)² of 6.934215².
    expect(factor?.share).toBeCloseTo(0.693239, 5);
    expect(lines.reduce((sum, { share }) => sum + share, 0)).toBeCloseTo(1, 12);
  });
});

test('noise known from five readings only: k grows where noise leads, GUM G.4.1', () => {
  const terms = strainTerms(gauge, {
    gaugeFactor: within(0.01),
    noise: { kind: 'readings', deviation: 3e-6, readings: 5, averaged: 1 },
  });
  const calm = budgetAt(terms, strain(0), 0.95);
  expect(calm.countedDegrees).toBe(4);
  expect(calm.k).toBeCloseTo(2.7764, 4);
  const loaded = budgetAt(terms, strain(2000e-6), 0.95);
  expect(loaded.effectiveDegrees).toBeGreaterThan(800);
  expect(loaded.k).toBeLessThan(1.964);
  // u 3 and 4 µε with 4 and ∞ degrees of freedom: 30.864198, counted as 30, k95 2.0423 (computed).
  const even = budgetAt(terms, strain(4e-6 * Math.sqrt(3) * 100), 0.95);
  expect(even.effectiveDegrees).toBeCloseTo(30.864198, 5);
  expect(even.countedDegrees).toBe(30);
  expect(even.expanded * 1e6).toBeCloseTo(5 * 2.0423, 3);
});

test('nothing stated: no uncertainty is claimed', () => {
  const budget = budgetAt(strainTerms(gauge, {}), strain(1e-3), 0.95);
  expect([budget.combined, budget.expanded, budget.lines]).toEqual([0, 0, []]);
  const live = liveUncertainty([], 0.95);
  expect([live.standard(1e-3), live.expanded(1e-3)]).toEqual([0, 0]);
});

describe('the live form is the budget', () => {
  const readings = fc.record({
    kind: fc.constant('readings' as const),
    deviation: even(1e-8, 1e-5),
    readings: fc.integer({ min: 2, max: 200 }),
    averaged: fc.integer({ min: 1, max: 10 }),
  });
  const share = even(1e-4, 0.05).map(within);
  const small = even(1e-7, 2e-5).map(within);
  const tolerances: fc.Arbitrary<Tolerances> = fc.record(
    {
      gaugeFactor: share.map((known) => ({ ...known, doubt: 0.3 })),
      inputGain: share,
      excitation: share,
      leadResistance: share,
      poisson: share,
      misalignment: share,
      thermalOutput: small,
      zeroSignal: readings,
      noiseSignal: readings,
      noise: readings,
      resolutionSignal: small,
    },
    { requiredKeys: ['noise', 'gaugeFactor'] },
  );

  test('for any circuit, statements and strain, to 1e-9', () => {
    fc.assert(
      fc.property(anyBridge, tolerances, anyStrain, (response, known, at) => {
        const terms = stressTerms(
          strainTerms(response, known),
          gigapascalToPascal(210),
          within(0.03),
        );
        const budget = budgetAt(terms, strain(at), 0.95);
        const live = liveUncertainty(terms, 0.95);
        expect(live.standard(at) / budget.combined).toBeCloseTo(1, 9);
        expect(live.expanded(at) / budget.expanded).toBeCloseTo(1, 2);
        if (Math.abs(budget.effectiveDegrees - Math.round(budget.effectiveDegrees)) > 1e-6) {
          expect(live.expanded(at) / budget.expanded).toBeCloseTo(1, 9);
        }
        expect(live.variance.length).toBeLessThanOrEqual(5);
        expect(live.doubt.length).toBeLessThanOrEqual(9);
      }),
    );
  });

  test('stating more never makes the result surer', () => {
    fc.assert(
      fc.property(anyBridge, tolerances, anyStrain, (response, known, at) => {
        const { noise, ...rest } = known;
        const [less, more] = [rest, { ...rest, noise }].map(
          (each) => budgetAt(strainTerms(response, each), strain(at), 0.95).combined,
        );
        expect(more).toBeGreaterThanOrEqual(less ?? NaN);
      }),
    );
  });
});
