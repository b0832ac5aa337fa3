import { expect, test } from 'vitest';
import type { ZerosRequest } from '../../../shared/protocol/checks.ts';
import { newton } from '../../../shared/model/units.ts';
import { checkScene, type Feed } from './check-scene.ts';
import { NOW } from './set-up-scene.ts';

const [TIP, LEG, AXIAL, HOOK] = [
  'B1-mid-bottom-left',
  'L1-mid-bending',
  'L1-mid-axial',
  'hook-load',
];
const REQUEST: ZerosRequest = {
  ...{ channels: [TIP], seconds: 20, state: { kind: 'unloaded' } },
  ...{ author: 'Engineer', reason: 'Before the first step', basedOn: 1 },
};
const still = (channel: string, value: number, noise?: number): Feed => ({
  ...{ channel, at: () => value },
  ...(noise === undefined ? {} : { noise }),
});
const UNLOADED = still(HOOK, 500, 30);

test('a zero of 12 µε is taken in raw figures: the channel reads nought from then on', async () => {
  const { checks, feed, current, setUp } = await checkScene();
  await feed(NOW - 30, NOW, still(TIP, 12e-6), UNLOADED);
  const outcome = await checks.zero(REQUEST);
  if (outcome.kind !== 'answered') throw new Error(JSON.stringify(outcome));
  const { zeroed, refused, revision, cautions } = outcome.answer;
  expect([revision, setUp.revision, refused, cautions]).toEqual([2, 2, [], []]);
  expect(zeroed).toMatchObject([{ channel: TIP, samples: 1000, temperature: null }]);
  expect((zeroed[0]?.change ?? NaN) * 1e6).toBeCloseTo(-12, 1);
  const plan = current.measured.find(({ channel }) => channel.id === TIP);
  const zero = plan?.channel.zeros.at(-1);
  expect(zero).toMatchObject({
    ...{ author: 'Engineer', reason: 'Before the first step', validFrom: NOW, recordedAt: NOW },
    ...{ state: { kind: 'unloaded' }, samples: 1000 },
  });
  expect(zero?.raw).toBeCloseTo(1.2e-4, 4);
  // 0.5 µε of a quarter bridge is GF·ε/4; computed. Of 1000 samples, to 5 %.
  expect((zero?.noise ?? NaN) / ((2.11 * 0.5e-6) / 4)).toBeCloseTo(1, 1);
});

test('what drifts, is noisy or does not arrive is refused, each with its reason; the others are zeroed at once', async () => {
  const { checks, feed, setUp } = await checkScene();
  await feed(
    ...([NOW - 30, NOW] as const),
    ...[still(TIP, 12e-6), UNLOADED],
    { channel: LEG, at: (t) => (t - NOW) * 0.75e-6, noise: 1e-8 },
    still(AXIAL, 0, 40e-6),
  );
  const channels = [TIP, LEG, AXIAL, 'L2-mid-axial', 'steel'];
  const outcome = await checks.zero({ ...REQUEST, channels });
  if (outcome.kind !== 'answered') throw new Error(JSON.stringify(outcome));
  expect(outcome.answer.zeroed.map(({ channel }) => channel)).toEqual([TIP]);
  expect(
    outcome.answer.refused.map(({ channel, refusal }) => [channel, refusal.code, refusal.came]),
  ).toEqual([
    [LEG, 'drifting', '45 µε/min'],
    [AXIAL, 'noisy', expect.stringMatching(/^(39|40|41)(\.\d)? µε$/)],
    ['L2-mid-axial', 'not-arriving', 'none'],
    ['steel', 'no-zero', 'steel, temperature'],
  ]);
  expect(setUp.revision).toBe(2);
  // For whoever was reloaded meanwhile.
  expect((await checks.answer()).zeros).toEqual(outcome.answer);
});

test('all that were zeroed are one revision; none zeroed is none', async () => {
  const { checks, feed, setUp } = await checkScene();
  await feed(NOW - 30, NOW, still(TIP, 1e-6), still(AXIAL, -2e-6), UNLOADED);
  await checks.zero({ ...REQUEST, channels: [TIP, AXIAL, HOOK] });
  expect(setUp.revision).toBe(2);
  const none = await checks.zero({ ...REQUEST, channels: [LEG], basedOn: 2 });
  expect(none).toMatchObject({ kind: 'answered', answer: { revision: 2, zeroed: [] } });
  expect(setUp.revision).toBe(2);
});

test('a structure that is said to be unloaded and is not: refused, with its load', async () => {
  const { checks, feed, setUp, current } = await checkScene();
  await feed(NOW - 30, NOW, still(TIP, 90e-6), still(HOOK, 24.6e3, 30));
  const outcome = await checks.zero(REQUEST);
  expect(outcome).toMatchObject({
    kind: 'refused',
    faults: [
      { path: '/state', expected: expect.stringContaining('at most 2 kN'), came: '24.6 kN' },
    ],
  });
  expect(setUp.revision).toBe(1);
  const loaded = { ...REQUEST, state: { kind: 'loaded', load: newton(24.6e3) } } as const;
  expect(await checks.zero(loaded)).toMatchObject({ kind: 'answered' });
  const zero = current.measured.find(({ channel }) => channel.id === TIP)?.channel.zeros.at(-1);
  expect(zero?.state).toEqual({ kind: 'loaded', load: 24.6e3 });
});

test('a load channel that does not read confirms nothing, and that is said', async () => {
  const { checks, feed } = await checkScene();
  await feed(NOW - 30, NOW, still(TIP, 0));
  const outcome = await checks.zero(REQUEST);
  expect(outcome).toMatchObject({
    answer: { cautions: [expect.stringContaining('hook-load does not read')] },
  });
});

test('the steel of the member is on record with the zero', async () => {
  const { checks, feed, current } = await checkScene();
  await feed(NOW - 30, NOW, still(AXIAL, 0), UNLOADED, still('steel', 16.5, 0));
  const outcome = await checks.zero({ ...REQUEST, channels: [AXIAL] });
  expect(outcome).toMatchObject({ answer: { zeroed: [{ temperature: 16.5 }] } });
  const zero = current.measured.find(({ channel }) => channel.id === AXIAL)?.channel.zeros.at(-1);
  expect(zero?.temperature).toBe(16.5);
});

test('the second of two who zero from one revision is told, and changes nothing', async () => {
  const { checks, feed, setUp } = await checkScene();
  await feed(NOW - 30, NOW, still(TIP, 5e-6), UNLOADED);
  const second = { ...REQUEST, author: 'Second' };
  const [first, other] = await Promise.all([checks.zero(REQUEST), checks.zero(second)]);
  expect(first.kind).toBe('answered');
  expect(other).toMatchObject({ kind: 'conflict', revision: 2, author: 'Engineer' });
  expect(setUp.revision).toBe(2);
});

test.each([
  [{ channels: ['nobody'] }, '/channels/0'],
  [{ author: '' }, '/author'],
  [{ reason: ' ' }, '/reason'],
])('%j is refused at %s', async (change, path) => {
  const { checks } = await checkScene();
  expect(await checks.zero({ ...REQUEST, ...change })).toMatchObject({
    kind: 'refused',
    faults: [{ path }],
  });
});
