import { expect, test } from 'vitest';
import { CHECK_EXAMPLES } from '../../server/http/openapi/check-paths.ts';
import type { CheckRequest, ShuntRequest, ZerosRequest } from '../../shared/protocol/checks.ts';
import { epochSeconds } from '../../shared/model/units.ts';
import { schemaValidators } from './contract.ts';
import { serve } from './serve.ts';

const post = (body: unknown, headers: Readonly<Record<string, string>> = {}) => ({
  method: 'POST',
  headers: { 'Content-Type': 'application/json', ...headers },
  body: JSON.stringify(body),
});

test('examples fit their schemas', () => {
  const faultsOf = schemaValidators();
  for (const [name, example] of Object.entries(CHECK_EXAMPLES)) {
    expect(faultsOf(name, example), name).toBe('');
  }
});

test('what is left out is as usual: all channels, twenty seconds, no note', async () => {
  const came: CheckRequest[] = [];
  const { ask } = await serve(
    {},
    '127.0.0.1',
    {},
    {
      run: (request) => {
        came.push(request);
        return { ok: true, lines: (async function* () {})() };
      },
    },
  );
  expect((await ask('/api/checks', post({ author: 'A' }))).status).toBe(200);
  expect(came).toEqual([{ channels: null, seconds: 20, limits: {}, author: 'A', note: '' }]);
});

test('lines come as they are made', async () => {
  const { ask } = await serve();
  const { body, headers } = await ask('/api/checks/push', post(CHECK_EXAMPLES.PushRequest));
  expect(headers['content-type']).toContain('application/x-ndjson');
  const kinds = body
    .trim()
    .split('\n')
    .map((line) => (JSON.parse(line) as { kind: string }).kind);
  expect(kinds).toEqual(['phase', 'progress', 'result']);
});

const SHUNT = CHECK_EXAMPLES.ShuntRequest;
const BY_HAND = { ...SHUNT, how: 'manual' };
const ZEROS = CHECK_EXAMPLES.ZerosRequest;
const window = (from: number, to: number) => ({ from, to });

test.each([
  ['no map', '/api/checks', [], ['/']],
  ['one second', '/api/checks', { author: 'A', seconds: 1 }, ['/seconds']],
  ['no channel', '/api/checks', { author: 'A', channels: [] }, ['/channels']],
  ['a channel twice', '/api/checks', { author: 'A', channels: ['c', 'c'] }, ['/channels']],
  ['a field too many', '/api/checks', { author: 'A', force: true }, ['/force']],
  [
    'a window turned round',
    '/api/checks',
    { author: 'A', limits: { offset: { good: 2, bad: 1 } } },
    ['/limits/offset/bad'],
  ],
  ['nothing in it', '/api/checks/push', {}, ['/channel', '/seconds', '/expected', '/author']],
  ['a fifth arm', '/api/checks/shunt', { ...SHUNT, arm: 5 }, ['/arm']],
  ['another place', '/api/checks/shunt', { ...SHUNT, place: 'roof' }, ['/place']],
  ['a shorted resistor', '/api/checks/shunt', { ...SHUNT, resistance: 0 }, ['/resistance']],
  ['levels nobody read', '/api/checks/shunt', BY_HAND, ['/read']],
  [
    'levels in the wrong order',
    '/api/checks/shunt',
    { ...BY_HAND, read: { before: window(20, 25), during: window(10, 15) } },
    ['/read/during'],
  ],
  [
    'levels of a commanded shunt',
    '/api/checks/shunt',
    { ...SHUNT, read: { before: window(10, 15), during: window(20, 25) } },
    ['/read'],
  ],
  [
    'a soaked gauge',
    '/api/checks/entered',
    { channel: 'c', author: 'A', entered: { kind: 'insulation', resistance: -1 } },
    ['/entered/resistance'],
  ],
  [
    'a load on nothing',
    '/api/zeros',
    { ...ZEROS, state: { kind: 'unloaded', load: 1 } },
    ['/state/load'],
  ],
  ['a load unsaid', '/api/zeros', { ...ZEROS, state: { kind: 'loaded' } }, ['/state/load']],
  ['half a revision', '/api/zeros', { ...ZEROS, basedOn: 0.5 }, ['/basedOn']],
])('a body with %s is refused at %s, each fault with its place', async (_, path, body, paths) => {
  const { ask } = await serve();
  const answer = await ask(path, post(body));
  expect(answer.status).toBe(422);
  const { faults } = answer.json() as { faults: { path: string }[] };
  expect(faults.map((fault) => fault.path)).toEqual(paths);
});

test('a shunt by hand and a zero under load go to the desk as they came', async () => {
  const shunts: ShuntRequest[] = [];
  const zeros: ZerosRequest[] = [];
  const { ask } = await serve(
    {},
    '127.0.0.1',
    {},
    {
      shunt: (request) => {
        shunts.push(request);
        return { ok: true, lines: (async function* () {})() };
      },
      zero: async (request) => {
        zeros.push(request);
        return {
          ...{ kind: 'conflict', revision: 4, at: epochSeconds(9) },
          ...{ author: 'B. Second', reason: 'a zero' },
        };
      },
    },
  );
  const read = { before: window(10, 15), during: window(20, 25) };
  await ask('/api/checks/shunt', post({ ...BY_HAND, read }));
  expect(shunts).toEqual([{ ...BY_HAND, read }]);
  const loaded = { ...ZEROS, state: { kind: 'loaded', load: 25e3 } };
  const answer = await ask('/api/zeros', post(loaded));
  expect(zeros).toEqual([loaded]);
  expect([answer.status, answer.json()]).toMatchObject([409, { revision: 4, author: 'B. Second' }]);
});

test("another site's page checks and zeroes nothing", async () => {
  const { ask } = await serve();
  const cross = { 'Sec-Fetch-Site': 'cross-site' };
  expect((await ask('/api/zeros', post(ZEROS, cross))).status).toBe(403);
  expect((await ask('/api/checks', post({ author: 'A' }, cross))).status).toBe(403);
});
