import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { CalibrationRecord, ZeroRecord } from '../../shared/model/calibration.ts';
import { apply } from '../../shared/model/fractional-linear.ts';
import { inForce } from '../../shared/model/in-force.ts';
import { epochSeconds, ohm, ratio } from '../../shared/model/units.ts';
import { conversionAt, conversionOf } from '../../shared/pipeline/index.ts';
import { PLAIN_GAUGE } from '../helpers/plain-gauge.ts';

const head = (id: string, from: number, corrects: string | null) => ({
  ...{ id, validFrom: epochSeconds(from), author: 'Technician', reason: 'test' },
  ...{ recordedAt: null, corrects },
});

const record = (
  id: string,
  from: number,
  corrects: string | null = null,
  gaugeFactor = 2,
): CalibrationRecord => ({
  ...head(id, from, corrects),
  signal: { kind: 'counts', as: 'ratio', perCount: 1e-6, zeroCount: 0 },
  response: {
    ...{ kind: 'bridge', circuit: 'quarter', gaugeFactor, gaugeResistance: ohm(120) },
    ...{ poisson: 0.3, leads: { kind: 'none' }, zero: ratio(0), ...PLAIN_GAUGE },
  },
});

const zero = (id: string, from: number, raw = 0, corrects: string | null = null): ZeroRecord => ({
  ...head(id, from, corrects),
  ...{ raw, noise: 0.1, samples: 100, temperature: null, state: { kind: 'unloaded' } },
});

const named = (records: CalibrationRecord[], zeros: ZeroRecord[]) =>
  inForce(records, zeros).map(({ from, record: r, zero: z }) => [from, r.id, z?.id ?? null]);

test('a zero governs until the next zero or the next calibration record', () => {
  expect(
    named([record('a', 0), record('b', 100)], [zero('z1', 10), zero('z2', 20), zero('z3', 150)]),
  ).toEqual([
    [0, 'a', null],
    [10, 'a', 'z1'],
    [20, 'a', 'z2'],
    [100, 'b', null],
    [150, 'b', 'z3'],
  ]);
});

test('a correction takes the place of a record over all of its time, and leaves the zeros', () => {
  expect(named([record('a', 0), record('b', 100), record('a2', 0, 'a')], [zero('z1', 10)])).toEqual(
    [
      [0, 'a2', null],
      [10, 'a2', 'z1'],
      [100, 'b', null],
    ],
  );
});

test('a correction may begin at another time, and be corrected in its turn', () => {
  const chain = [record('a', 0), record('b', 50, 'a'), record('c', 30, 'b')];
  expect(named(chain, [])).toEqual([[30, 'c', null]]);
});

test('a back-dated record governs between its neighbours', () => {
  expect(named([record('a', 0), record('c', 100), record('b', 50)], [])).toEqual([
    [0, 'a', null],
    [50, 'b', null],
    [100, 'c', null],
  ]);
});

test('a zero from before the first record governs nothing', () => {
  expect(named([record('a', 10)], [zero('z', 5)])).toEqual([[10, 'a', null]]);
});

test('at any time one pair governs: the newest begun of what stands', () => {
  const times = fc.uniqueArray(fc.integer({ min: 0, max: 60 }), { minLength: 1, maxLength: 6 });
  fc.assert(
    fc.property(times, times, fc.integer({ min: 0, max: 70 }), (calibrated, zeroed, t) => {
      const records = calibrated.map((from) => record(`c${from}`, from));
      const zeros = zeroed.map((from) => zero(`z${from}`, from));
      const conversions = inForce(records, zeros).map(conversionOf);
      const begun = calibrated.filter((from) => from <= t);
      const found = conversions[conversionAt(conversions, t)];
      if (begun.length === 0) {
        expect(found).toBeUndefined();
        return;
      }
      const latest = Math.max(...begun);
      expect(found?.record.id).toBe(`c${latest}`);
      const since = zeroed.filter((from) => from <= t && from >= latest);
      expect(found?.zero?.id).toBe(since.length === 0 ? undefined : `z${Math.max(...since)}`);
    }),
  );
});

/** ΔR/R of a quarter bridge, exact: 4r/(1 − 2r); Dally & Riley, Experimental Stress Analysis. */
const change = (r: number) => (4 * r) / (1 - 2 * r);

test('a zero in raw figures: a corrected gauge factor or scale corrects it as well', () => {
  const z = zero('z', 0, 120);
  const [was] = inForce([record('a', 0)], [z]).map(conversionOf);
  const [is] = inForce([record('a', 0), record('b', 0, 'a', 2.1)], [z]).map(conversionOf);
  if (!was || !is) throw new Error('nothing in force');
  // R = R0·(1 + d0)·(1 + GF·ε), the unbalance d0 being in the gauge.
  const expected = (factor: number) => ((1 + change(620e-6)) / (1 + change(120e-6)) - 1) / factor;
  expect(apply(was.map, 620) / expected(2)).toBeCloseTo(1, 12);
  expect(apply(is.map, 620) / expected(2.1)).toBeCloseTo(1, 12);
  expect(apply(is.map, 620) / apply(was.map, 620)).toBeCloseTo(2 / 2.1, 12);
  expect(apply(is.map, 120)).toBeCloseTo(0, 18);
});
