import { describe, expect, test } from 'vitest';
import { PROGRAMME_SECONDS, programmeLoad } from '../../server/demo/programme.ts';

const everyTenth = Array.from({ length: PROGRAMME_SECONDS * 10 }, (_, i) => i / 10);

describe('load programme', () => {
  test('lasts four minutes, which divide a day', () => {
    expect(PROGRAMME_SECONDS).toBe(240);
    expect(86_400 % PROGRAMME_SECONDS).toBe(0);
  });

  test('goes to the proof load of 1.25 × 100 kN and no further', () => {
    expect(Math.max(...everyTenth.map(programmeLoad))).toBe(125e3);
    expect(Math.min(...everyTenth.map(programmeLoad))).toBe(0);
  });

  test('holds 25, 50, 75, 100 and 125 kN, the jack letting go at most 0.2 %', () => {
    for (const [since, load] of [
      [27, 25e3],
      [55, 50e3],
      [83, 75e3],
      [111, 100e3],
      [159, 125e3],
      [240 - 1, 0],
    ] as const) {
      expect(programmeLoad(since)).toBeLessThanOrEqual(load);
      expect(programmeLoad(since)).toBeGreaterThanOrEqual(load * 0.998);
    }
  });

  test('moves within the first seconds, and never jumps', () => {
    expect(programmeLoad(4)).toBeGreaterThan(10e3);
    const jumps = everyTenth.map((t) => Math.abs(programmeLoad(t + 0.1) - programmeLoad(t)));
    // The steepest ramp is 50 kN in 10 s, eased: 1.5 times its mean slope.
    expect(Math.max(...jumps)).toBeLessThanOrEqual(0.1 * 1.5 * 5e3 * 1.001);
  });

  test('begins again, and is at rest before it began', () => {
    expect(programmeLoad(100 + 7 * PROGRAMME_SECONDS)).toBeCloseTo(programmeLoad(100), 6);
    expect(programmeLoad(-1)).toBe(0);
  });
});
