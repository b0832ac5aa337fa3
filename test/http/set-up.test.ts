import { expect, test } from 'vitest';
import { epochSeconds } from '../../shared/model/units.ts';
import type { SetUpRequest } from '../../shared/protocol/http.ts';
import { serve } from './serve.ts';

const REQUEST = { document: { format: 1 }, basedOn: 1, author: 'A', reason: 'R' };

const post = (body: unknown) => ({
  method: 'POST',
  headers: { 'Content-Type': 'application/json' },
  body: JSON.stringify(body),
});

test('a change goes to the desk as it came', async () => {
  const came: SetUpRequest[] = [];
  const { put } = await serve({}, '127.0.0.1', {
    change: async (request) => {
      came.push(request);
      return { kind: 'changed', revision: 2 };
    },
  });
  expect((await put('/api/set-up', REQUEST)).status).toBe(200);
  expect(came).toEqual([REQUEST]);
});

test('a conflict says who was first, and with which revision', async () => {
  const { put } = await serve({}, '127.0.0.1', {
    change: async () => ({
      ...{ kind: 'conflict', revision: 4, at: epochSeconds(9) },
      ...{ author: 'B. Second', reason: 'a zero' },
    }),
  });
  const answer = await put('/api/set-up', REQUEST);
  expect(answer.status).toBe(409);
  expect(answer.json()).toMatchObject({
    ...{ revision: 4, at: 9, author: 'B. Second', reason: 'a zero' },
    faults: [{ path: '/basedOn', expected: 'revision 4, which B. Second made meanwhile' }],
  });
});

test.each([
  ['no map', [], ['/']],
  ['nothing in it', {}, ['/document', '/author', '/reason', '/basedOn']],
  ['a document as text', { ...REQUEST, document: '{}' }, ['/document']],
  ['half a revision', { ...REQUEST, basedOn: 1.5 }, ['/basedOn']],
  ['a field too many', { ...REQUEST, force: true }, ['/force']],
])('a body with %s is refused, each fault with its place', async (_, body, paths) => {
  const { put } = await serve();
  const answer = await put('/api/set-up', body);
  expect(answer.status).toBe(422);
  const { faults } = answer.json() as { faults: { path: string }[] };
  expect(faults.map(({ path }) => path)).toEqual(paths);
});

test('faults of the desk come through, of a change and of a preview', async () => {
  const faults = [{ path: '/nodes', expected: 'an array', came: 'nothing' }];
  const { put, ask } = await serve({}, '127.0.0.1', {
    change: async () => ({ kind: 'refused', faults }),
    preview: () => ({ ok: false, faults }),
  });
  expect((await put('/api/set-up', REQUEST)).json()).toMatchObject({ faults });
  const preview = await ask('/api/set-up/preview', post({ document: {} }));
  expect([preview.status, preview.json()]).toMatchObject([422, { faults }]);
});

test('a preview comes as lines, progress first', async () => {
  const { ask } = await serve();
  const answer = await ask('/api/set-up/preview', post({ document: {} }));
  expect(
    answer.body
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line) as unknown),
  ).toEqual([
    { kind: 'progress', done: 1, of: 1 },
    { kind: 'result', channels: [] },
  ]);
});

test("another site's page changes nothing", async () => {
  const { put } = await serve();
  const answer = await put('/api/set-up', REQUEST, { 'Sec-Fetch-Site': 'cross-site' });
  expect(answer.status).toBe(403);
});
