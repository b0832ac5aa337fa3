import { expect, test } from 'vitest';
import type { CheckLine, CheckRequest, ShuntRequest } from '../../../shared/protocol/checks.ts';
import { checkScene } from './check-scene.ts';
import { NOW } from './set-up-scene.ts';

const TIP = 'B1-mid-bottom-left';
const OVER = 'B2-mid-bottom-left';
const HOOK = 'hook-load';
const SIGNED = { author: 'Technician', note: '' };
const REQUEST: CheckRequest = { channels: [TIP], seconds: 20, limits: {}, ...SIGNED };
const still = (value: number) => () => value;
const verdictsOf = (line: CheckLine | undefined) =>
  line?.kind === 'result'
    ? line.channels.map(({ channel, verdict }) => [channel, verdict])
    : [line?.kind];

test('a quiet channel passes, over measured excitation too; one that is silent fails', async () => {
  const { checks, feed, lines, stands } = await checkScene();
  await feed(NOW - 30, NOW, { channel: TIP, at: still(2e-6) }, { channel: OVER, at: still(0) });
  const request = { ...REQUEST, channels: [TIP, OVER, 'B1-third1-bending'] };
  const all = await lines(checks.run(request));
  expect(all.map(({ kind }) => kind)).toEqual(['progress', 'progress', 'progress', 'result']);
  expect(all[0]).toMatchObject({ done: 1, of: 3, channel: { channel: TIP } });
  expect(verdictsOf(all.at(-1))).toEqual([
    [TIP, 'pass'],
    [OVER, 'pass'],
    ['B1-third1-bending', 'fail'],
  ]);
  const noise = await stands(TIP, 'noise');
  expect((noise?.check.figure ?? NaN) * 1e6).toBeCloseTo(0.5, 1);
  expect(noise?.record).toMatchObject({
    ...{ author: 'Technician', revision: 1, at: NOW },
    given: { kind: 'samples', to: NOW },
  });
  const alive = await stands(TIP, 'alive');
  expect(alive?.check).toMatchObject({ verdict: 'pass', figure: 1 });
  expect((await stands('B1-third1-bending', 'alive'))?.check.figure).toBe(0);
});

test('all are checked if none is named, and the results stand after a restart', async () => {
  const { checks, current, lines, records } = await checkScene();
  const all = await lines(checks.run({ ...REQUEST, channels: null }));
  expect(all).toHaveLength(current.measured.length + 1);
  const kept = await records.lastCheckRecords();
  expect(new Set(kept.map(({ channel }) => channel)).size).toBe(current.measured.length);
});

test('a gap in the frames counts against the channel, the last frame still on its way does not', async () => {
  const { checks, feed, lines, stands } = await checkScene();
  await feed(NOW - 30, NOW - 15, { channel: TIP, at: still(0) });
  await feed(NOW - 10, NOW - 0.4, { channel: TIP, at: still(0) });
  await lines(checks.run(REQUEST));
  // 19.6 s due, 5 s of them missing.
  const { check } = (await stands(TIP, 'alive')) ?? {};
  expect(check?.figure).toBeCloseTo(14.6 / 19.6, 2);
  expect(check?.verdict).toBe('fail');
});

test('a stated window judges in place of the usual one, and is on record', async () => {
  const { checks, feed, lines, stands } = await checkScene();
  await feed(NOW - 30, NOW, { channel: TIP, at: still(0) });
  await lines(checks.run(REQUEST));
  // 0.12 mV/V, the zero of its record, is within the usual 2 mV/V.
  expect((await stands(TIP, 'offset'))?.check.verdict).toBe('pass');
  const limits = { offset: { good: 1e-5, bad: 1e-4 } };
  await lines(checks.run({ ...REQUEST, limits }));
  const { check } = (await stands(TIP, 'offset')) ?? {};
  expect(check).toMatchObject({ verdict: 'fail', limits: limits.offset });
  expect((check?.figure ?? NaN) * 1e3).toBeCloseTo(0.12, 2);
});

test('what people found stands over a later check of samples alone', async () => {
  const { checks, feed, lines, stands } = await checkScene();
  await feed(NOW - 30, NOW, { channel: TIP, at: still(0) });
  const entered = { kind: 'insulation', resistance: 2e9 } as const;
  const value = await checks.enter({ channel: TIP, entered, ...SIGNED });
  expect(value.ok).toBe(true);
  // 350 Ω, GF 2.11: −Rg/(GF·(Rg + Ri)) of 2 GΩ, parallel resistors; computed.
  const { check } = (await stands(TIP, 'insulation')) ?? {};
  expect((check?.also[0]?.value ?? NaN) * 1e6).toBeCloseTo(-0.0829384, 6);
  await lines(checks.run(REQUEST));
  expect((await stands(TIP, 'insulation'))?.check).toMatchObject({ verdict: 'pass', figure: 2e9 });
});

test('self-heating wants excitation and grid, from the record or entered', async () => {
  const { checks, stands } = await checkScene();
  const bare = { kind: 'self-heating', excitation: null, grid: null } as const;
  const missing = await checks.enter({ channel: TIP, entered: bare, ...SIGNED });
  expect(missing).toMatchObject({ ok: false, faults: [{ path: '/entered/excitation' }] });
  const grid = { area: 6e-6, on: 'thick-steel' } as const;
  const entered = { kind: 'self-heating', excitation: 5, grid } as const;
  await checks.enter({ channel: TIP, entered, ...SIGNED });
  // P = (U/2)²/Rg = 17.857 mW over 6 mm²: 2.976 kW/m², Ohm's law; computed.
  const { check } = (await stands(TIP, 'self-heating')) ?? {};
  expect(check?.figure).toBeCloseTo(2976.19, 1);
});

test('a push to the expected side passes, to the other fails, none is doubtful', async () => {
  const { checks, clock, feed, lines } = await checkScene();
  const pushed = async (size: number) => {
    const from = clock.now();
    const request = { channel: TIP, seconds: 10, expected: 'up', ...SIGNED } as const;
    const at = (t: number) => (t > from + 4 && t < from + 6 ? size : 0);
    await feed(from, from + 10, { channel: TIP, at });
    return lines(checks.push(request));
  };
  const all = await pushed(30e-6);
  expect(all.map((line) => (line.kind === 'phase' ? line.phase : line.kind))).toEqual([
    ...['rest', 'push', 'arriving', 'result'],
  ]);
  const last = (found: CheckLine[]) => {
    const line = found.at(-1);
    if (line?.kind !== 'result') throw new Error(JSON.stringify(line));
    return line.channels[0]?.checks.find(({ check }) => check.kind === 'sign');
  };
  expect(last(all)?.check.verdict).toBe('pass');
  expect((last(all)?.check.figure ?? NaN) * 1e6).toBeCloseTo(30, 0);
  expect(last(await pushed(-30e-6))?.check.verdict).toBe('fail');
  expect(last(await pushed(0))?.check.verdict).toBe('doubtful');
});

const SHUNT: ShuntRequest = {
  ...{ channel: TIP, how: 'commanded', place: 'gauge', arm: 1, resistance: 350e3 },
  ...{ seconds: 5, read: null, ...SIGNED },
};
/** −Rg/(GF·(Rg + Rs)) of 350 Ω, GF 2.11 and 350 kΩ: parallel resistors, computed. */
const SHOWN = -473.46e-6;

test('a shunt on command is laid, read, taken off and read again', async () => {
  const { checks, clock, feed, lines, told } = await checkScene();
  const begin = clock.now();
  const on = (t: number) => (t >= begin && t < begin + 6 ? SHOWN : 0);
  await feed(begin - 10, begin + 20, { channel: TIP, at: on });
  const all = await lines(checks.shunt(SHUNT));
  expect(told.map(({ node, input, on: laid }) => [node, input, laid])).toEqual([
    ['n1', 's7', true],
    ['n1', 's7', false],
  ]);
  expect(told[0]?.seconds).toBeGreaterThan(5);
  const last = all.at(-1);
  if (last?.kind !== 'result') throw new Error(JSON.stringify(last));
  const shunt = last.channels[0]?.checks.find(({ check }) => check.kind === 'shunt');
  expect(shunt?.check.verdict).toBe('pass');
  expect(shunt?.record?.given).toMatchObject({
    kind: 'shunt',
    how: 'commanded',
    resistance: 350e3,
  });
});

test('a node that does not answer is said so, and the way by hand is offered', async () => {
  const why = 'n1 did not acknowledge the command within 5 s.';
  const { checks, lines, stands } = await checkScene(() => ({ ok: false, answered: false, why }));
  const all = await lines(checks.shunt(SHUNT));
  expect(all).toEqual([{ kind: 'stopped', why, byHand: true }]);
  expect((await stands(TIP, 'shunt'))?.record).toBeNull();
});

test('a shunt by hand is judged by the two stretches that a person read', async () => {
  const { checks, feed, lines, told } = await checkScene();
  const at = (t: number) => (t > NOW - 10 ? SHOWN : 0);
  await feed(NOW - 30, NOW, { channel: TIP, at });
  const read = {
    before: { from: NOW - 25, to: NOW - 20 },
    during: { from: NOW - 8, to: NOW - 3 },
  };
  const all = await lines(checks.shunt({ ...SHUNT, how: 'manual', read }));
  expect(verdictsOf(all.at(-1))).toEqual([[TIP, 'pass']]);
  expect(told).toEqual([]);
});

test.each([
  [{ channels: ['nobody'] }, '/channels/0'],
  [{ channels: ['B1-mid-moment'] }, '/channels/0'],
  [{ author: ' ' }, '/author'],
  [{ note: 'x'.repeat(501) }, '/note'],
])('%j is refused at %s', async (change, path) => {
  const { checks } = await checkScene();
  expect(checks.run({ ...REQUEST, ...change })).toMatchObject({ ok: false, faults: [{ path }] });
});

test('what a step cannot be made on is refused', async () => {
  const { checks } = await checkScene();
  expect(checks.shunt({ ...SHUNT, channel: HOOK })).toMatchObject({ ok: false });
  const push = { channel: 'steel', seconds: 10, expected: 'up', ...SIGNED } as const;
  expect(checks.push(push)).toMatchObject({ ok: false, faults: [{ path: '/channel' }] });
  const dummy = { ...SHUNT, channel: 'B1-third1-bending', place: 'internal-dummy' } as const;
  expect(checks.shunt(dummy)).toMatchObject({ ok: false, faults: [{ path: '/place' }] });
});
