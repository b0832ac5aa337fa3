import { expect, test } from 'vitest';
import { affine } from '../../shared/model/fractional-linear.ts';
import { convert } from '../../shared/pipeline/convert.ts';

// A broken wire drives an input to its rail (common practice, no source).
test.each([Float32Array.of(0.01, 0.02), Float64Array.of(0.01, 0.02)])(
  'a sample at the rail is over range in float32 as in float64',
  (raw) => {
    const out = new Float64Array(2);
    const stretch = convert(raw, affine(1), [-0.02, 0.02], 0, 2, out);
    expect(stretch.quality).toBe('over-range');
    expect(stretch.max).toBeCloseTo(0.01, 8);
    expect(out[1]).toBeNaN();
  },
);
