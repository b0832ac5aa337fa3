import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { ChannelBlock } from '../../../shared/model/block.ts';
import { epochSeconds, seconds } from '../../../shared/model/units.ts';
import {
  evaluate,
  UNSEEN,
  type Crossing,
  type LimitState,
} from '../../../shared/pipeline/5-alarm/evaluate.ts';
import type { Threshold } from '../../../shared/pipeline/5-alarm/threshold.ts';

/** A binary fraction, so that times are exact however blocks are cut. */
const DT = 0.125;

const blockOf = (values: readonly number[], t0 = 0, dt = DT): ChannelBlock => {
  const believed = values.filter((v) => !Number.isNaN(v));
  return {
    channel: 0,
    t0: epochSeconds(t0),
    dt: seconds(dt),
    values: Float64Array.from(values),
    min: Math.min(...believed),
    max: Math.max(...believed),
    last: values.at(-1) ?? NaN,
    quality: 'good',
  };
};

/** Cut into blocks of `size` samples, as frames would bring them. */
const run = (values: readonly number[], limit: Threshold, size: number): Crossing[] => {
  let state: LimitState = UNSEEN;
  const crossings: Crossing[] = [];
  for (let i = 0; i < values.length; i += size) {
    const result = evaluate(state, blockOf(values.slice(i, i + size), i * DT), limit);
    state = result.state;
    crossings.push(...result.crossings);
  }
  return crossings;
};

const limit = (raise: number, clear = raise, onDelay = 0): Threshold => ({
  level: 'stop',
  raise,
  clear,
  onDelay,
});

describe('IEC 62682 / ISA-18.2: alarm occurs, returns to normal, deadband, on-delay (value from memory)', () => {
  test('a single sample beyond the limit raises, the next below it returns', () => {
    const crossings = run([0, 99, 100, 99, 0], limit(100), 5);
    expect(crossings).toEqual([
      { kind: 'raised', at: 2 * DT, value: 100 },
      { kind: 'returned', at: 3 * DT, value: 99 },
    ]);
  });

  test('compression raises as tension does', () => {
    expect(run([0, -100.5, 0], limit(100), 3)[0]).toMatchObject({ kind: 'raised', value: -100.5 });
  });

  test('returns only below the setpoint less the deadband (SP − db)', () => {
    const crossings = run([101, 99, 96, 95.01, 94.99, 99], limit(100, 95), 6);
    expect(crossings.map(({ kind, value }) => [kind, value])).toEqual([
      ['raised', 101],
      ['returned', 94.99],
    ]);
  });

  test('on-delay: beyond the limit without a break for that long, across blocks', () => {
    const delayed = limit(100, 100, 0.45);
    const broken = [101, 101, 101, 99, 101, 101, 101, 99];
    expect(run(broken, delayed, 3)).toEqual([]);
    const steady = [0, 101, 101, 101, 101, 101];
    // Beyond since 0.125 s; 0.45 s have passed for the first time at the sample of 0.625 s.
    expect(run(steady, delayed, 2)).toEqual([{ kind: 'raised', at: 5 * DT, value: 101 }]);
  });

  test('a sample that is not believed neither raises, nor returns, nor breaks the on-delay', () => {
    expect(run([NaN, NaN], limit(100), 2)).toEqual([]);
    expect(run([101, NaN, NaN, 102], limit(100), 2)).toHaveLength(1);
    expect(run([101, NaN, NaN, 102], limit(100, 100, 0.25), 4)).toMatchObject([{ value: 102 }]);
  });

  test('a clock that steps back starts the on-delay again instead of never ending it', () => {
    const delayed = limit(100, 100, 0.5);
    const first = evaluate(UNSEEN, blockOf([101, 101], 1000), delayed);
    const second = evaluate(first.state, blockOf([101, 101, 101, 101, 101, 101], 10), delayed);
    expect(second.crossings).toMatchObject([{ kind: 'raised', at: 10.5 }]);
  });
});

/** The same rules, told sample by sample without blocks, extremes or short cuts. */
const plainly = (values: readonly number[], { raise, clear, onDelay }: Threshold): Crossing[] => {
  const crossings: Crossing[] = [];
  let raised = false;
  let beyondSince: number | null = null;
  values.forEach((value, i) => {
    if (Number.isNaN(value)) return;
    const at = epochSeconds(i * DT);
    if (raised && Math.abs(value) < clear) {
      raised = false;
      crossings.push({ kind: 'returned', at, value });
    } else if (!raised) {
      beyondSince = Math.abs(value) >= raise ? (beyondSince ?? at) : null;
      if (beyondSince === null || at - beyondSince < onDelay) return;
      raised = true;
      beyondSince = null;
      crossings.push({ kind: 'raised', at, value });
    }
  });
  return crossings;
};

test('however the samples are cut into blocks, the crossings are those of every single sample', () => {
  const value = fc.oneof(
    fc.integer({ min: -130, max: 130 }),
    fc.constantFrom(NaN, 100, -100, 90, 90.5),
  );
  fc.assert(
    fc.property(
      fc.array(value, { maxLength: 120 }),
      fc.integer({ min: 1, max: 40 }),
      fc.constantFrom(0, 0.125, 0.25, 0.8),
      fc.constantFrom(100, 90),
      (values, size, onDelay, clear) => {
        const threshold = limit(100, clear, onDelay);
        expect(run(values, threshold, size)).toEqual(plainly(values, threshold));
      },
    ),
    { numRuns: 500 },
  );
});
