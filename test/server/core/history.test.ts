import { describe, expect, test } from 'vitest';
import { channelEnvelope } from '../../../server/core/history.ts';
import { compileExpression } from '../../../server/site/expression.ts';
import type { Signal } from '../../../shared/model/calibration.ts';
import type { RawArray } from '../../../shared/model/frame.ts';
import { epochSeconds, seconds, volt } from '../../../shared/model/units.ts';
import { planSite } from '../../../shared/pipeline/index.ts';
import { START } from '../../helpers/core.ts';
import { memorySamples } from '../../helpers/memory-samples.ts';
import { quarter, RATIO, record, siteWith, type Given } from '../one-channel.ts';

/** One sample a second from START on, looked back on as the site's records say. */
const lookBack = async (
  given: Given,
  inputs: Readonly<Record<string, RawArray>>,
  { from = 0, to = 10, points = 10, step = 1 } = {},
) => {
  const store = memorySamples();
  const frame = {
    ...{ node: 'n1', boot: 'b', seq: 0, sequenced: true },
    ...{ t0: epochSeconds(START), dt: seconds(step) },
    inputs: Object.entries(inputs).map(([input, samples]) => ({ input, samples })),
  };
  await store.commit([{ frame, arrived: epochSeconds(START) }]);
  const { measured } = planSite(siteWith(given), compileExpression);
  const [plan] = measured;
  if (!plan) throw new Error('no channel');
  const past = { store, planOf: () => undefined };
  const window = [epochSeconds(START + from), epochSeconds(START + to)] as const;
  const { t, ...columns } = await channelEnvelope(past, plan, ...window, points);
  return { ...columns, t: t.map((at) => at - START) };
};

const constant = (figure: number, length = 10) => new Float64Array(length).fill(figure);

/** Quarter bridge, exactly: ε = 4r/(GF·(1 − 2r)) (Dally & Riley, Experimental Stress Analysis). */
const strainOf = (r: number, gaugeFactor: number) => (4 * r) / (gaugeFactor * (1 - 2 * r));

const expectAll = (column: readonly (number | null)[], expected: readonly number[]) => {
  expect(column).toHaveLength(expected.length);
  expected.forEach((value, i) => expect((column[i] ?? NaN) / value).toBeCloseTo(1, 12));
};

describe('the records in force at the time', () => {
  const R = 5e-4;
  const [before, after] = [strainOf(R, 2), strainOf(R, 2.1)];
  const first = record('c1', START, quarter(2));

  test('a second one governs from its own time on, and a point that it cuts is two', async () => {
    const calibration = [first, record('c2', START + 4.5, quarter(2.1))];
    const { t, mean } = await lookBack({ calibration }, { a: constant(R, 20) }, { step: 0.5 });
    expect(t).toEqual([0, 1, 2, 3, 4, 4.5, 5, 6, 7, 8, 9]);
    expectAll(mean, [...new Array<number>(5).fill(before), ...new Array<number>(6).fill(after)]);
  });

  test('one that corrects another takes its place over all of its time', async () => {
    const correction = record('c2', START, quarter(2.1), RATIO, 'c1');
    const { mean } = await lookBack({ calibration: [first, correction] }, { a: constant(R) });
    expectAll(mean, new Array<number>(10).fill(after));
  });

  test('a zero that was read comes off from its time on', async () => {
    const zero = {
      ...{ id: 'z1', validFrom: epochSeconds(START + 6), author: 'A', reason: 'R' },
      ...{ recordedAt: null, corrects: null, raw: R, noise: 1e-7, samples: 20, temperature: null },
      state: { kind: 'unloaded' },
    } as const;
    const given = { calibration: [first], zeros: [zero] };
    const { mean } = await lookBack(given, { a: constant(R) });
    expectAll(mean.slice(0, 6), new Array<number>(6).fill(before));
    for (const value of mean.slice(6)) expect(value).toBeCloseTo(0, 15);
  });

  test('what lies before the first is left out, not guessed', async () => {
    const calibration = [record('c1', START + 7, quarter(2))];
    const { t } = await lookBack({ calibration }, { a: constant(R) });
    expect(t).toEqual([7, 8, 9]);
    const none = await lookBack({ calibration }, { a: constant(R) }, { to: 5 });
    expect(none).toMatchObject({ t: [], min: [], mean: [], max: [] });
  });
});

test('minimum and maximum are those of the samples, also of a conversion that turns order', async () => {
  const volts = Float64Array.of(1, 3, 2, 5, 4, 0, 7, 6);
  const linear = { kind: 'linear', perUnit: -0.01, zero: 1 } as const;
  const calibration = [record('c1', START, linear, { kind: 'direct' })];
  const given = { calibration, measurand: 'displacement' } as const;
  const { min, mean, max, step } = await lookBack(given, { a: volts }, { to: 8, points: 2 });
  expect(step).toBe(4);
  // By hand: (V − 1 V)·(−10 mm/V).
  expectAll(min, [-0.04, -0.06]);
  expect(max[0]).toBeCloseTo(0, 15);
  expectAll(max.slice(1), [0.01]);
  expectAll(mean, [-0.0175, -0.0325]);
});

describe('a point in which an input was at its rail is a gap', () => {
  const range = [-0.02, 0.02] as const;
  const given = { calibration: [record('c1', START, quarter(2))], range };
  const gaps = async (a: RawArray) => {
    const { mean } = await lookBack(given, { a }, { to: a.length, points: a.length });
    return mean.map((value) => value === null);
  };

  // 0.02 is 0.0199999995529651642 as float32 (IEEE 754 binary32): below the bound as a double.
  test.each([
    ['float32', Float32Array.of(0.01, 0.02, -0.02, 0.0199)],
    ['float64', Float64Array.of(0.01, 0.02, -0.02, 0.0199)],
  ])('%s', async (_, samples) => {
    expect(await gaps(samples)).toEqual([false, true, true, false]);
  });

  test('a float64 a little inside is a figure, be it nearer than a float32 could tell', async () => {
    expect(await gaps(Float64Array.of(0.02 - 1e-10, 0.02, -0.02 + 1e-10))).toEqual([
      ...[false, true, false],
    ]);
  });

  test('whole counts up to the rails of 32 bits', async () => {
    const counts = { kind: 'counts', as: 'ratio', perCount: 1e-12, zeroCount: 0 } as const;
    const calibration = [record('c1', START, quarter(2), counts)];
    const rails = [-2147483648, 2147483647] as const;
    const a = Int32Array.of(-2147483648, -2147483647, 0, 2147483646, 2147483647);
    const { mean } = await lookBack({ calibration, range: rails }, { a }, { to: 5, points: 5 });
    expect(mean.map((value) => value === null)).toEqual([true, false, false, false, true]);
  });

  test('one sample at the rail among good ones makes the whole point a gap', async () => {
    const a = Float32Array.of(0.01, 0.02, 0.01, 0.01);
    const { mean, min, max } = await lookBack(given, { a }, { to: 4, points: 2 });
    for (const column of [min, mean, max]) {
      expect(column.map((value) => value === null)).toEqual([true, false]);
    }
  });
});

describe('volts over a measured excitation', () => {
  const signal: Signal = { kind: 'volts', excitation: { kind: 'measured', input: 'ex' } };
  const given = { calibration: [record('c1', START, quarter(2), signal)] };

  test('are divided sample by sample, so that a sag is no strain', async () => {
    const ex = Float64Array.of(5, 4.9, 4.5, 5);
    const a = ex.map((volts) => volts * 5e-4);
    const { min, max } = await lookBack(given, { a, ex }, { to: 4, points: 1 });
    expectAll(min, [strainOf(5e-4, 2)]);
    expectAll(max, [strainOf(5e-4, 2)]);
  });

  test('are a gap where the excitation is out of its range', async () => {
    const ex = Float64Array.of(5, 3.9, 5, 6);
    const a = ex.map((excitation) => excitation * 5e-4);
    const { mean } = await lookBack(given, { a, ex }, { to: 4, points: 4 });
    expect(mean.map((value) => value === null)).toEqual([false, true, false, true]);
  });

  test('over one that is stated, by the figure stated', async () => {
    const stated: Signal = { kind: 'volts', excitation: { kind: 'stated', volts: volt(2.5) } };
    const calibration = [record('c1', START, quarter(2), stated)];
    // 1000 µε are about 0.5 mV/V, so 1.25 mV at 2.5 V: exactly 0.4995004995 mV/V (nodal solve).
    const a = constant(0.4995004995004995e-3 * 2.5);
    const { mean } = await lookBack({ calibration }, { a });
    expectAll(mean, new Array<number>(10).fill(1e-3));
  });
});
