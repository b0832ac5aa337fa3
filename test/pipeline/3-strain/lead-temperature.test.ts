import { describe, expect, test } from 'vitest';
import type { BridgeResponse } from '../../../shared/model/calibration.ts';
import { metre, ohm, ratio, squareMillimetreToSquareMetre } from '../../../shared/model/units.ts';
import {
  conductorResistance,
  leadTemperatureStrain,
} from '../../../shared/pipeline/3-strain/lead-temperature.ts';
import { PLAIN_GAUGE } from '../../helpers/plain-gauge.ts';

const response: BridgeResponse = {
  ...{ kind: 'bridge', circuit: 'quarter', gaugeFactor: 2, gaugeResistance: ohm(120) },
  ...{ poisson: 0.3, zero: ratio(0), ...PLAIN_GAUGE },
  leads: { kind: 'two-wire', resistance: ohm(1), trimmed: false },
};

// ρ = 0.017241 Ω·mm²/m, IEC 60028 (value from memory); computed.
describe('copper conductor, Ω/m', () => {
  test.each([
    [0.14, 0.12315],
    [0.22, 0.07837],
    [0.25, 0.06896],
    [0.34, 0.05071],
    [0.5, 0.03448],
  ])('%d mm²: %d', (area, expected) => {
    const one = conductorResistance(metre(1), squareMillimetreToSquareMetre(area));
    expect(one).toBeCloseTo(expected, 5);
  });
});

// 2·RL·α·ΔT/(Rg·GF), α = 0.00393 /K (value from memory); computed.
describe('two wires of 1 Ω warm by 10 K', () => {
  test.each([
    [120, 327.5],
    [350, 112.286],
  ])('%d Ω gauge: %d µε that are none', (rg, expected) => {
    const of = { ...response, gaugeResistance: ohm(rg) };
    expect(leadTemperatureStrain(of, 10) * 1e6).toBeCloseTo(expected, 3);
    const trimmed = { kind: 'two-wire', resistance: ohm(1), trimmed: true } as const;
    expect(leadTemperatureStrain({ ...of, leads: trimmed }, 10) * 1e6).toBeCloseTo(expected, 3);
  });

  test('none with three wires, nor where the adjacent gauge has such leads as well', () => {
    const three = { kind: 'three-wire', resistance: ohm(1) } as const;
    expect(leadTemperatureStrain({ ...response, leads: three }, 10)).toBe(0);
    expect(leadTemperatureStrain({ ...response, circuit: 'half-bending' }, 10)).toBe(0);
  });
});
