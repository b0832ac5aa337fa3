import { describe, expect, test } from 'vitest';
import { paced } from '../../client/state/pace.ts';
import { keepPreferences, readPreferences } from '../../client/state/preferences.ts';
import { axisRange, shownLimits } from '../../client/state/trend-picture.ts';
import { Values } from '../../client/state/values.ts';

const live = (last: number, over: Partial<Parameters<Values['accept']>[0]> = {}) => ({
  ...{ channel: 0, at: 100, last, min: last - 1, max: last + 1, quality: 'good' as const },
  ...over,
});

describe('the present of a channel', () => {
  test('begins with no reading', () => {
    const reading = new Values([3]).read(0, 50);
    expect(reading).toEqual({
      value: null,
      at: null,
      quality: 'none',
      lowest: null,
      highest: null,
    });
  });

  test('keeps the last believed figure with its time when something is wrong', () => {
    const values = new Values([3]);
    values.accept(live(5), 10);
    values.accept(live(NaN, { at: 101, quality: 'over-range', min: Infinity, max: -Infinity }), 11);
    expect(values.read(0, 11)).toMatchObject({ value: 5, at: 100, quality: 'over-range' });
  });

  test('is stale after as long without news as its node is given, and good again with news', () => {
    const values = new Values([3, 60]);
    values.accept(live(5), 10);
    values.accept(live(5, { channel: 1 }), 10);
    expect(values.read(0, 13).quality).toBe('good');
    expect(values.read(0, 13.1).quality).toBe('stale');
    expect(values.read(1, 13.1).quality).toBe('good');
    values.accept(live(6), 20);
    expect(values.read(0, 20)).toMatchObject({ value: 6, quality: 'good' });
  });

  test('remembers peaks between two looks, also of an interval that ended badly', () => {
    const values = new Values([3]);
    values.accept(live(5, { min: -40, max: 6 }), 10);
    values.accept(live(NaN, { min: 4, max: 90, quality: 'missing' }), 10);
    values.restate(0, { channel: 'a', value: 5, at: 100, quality: 'good' }, 10);
    expect(values.read(0, 10)).toMatchObject({ lowest: -40, highest: 90 });
    values.forgetExtremes();
    expect(values.read(0, 10)).toMatchObject({ lowest: null, highest: null });
  });

  test('takes in nothing for a channel that the site does not have', () => {
    const values = new Values([3]);
    values.accept(live(5, { channel: 7 }), 10);
    expect(values.read(0, 10).value).toBeNull();
  });
});

test('drawing waits for the next frame and its gap, and draws once for many calls', () => {
  let now = 0;
  const frames: (() => void)[] = [];
  const delays: number[] = [];
  const drawn: number[] = [];
  const ask = paced(
    0.05,
    (at) => drawn.push(at),
    () => now,
    (call) => frames.push(call),
    (seconds, call) => {
      delays.push(seconds);
      call();
    },
  );
  for (let i = 0; i < 100; i++) ask();
  expect(frames).toHaveLength(1);
  frames.pop()?.();
  now = 0.02;
  for (let i = 0; i < 100; i++) ask();
  expect(delays).toEqual([0.05 - 0.02]);
  expect(frames).toHaveLength(1);
  now = 0.06;
  frames.pop()?.();
  expect(drawn).toEqual([0, 0.06]);
});

describe('preferences', () => {
  const memoryOf = (text: string | null) => () => ({
    getItem: () => text,
    setItem: () => undefined,
  });
  const refusing = () => {
    throw new DOMException('no storage', 'SecurityError');
  };

  test('are read where they are known, and the defaults where not', () => {
    expect(readPreferences(memoryOf('{"units":"us","theme":"dark"}'))).toEqual({
      units: 'us',
      theme: 'dark',
    });
    for (const text of [null, 'null', '3', '{', '[]', '{"units":"old","theme":1}']) {
      expect(readPreferences(memoryOf(text))).toEqual({ units: 'si', theme: 'auto' });
    }
  });

  test('hold for as long as the page does in a browser that keeps nothing', () => {
    expect(readPreferences(refusing)).toEqual({ units: 'si', theme: 'auto' });
    expect(keepPreferences(refusing, { units: 'us', theme: 'auto' })).toBe(false);
  });
});

describe('the upright axis of a trend', () => {
  const at = (raise: number, level: 'caution' | 'stop') => ({
    level,
    raise,
    clear: raise,
    onDelay: 0,
  });
  const bounds = { caution: at(8, 'caution'), stop: at(10, 'stop') };
  const limits = shownLimits([
    { bounds, show: (value) => value },
    { bounds, show: (value) => value },
  ]);

  test('has each limit on both sides, once', () => {
    expect(limits.map(({ value }) => value).sort((a, b) => a - b)).toEqual([-10, -8, 8, 10]);
  });

  test('reaches to the limits of the side that the figures lean to', () => {
    const [low, high] = axisRange([{ min: -0.1, max: 4 }], limits, 0.1);
    expect(high).toBeGreaterThan(10);
    expect(low).toBeGreaterThan(-2);
    const both = axisRange([{ min: -3, max: 4 }], limits, 0.1);
    expect(both[0]).toBeLessThan(-10);
  });

  test('holds figures that are past the limits, and nought', () => {
    const [low, high] = axisRange([{ min: 12, max: 40 }], limits, 0.1);
    expect(low).toBeLessThan(0);
    expect(high).toBeGreaterThan(40);
  });

  test('has some height when nothing was measured', () => {
    const [low, high] = axisRange([], [], 0.1);
    expect(high).toBeGreaterThan(low);
  });
});
