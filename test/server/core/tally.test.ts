import { expect, test } from 'vitest';
import { Tally } from '../../../server/core/tally.ts';
import type { Frame } from '../../../shared/model/frame.ts';
import type { Site } from '../../../shared/model/site.ts';
import { epochSeconds, seconds, share } from '../../../shared/model/units.ts';

const site: Site = {
  id: 's',
  name: 'S',
  simulated: true,
  highestLimit: share(0.9),
  structures: [],
  nodes: [{ id: 'n1', name: 'Node 1', inputs: [], staleAfter: seconds(3) }],
};

const frame = (seq: number, boot = 'b1', node = 'n1'): Frame => ({
  node,
  boot,
  seq,
  sequenced: true,
  t0: epochSeconds(100 + seq),
  dt: seconds(0.1),
  inputs: [{ input: 's1', samples: new Float32Array(10) }],
});

const at = (t: number) => epochSeconds(t);
const reportOf = (tally: Tally, now = 1000, node = 'n1') =>
  tally.report(at(now)).find((entry) => entry.node === node);

test('received, stored, duplicate and missing are counted by sequence; backfill closes a gap', () => {
  const tally = new Tally(site, []);
  expect([0, 1, 4, 4, 2].map((seq) => tally.place(frame(seq), at(1)))).toEqual([
    ...['next', 'next', 'next', 'again', 'late'],
  ]);
  for (const [seq, outcome] of [
    [0, 'stored'],
    [1, 'stored'],
    [4, 'stored'],
    [4, 'duplicate'],
  ] as const) {
    tally.settled(frame(seq), outcome);
  }
  expect(reportOf(tally)).toMatchObject({ received: 5, stored: 3, duplicate: 1, missing: 1 });
  tally.place(frame(3), at(2));
  expect(reportOf(tally)).toMatchObject({ missing: 0 });
});

test('a node that starts again begins a new sequence; what then comes of the old one is late', () => {
  const tally = new Tally(site, []);
  tally.place(frame(7), at(1));
  expect(tally.place(frame(0, 'b2'), at(2))).toBe('next');
  expect(tally.place(frame(8), at(3))).toBe('late');
  expect(reportOf(tally)).toMatchObject({ boot: 'b2', missing: 0 });
});

test('after a restart of the server a frame in store is known again', () => {
  const boot = {
    ...{ node: 'n1', boot: 'b1', sequenced: true, ranges: [[0, 5]] as const },
    ...{ frames: 6, samples: 60, firstArrived: at(1), lastArrived: at(2) },
  };
  const tally = new Tally(site, [boot]);
  expect(tally.place(frame(5), at(3))).toBe('again');
  expect(tally.place(frame(6), at(3))).toBe('next');
  expect(reportOf(tally)).toMatchObject({ stored: 6, missing: 0 });
});

test('silence is noticed by the time of arrival', () => {
  const tally = new Tally(site, []);
  expect(tally.isStale('n1', at(99))).toBe(false);
  tally.place(frame(0), at(100));
  expect(tally.isStale('n1', at(103))).toBe(false);
  expect(tally.isStale('n1', at(103.1))).toBe(true);
});

test('refusals are counted by reason with the last that came; strangers cannot fill the memory', () => {
  const tally = new Tally(site, []);
  const refusal = { code: 'type', field: 't0', expected: 'a number', came: 'text' };
  tally.refused('n1', refusal, at(1));
  tally.refused('n1', { ...refusal, came: 'null' }, at(2));
  expect(reportOf(tally)?.refusals).toEqual([{ ...refusal, came: 'null', count: 2, lastAt: 2 }]);
  for (let i = 0; i < 1000; i++) tally.refused(`stranger-${i}`, refusal, at(3));
  for (let i = 0; i < 1000; i++) tally.refused('n1', { ...refusal, field: `f${i}` }, at(3));
  expect(tally.report(at(4)).length).toBeLessThanOrEqual(52);
  expect(reportOf(tally)?.refusals.length).toBeLessThanOrEqual(41);
  expect(reportOf(tally)?.refused).toBe(1002);
});
