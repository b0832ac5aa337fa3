import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { BridgeResponse } from '../../shared/model/calibration.ts';
import { apply } from '../../shared/model/fractional-linear.ts';
import { ohm, ratio } from '../../shared/model/units.ts';
import { bridgeOutput, bridgeStrain } from '../../shared/pipeline/3-strain/bridge.ts';
import { quadraticAt } from '../../shared/uncertainty/quadratic.ts';
import { strainSensitivity, type StrainInput } from '../../shared/uncertainty/sensitivity.ts';
import { anyBridge, anyStrain, bridge } from './wiring.ts';

const strainOf = (response: BridgeResponse, r: number) => apply(bridgeStrain(response), r);

/** The strain that the real conversion gives of the output r when an input is off by `h`. */
const OFF: Partial<
  Record<StrainInput, (response: BridgeResponse, r: number, h: number) => number>
> = {
  gaugeFactor: (response, r, h) =>
    strainOf({ ...response, gaugeFactor: response.gaugeFactor * (1 + h) }, r),
  inputGain: (response, r, h) =>
    strainOf({ ...response, zero: ratio(response.zero * (1 + h)) }, r * (1 + h)),
  excitation: (response, r, h) =>
    strainOf({ ...response, zero: ratio(response.zero / (1 + h)) }, r / (1 + h)),
  leadResistance: (response, r, h) =>
    strainOf(
      response.leads.kind === 'none'
        ? response
        : {
            ...response,
            leads: { ...response.leads, resistance: ohm(response.leads.resistance + h) },
          },
      r,
    ),
  poisson: (response, r, h) => strainOf({ ...response, poisson: response.poisson + h }, r),
  zeroSignal: (response, r, h) => strainOf({ ...response, zero: ratio(response.zero + h) }, r),
  noiseSignal: (response, r, h) => strainOf(response, r + h),
  resolutionSignal: (response, r, h) => strainOf(response, r + h),
};

describe('every sensitivity against central differences of the real conversion', () => {
  const inputs = Object.entries(OFF) as [StrainInput, NonNullable<(typeof OFF)[StrainInput]>][];
  test.each(inputs)('%s, any circuit, leads and unbalance', (input, off) => {
    fc.assert(
      fc.property(anyBridge, anyStrain, (response, strain) => {
        const r = apply(bridgeOutput(response), strain);
        const h = 1e-5;
        // Two steps, extrapolated: the error falls with h⁴.
        const slope = (step: number) =>
          (off(response, r, step) - off(response, r, -step)) / (2 * step);
        const difference = (4 * slope(h / 2) - slope(h)) / 3;
        const exact = quadraticAt(strainSensitivity(response, input), strain);
        expect(Math.abs(exact - difference)).toBeLessThan(1e-9 + 1e-7 * Math.abs(exact));
      }),
      { numRuns: 300 },
    );
  });
});

describe('figures of the quarter bridge, ε = 4r/(GF·(1−2r)) (Dally & Riley; computed)', () => {
  const strain = 0.01;
  const r = (2 * strain) / (4 + 4 * strain);
  const at = (input: StrainInput, response = bridge('quarter')) =>
    quadraticAt(strainSensitivity(response, input), strain);

  test('relative to the strain: −1 of the factor, 1/(1−2r) of the output, −1/(1−2r) of the excitation', () => {
    expect(at('gaugeFactor') / strain).toBeCloseTo(-1, 14);
    expect(at('inputGain') / strain).toBeCloseTo(1 / (1 - 2 * r), 14);
    expect(at('excitation') / strain).toBeCloseTo(-1 / (1 - 2 * r), 14);
  });

  test('of the output in V/V: 4/(GF·(1−2r)²); of the zero as much, at the zero', () => {
    expect(at('noiseSignal')).toBeCloseTo(2 / (1 - 2 * r) ** 2, 12);
    // With the balanced zero's own effect on the bridge's sensitivity.
    expect(at('zeroSignal')).toBeCloseTo(-2 - strain * 4, 12);
  });

  test('of a lead with three wires: ε/(Rg + RL) per Ω', () => {
    const response = bridge('quarter', { leads: { kind: 'three-wire', resistance: ohm(2) } });
    expect(at('leadResistance', response)).toBeCloseTo(strain / 122, 14);
    expect(at('leadResistance')).toBe(0);
  });

  test('of Poisson’s ratio, full bridge in bending with Poisson pairs: −ε/(1+ν)', () => {
    expect(at('poisson', bridge('full-bending-poisson'))).toBeCloseTo(-strain / 1.3, 14);
    expect(at('poisson')).toBeCloseTo(0, 16);
  });
});
