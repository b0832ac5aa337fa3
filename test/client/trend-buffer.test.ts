import { describe, expect, test } from 'vitest';
import {
  buffersFor,
  columnsExtent,
  NO_BUFFERS,
  TrendBuffer,
} from '../../client/state/trend-buffer.ts';

const START = 1_800_000_000;
const PATIENCE = 1.5;

/** The newest `count` cells. */
const newest = <T>(cells: readonly T[], count: number): T[] => cells.slice(-count);

describe('a trend', () => {
  test('keeps every peak, however many figures share a stretch and in whichever order', () => {
    const buffer = new TrendBuffer(1, 10);
    buffer.add(START + 0.1, 5, 4, 6);
    buffer.add(START + 0.6, 7, -80, 8);
    buffer.add(START + 0.3, 6, 5, 900);
    const { last, min, max } = buffer.columns(START, PATIENCE);
    expect([last.at(-1), min.at(-1), max.at(-1)]).toEqual([7, -80, 900]);
  });

  test('is the same however history and live figures are merged', () => {
    const past = {
      t: [START, START + 1, START + 2],
      min: [-1, -9, 0],
      mean: [0, 1, 2],
      max: [1, 3, 50],
    };
    const liveFirst = new TrendBuffer(1, 10);
    liveFirst.add(START + 2.5, 4, 3, 7);
    liveFirst.merge(past);
    const pastFirst = new TrendBuffer(1, 10);
    pastFirst.merge(past);
    pastFirst.add(START + 2.5, 4, 3, 7);
    const columns = liveFirst.columns(START + 2.5, PATIENCE);
    expect(columns).toEqual(pastFirst.columns(START + 2.5, PATIENCE));
    expect(newest(columns.last, 3)).toEqual([0, 1, 4]);
    expect(newest(columns.min, 3)).toEqual([-1, -9, 0]);
    expect(newest(columns.max, 3)).toEqual([1, 3, 50]);
    liveFirst.merge(past);
    expect(liveFirst.columns(START + 2.5, PATIENCE)).toEqual(columns);
  });

  test('has a gap where nothing came for longer than is waited, and none where less', () => {
    const buffer = new TrendBuffer(1, 10);
    buffer.add(START, 1, 1, 1);
    buffer.add(START + 3, 2, 2, 2);
    const short = buffer.columns(START + 3, 3.5);
    expect(newest(short.last, 4)).toEqual([1, undefined, undefined, 2]);
    const long = buffer.columns(START + 3, 1.5);
    expect(newest(long.last, 4)).toEqual([1, null, null, 2]);
    expect(newest(long.min, 4)).toEqual([1, null, null, 2]);
  });

  test('has a gap where figures came that are not believed, unless some beside them are', () => {
    const buffer = new TrendBuffer(1, 10);
    buffer.add(START, 1, 1, 1);
    buffer.add(START + 1.2, NaN, Infinity, -Infinity);
    buffer.add(START + 2.1, NaN, 3, 4);
    buffer.add(START + 2.6, NaN, NaN, NaN);
    buffer.merge({ t: [START + 3], min: [null], mean: [null], max: [null] });
    const { last, max } = buffer.columns(START + 3, 60);
    expect(newest(last, 4)).toEqual([1, null, 3.5, null]);
    expect(newest(max, 4)).toEqual([1, null, 4, null]);
  });

  test('lets go what has left its width and takes nothing older in', () => {
    const buffer = new TrendBuffer(1, 4);
    for (let i = 0; i < 9; i++) buffer.add(START + i, i, i, i);
    buffer.add(START + 1, -50, -50, -50);
    expect(buffer.columns(START + 8, PATIENCE).last).toEqual([5, 6, 7, 8]);
    expect(buffer.columns(START + 10, PATIENCE).last).toEqual([7, 8, undefined, undefined]);
  });

  test('puts times beside its columns, in the middle of each stretch', () => {
    const buffer = new TrendBuffer(0.2, 3);
    const times = buffer.times(START + 0.45);
    expect(times.map((t) => Number((t - START).toFixed(6)))).toEqual([0.1, 0.3, 0.5]);
  });

  test('says in what bounds it lies', () => {
    const buffer = new TrendBuffer(1, 4);
    expect(columnsExtent(buffer.columns(START, PATIENCE))).toBeNull();
    buffer.add(START, 1, -3, 9);
    expect(columnsExtent(buffer.columns(START + 1, PATIENCE))).toEqual({
      last: 1,
      min: -3,
      max: 9,
    });
  });
});

test('buffers of channels that stay chosen are kept while the width does', () => {
  const first = buffersFor(NO_BUFFERS, [3, 5], 0.2, 600);
  const second = buffersFor(first, [5, 7], 0.2, 600);
  expect(second.get(5)).toBe(first.get(5));
  expect([...second.keys()]).toEqual([5, 7]);
  expect(buffersFor(second, [5], 1, 600).get(5)).not.toBe(first.get(5));
});
