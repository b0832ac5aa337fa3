import { expect, test } from 'vitest';
import { ohm } from '../../../shared/model/units.ts';
import { inputLoading } from '../../../shared/pipeline/2-ratio/input-loading.ts';

// Voltage divider, computed.
test('a full bridge of 350 Ω into 1 MΩ keeps 0.9996501225 of its output', () => {
  expect(inputLoading(ohm(350), ohm(1e6))).toBeCloseTo(0.9996501225, 10);
});
