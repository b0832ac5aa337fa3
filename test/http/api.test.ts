import { expect, test } from 'vitest';
import { refuse } from '../../shared/model/frame.ts';
import type { LimitsRequest } from '../../shared/protocol/http.ts';
import { CAUTION, plainCore, START } from '../helpers/core.ts';
import { schemaValidators } from './contract.ts';
import { serve, type Answer } from './serve.ts';

const faultsOf = schemaValidators();
const asProblem = (answer: Answer, status: number) => {
  expect(answer.status).toBe(status);
  expect(answer.headers['content-type']).toMatch(/^application\/json/);
  expect(answer.headers['x-simulated']).toBe('yes');
  expect(faultsOf('Problem', answer.json())).toBe('');
  return answer.json() as { error: string; faults: { path: string; came: string }[] };
};

const REQUEST: LimitsRequest = { limits: [CAUTION], author: 'A', reason: 'R' };

test('a channel with its place, limits and present value; an unknown one is a 404', async () => {
  const { ask } = await serve();
  expect((await ask('/api/channels/hook')).json()).toEqual({
    simulated: true,
    channel: {
      ...{ id: 'hook', name: 'Channel hook', structure: 'lift', member: 'B1', station: 'mid' },
      ...{ measurand: 'force', unit: 'N', node: 'n1', input: 'hook', limits: [] },
      current: { channel: 'hook', value: 4e-4, at: START, quality: 'good' },
    },
  });
  const { faults } = asProblem(await ask('/api/channels/none%2Fsuch'), 404);
  expect(faults).toEqual([
    { path: 'id', expected: expect.stringContaining('/api/channels'), came: 'none/such' },
  ]);
});

test('a real site is marked as real', async () => {
  const site = { ...plainCore().site(), simulated: false };
  const { ask } = await serve({ site: () => site });
  const answer = await ask('/api/alarms');
  expect(answer.headers['x-simulated']).toBe('no');
  expect(answer.json()).toMatchObject({ simulated: false });
});

test('history asks the core for what the query says', async () => {
  const asked: unknown[] = [];
  const core = plainCore();
  const { ask } = await serve({
    history: (...query) => {
      asked.push(query);
      return core.history(...query);
    },
  });
  await ask(`/api/history?channel=ratio&from=${START}&to=2027-01-15T08:00:01%2B00:00&points=7`);
  // 1.8e9 s is 2027-01-15T08:00:00Z (GNU date).
  expect(asked).toEqual([['ratio', START, START + 1, 7]]);
});

test('bad queries list every fault and ask the core nothing', async () => {
  const { ask } = await serve({ history: () => Promise.reject(new Error('asked')) });
  const bad = asProblem(await ask('/api/history?from=x&points=0&zoom=1'), 400);
  expect(bad.faults.map(({ path }) => path)).toEqual(['zoom', 'channel', 'from', 'to', 'points']);
  const unknown = asProblem(await ask('/api/history?channel=q&from=1&to=2'), 404);
  expect(unknown.faults).toMatchObject([{ path: 'channel', came: 'q' }]);
});

test('a window that the core refuses is a 422 with its words', async () => {
  const { ask } = await serve({
    history: async () => refuse('window', 'to', 'within a year of from', '5 years'),
  });
  const { faults } = asProblem(await ask('/api/history?channel=ratio&from=1&to=2'), 422);
  expect(faults).toEqual([{ path: 'to', expected: 'within a year of from', came: '5 years' }]);
});

test('limits are put in force and the channel comes back with them', async () => {
  const changed: unknown[] = [];
  const { put } = await serve({
    setLimits: async (...change) => {
      changed.push(change);
      return [];
    },
    limits: () => ({ ratio: changed.length > 0 ? [] : [CAUTION] }),
  });
  const answer = await put('/api/channels/ratio/limits', { ...REQUEST, limits: [] });
  expect(answer.status).toBe(200);
  expect(faultsOf('ChannelAnswer', answer.json())).toBe('');
  expect(answer.json()).toMatchObject({ channel: { id: 'ratio', limits: [] } });
  expect(changed).toEqual([['ratio', { ...REQUEST, limits: [] }]]);
});

test('refused limits: every fault, those of the shape and those of the core', async () => {
  const yieldFault = { path: '/limits/0/value', expected: 'below yield', came: '110 % of yield' };
  const { put } = await serve({ setLimits: async () => [yieldFault] });
  expect(asProblem(await put('/api/channels/ratio/limits', REQUEST), 422).faults).toEqual([
    yieldFault,
  ]);
  const shape = asProblem(await put('/api/channels/ratio/limits', { limits: 1 }), 422);
  expect(shape.faults.map(({ path }) => path)).toEqual(['/limits', '/author', '/reason']);
  asProblem(await put('/api/channels/nobody/limits', REQUEST), 404);
});

test('bodies that cannot be read', async () => {
  const { ask, put } = await serve({ setLimits: () => Promise.reject(new Error('asked')) });
  const path = '/api/channels/ratio/limits';
  const json = { 'Content-Type': 'application/json' };
  const send = (body: string, headers: Record<string, string> = json) =>
    ask(path, { method: 'PUT', body, headers });
  asProblem(await send('{"limits":'), 400);
  asProblem(await send('', json), 422);
  asProblem(await put(path, { ...REQUEST, reason: 'x'.repeat(64 * 1024) }), 413);
  asProblem(await send('{}', { ...json, 'Content-Encoding': 'gzip' }), 415);
  for (const type of ['text/plain', 'application/x-www-form-urlencoded', 'application/jsonp']) {
    asProblem(await send(JSON.stringify(REQUEST), { 'Content-Type': type }), 415);
  }
});

test('paths and methods that there are not', async () => {
  const { ask } = await serve();
  asProblem(await ask('/api/nothing'), 404);
  asProblem(await ask('/api/channels/%zz'), 400);
  const posted = await ask('/api/health', { method: 'POST' });
  asProblem(posted, 405);
  expect(posted.headers.allow).toBe('GET, HEAD');
  const got = await ask('/api/channels/ratio/limits');
  asProblem(got, 405);
  expect(got.headers.allow).toBe('PUT');
  expect((await ask('/api/health', { method: 'HEAD' })).status).toBe(200);
});

test('a fault on our side is told to the log, and to the asker only that there was one', async () => {
  const { ask, put, complaints } = await serve({
    history: () => Promise.reject(new Error('disk /secret/place failed')),
    setLimits: () => Promise.reject(new Error('disk /secret/place failed')),
  });
  const answers = [
    await ask('/api/history?channel=ratio&from=1&to=2'),
    await put('/api/channels/ratio/limits', REQUEST),
  ];
  for (const answer of answers) {
    asProblem(answer, 500);
    expect(answer.body).not.toContain('secret');
  }
  expect(complaints).toHaveLength(2);
  expect(complaints[0]).toMatch(/^GET \/api\/history.*disk \/secret\/place failed/);
});
