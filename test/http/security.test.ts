import { expect, test } from 'vitest';
import { CAUTION } from '../helpers/core.ts';
import { serve } from './serve.ts';

const REQUEST = { limits: [CAUTION], author: 'A', reason: 'R' };
const PATHS = ['/api/health', '/api/nothing', '/metrics', '/', '/assets/x.js'];

/** Content Security Policy Level 3 §2.2: directives between semicolons, name before sources. */
const directives = (policy: string): Map<string, string[]> =>
  new Map(
    policy.split(';').map((part) => {
      const [name = '', ...sources] = part.trim().split(/\s+/);
      return [name, sources];
    }),
  );

test.each(PATHS)('headers of %s', async (path) => {
  const { ask } = await serve();
  const { headers } = await ask(path);
  const policy = directives(String(headers['content-security-policy']));
  expect(policy.get('default-src')).toEqual(["'none'"]);
  expect(policy.get('script-src')).toEqual(["'self'"]);
  for (const name of ['frame-ancestors', 'base-uri', 'form-action']) {
    expect(policy.get(name), name).toEqual(["'none'"]);
  }
  const allowed = ["'none'", "'self'", 'data:'];
  for (const [name, sources] of policy) {
    for (const source of sources) expect(allowed, name).toContain(source);
    expect(sources.includes('data:'), name).toBe(name === 'img-src');
  }
  expect(headers['x-content-type-options']).toBe('nosniff');
  expect(headers['referrer-policy']).toBe('no-referrer');
  expect(headers['cross-origin-resource-policy']).toBe('same-origin');
  expect(headers).not.toHaveProperty('x-powered-by');
  expect(headers).not.toHaveProperty('access-control-allow-origin');
});

// RFC 9110 §7.4: a server ought to reject a request for an authority it does not serve; §15.5.20.
test('on loopback only its own names are answered, on every path', async () => {
  const { ask, put, port } = await serve();
  for (const path of PATHS) {
    expect((await ask(path, { headers: { Host: `evil.example:${port}` } })).status, path).toBe(421);
  }
  const headers = { Host: `evil.example:${port}`, Origin: `http://evil.example:${port}` };
  expect((await put('/api/channels/ratio/limits', REQUEST, headers)).status).toBe(421);
  for (const name of [`localhost:${port}`, `127.0.0.1:${port}`, `[::1]:${port}`, 'LOCALHOST']) {
    expect((await ask('/api/health', { headers: { Host: name } })).status, name).toBe(200);
  }
});

test('a server that was told to listen to the network answers to whatever it is called', async () => {
  const { ask } = await serve({}, '0.0.0.0');
  expect((await ask('/api/health', { headers: { Host: 'yard-pc:8080' } })).status).toBe(200);
});

test("another site's page can change nothing", async () => {
  let changes = 0;
  const { put, ask, port } = await serve({
    setLimits: async () => {
      changes++;
      return [];
    },
  });
  const path = '/api/channels/ratio/limits';
  const strangers: Record<string, string>[] = [
    { Origin: 'https://evil.example' },
    { Origin: 'null' },
    { Origin: `http://127.0.0.1:${port + 1}` },
    { 'Sec-Fetch-Site': 'cross-site' },
    { 'Sec-Fetch-Site': 'same-site' },
    { 'Sec-Fetch-Site': 'cross-site', Origin: `http://127.0.0.1:${port}` },
  ];
  for (const headers of strangers) {
    expect((await put(path, REQUEST, headers)).status, JSON.stringify(headers)).toBe(403);
  }
  // What a form can send without being asked first (Fetch, CORS-safelisted request-header).
  const types = ['text/plain', 'multipart/form-data', 'application/x-www-form-urlencoded'];
  for (const type of types) {
    const form = {
      method: 'PUT',
      headers: { 'Content-Type': type },
      body: JSON.stringify(REQUEST),
    };
    expect((await ask(path, form)).status, type).toBe(415);
  }
  // The question a browser asks before another site's PUT: no permission comes back.
  const preflight = await ask(path, {
    method: 'OPTIONS',
    headers: { Origin: 'https://evil.example', 'Access-Control-Request-Method': 'PUT' },
  });
  expect(preflight.headers).not.toHaveProperty('access-control-allow-origin');
  expect(preflight.headers).not.toHaveProperty('access-control-allow-methods');
  expect(changes).toBe(0);
});

test('our own page and programs can', async () => {
  const { put, port } = await serve();
  const path = '/api/channels/ratio/limits';
  const own = { 'Sec-Fetch-Site': 'same-origin', Origin: `http://127.0.0.1:${port}` };
  const ways: Record<string, string>[] = [
    own,
    {},
    { 'Content-Type': 'application/json; charset=utf-8' },
  ];
  for (const headers of ways) expect((await put(path, REQUEST, headers)).status).toBe(200);
});
