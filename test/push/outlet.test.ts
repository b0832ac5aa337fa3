import fc from 'fast-check';
import { expect, test } from 'vitest';
import { Outlet, type Pace, type Wire } from '../../server/push/outlet.ts';
import { DISPLAY_PACE } from '../../server/push/push.ts';
import { QUALITIES, type Quality } from '../../shared/model/block.ts';
import type { LiveValue } from '../../shared/protocol/socket.ts';
import { fakeClock } from '../helpers/fakes.ts';

interface Sent {
  readonly kind: string;
  readonly at: number;
  readonly values: readonly LiveValue[];
}

/** A wire that notes what goes out, and that can be slow: then one message stays on its way. */
const scene = (pace: Pace = DISPLAY_PACE) => {
  const clock = fakeClock();
  const sent: Sent[] = [];
  let slow = false;
  let onItsWay = false;
  const note = (kind: string, values: readonly LiveValue[] = []) => {
    sent.push({ kind, at: clock.now(), values });
    onItsWay = slow;
  };
  const wire: Wire = {
    clear: () => !onItsWay,
    live: (values) => note('live', values),
    alarms: (list) => note(`alarms ${list.recent.length}`),
    nodes: (nodes) => note(`nodes ${nodes.length}`),
    limits: (channel, limits) => note(`limits ${channel} ${limits.length}`),
    health: ({ version }) => note(`health ${version}`),
    revision: (revision) => note(`revision ${revision}`),
  };
  const outlet = new Outlet(wire, clock, pace);
  const drain = () => {
    onItsWay = false;
    outlet.drained();
  };
  return { clock, sent, outlet, drain, setSlow: (value: boolean) => (slow = value) };
};

const value = (channel: number, figure: number, quality: Quality = 'good', at = 0): LiveValue => ({
  ...{ channel, at, quality, last: figure },
  ...(quality === 'good' ? { min: figure, max: figure } : { min: Infinity, max: -Infinity }),
});

test('what comes after a pause goes at once', () => {
  const { clock, sent, outlet } = scene();
  outlet.live([value(0, 1)]);
  clock.advance(0.05);
  outlet.live([value(0, 2)]);
  expect(sent.map(({ values }) => values[0]?.last)).toEqual([1, 2]);
});

test('within the display interval values merge, and go at its end', () => {
  const { clock, sent, outlet } = scene();
  outlet.live([value(0, 1, 'good', 10)]);
  for (const [figure, at] of [
    [5, 11],
    [-7, 12],
    [2, 13],
  ] as const) {
    clock.advance(0.01);
    outlet.live([value(0, figure, 'good', at)]);
  }
  clock.advance(0.0199);
  expect(sent).toHaveLength(1);
  clock.advance(0.0001);
  expect(sent[1]?.values).toEqual([
    { channel: 0, at: 13, last: 2, min: -7, max: 5, quality: 'good' },
  ]);
  clock.advance(10);
  expect(sent).toHaveLength(2);
});

test('the worst quality of the interval stays to be seen', () => {
  const { clock, sent, outlet } = scene();
  outlet.live([value(0, 0)]);
  for (const quality of ['good', 'over-range', 'good'] as const) {
    outlet.live([value(0, 3, quality)]);
  }
  clock.advance(0.05);
  expect(sent[1]?.values).toMatchObject([{ quality: 'over-range', last: 3, min: 3, max: 3 }]);
  clock.advance(0.05);
  outlet.live([value(0, 3)]);
  expect(sent[2]?.values).toMatchObject([{ quality: 'good' }]);
});

test("one node's frames do not wait for another's", () => {
  const { clock, sent, outlet } = scene();
  outlet.live([value(0, 1)]);
  clock.advance(0.02);
  outlet.live([value(1, 2)]);
  expect(sent.map(({ values }) => values[0]?.channel)).toEqual([0, 1]);
});

test('at 2000 samples/s a channel is sent 20 times a second', () => {
  const { clock, sent, outlet } = scene();
  for (let i = 0; i < 20_000; i++) {
    outlet.live([value(0, i)]);
    clock.advance(0.0005);
  }
  // 10 s; both ends of the time count.
  expect(sent.length).toBeGreaterThanOrEqual(199);
  expect(sent.length).toBeLessThanOrEqual(201);
});

test('with a pace of one message in 50 ms, twenty go in a second, whatever comes', () => {
  const { clock, sent, outlet } = scene({
    channelGap: 0.05,
    messages: { gap: 0.05, burst: 1 },
  });
  for (let i = 0; i < 1000; i++) {
    outlet.live([value(i % 50, i)]);
    clock.advance(0.001);
  }
  expect(sent.length).toBeGreaterThanOrEqual(20);
  expect(sent.length).toBeLessThanOrEqual(21);
});

test('messages keep to their rate however many nodes send', () => {
  const { clock, sent, outlet } = scene();
  for (let i = 0; i < 5000; i++) {
    outlet.live([value(i % 500, i)]);
    clock.advance(0.001);
  }
  const { gap, burst } = DISPLAY_PACE.messages;
  expect(sent.length).toBeLessThanOrEqual(5 / gap + burst);
  expect(sent.slice(0, burst).map(({ at }) => Math.round((at - 1_800_000_000) * 1e3))).toEqual([
    0, 1, 2, 3, 4,
  ]);
});

test('a clock that is set back by an hour stops nothing', () => {
  const { clock, sent, outlet } = scene();
  outlet.live([value(0, 1)]);
  clock.advance(-3600);
  outlet.live([value(0, 2)]);
  clock.advance(0.05);
  outlet.live([value(0, 3)]);
  clock.advance(0.05);
  expect(sent.map(({ values }) => values[0]?.last)).toEqual([1, 2, 3]);
});

test('a slow browser keeps one value a channel and the newest of all else', () => {
  const { clock, sent, outlet, drain, setSlow } = scene();
  setSlow(true);
  outlet.live([value(0, 0)]);
  for (let i = 1; i <= 100; i++) {
    clock.advance(1);
    outlet.live([value(0, i), value(1, -i)]);
    outlet.nodes(Array(i));
    outlet.alarms({ active: [], recent: Array(i) });
    outlet.limits(`c${i % 2}`, Array(i));
  }
  expect(sent).toHaveLength(1);
  for (let i = 0; i < 10; i++) drain();
  expect(sent.slice(1).map(({ kind }) => kind)).toEqual([
    ...['nodes 100', 'alarms 100', 'limits c1 99', 'limits c0 100', 'live'],
  ]);
  expect(sent.at(-1)?.values).toMatchObject([
    { channel: 0, min: 1, max: 100, last: 100 },
    { channel: 1, min: -100, max: -1, last: -100 },
  ]);
});

test('after its end nothing goes out, and no timer is left', () => {
  const { clock, sent, outlet } = scene();
  outlet.live([value(0, 1)]);
  outlet.live([value(0, 2)]);
  outlet.close();
  clock.advance(1);
  outlet.live([value(0, 3)]);
  outlet.nodes([]);
  expect(sent).toHaveLength(1);
});

const channel = fc.integer({ min: 0, max: 3 });
const step = fc.oneof(
  fc.record({
    do: fc.constant('live' as const),
    channel,
    figure: fc.integer({ min: -1000, max: 1000 }),
    quality: fc.constantFrom(...QUALITIES),
  }),
  fc.record({ do: fc.constant('advance' as const), ms: fc.integer({ min: 0, max: 120 }) }),
  fc.record({ do: fc.constant('slow' as const), slow: fc.boolean() }),
  fc.record({ do: fc.constant('drain' as const) }),
);

test('whatever comes and however slow the browser: no peak, no last value and no bad quality is lost', () => {
  fc.assert(
    fc.property(fc.array(step, { maxLength: 200 }), (steps) => {
      const { clock, sent, outlet, drain, setSlow } = scene();
      const given: LiveValue[] = [];
      for (const next of steps) {
        if (next.do === 'live') {
          const one = value(next.channel, next.figure, next.quality, given.length);
          given.push(one);
          outlet.live([one]);
        } else if (next.do === 'advance') clock.advance(next.ms / 1e3);
        else if (next.do === 'slow') setSlow(next.slow);
        else drain();
      }
      setSlow(false);
      drain();
      clock.advance(1);
      const got = sent.flatMap(({ values }) => values);
      for (let c = 0; c < 4; c++) {
        const [before, after] = [given, got].map((all) => all.filter((v) => v.channel === c));
        const extremes = (all: LiveValue[] = []) => [
          Math.min(...all.map(({ min }) => min)),
          Math.max(...all.map(({ max }) => max)),
          all.at(-1)?.last,
          all.at(-1)?.at,
        ];
        expect(extremes(after)).toEqual(extremes(before));
        const worst = (all: LiveValue[] = []) =>
          Math.max(-1, ...all.map(({ quality }) => QUALITIES.indexOf(quality)));
        expect(worst(after)).toBe(worst(before));
        const times = sent.filter(({ values }) => values.some((v) => v.channel === c));
        times.slice(1).forEach(({ at }, i) => {
          expect(at - (times[i]?.at ?? 0)).toBeGreaterThan(DISPLAY_PACE.channelGap - 1e-4);
        });
      }
    }),
    { numRuns: 500 },
  );
});
