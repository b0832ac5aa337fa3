import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { serve, type Served } from './serve.ts';

const HTML = { Accept: 'text/html,application/xhtml+xml,*/*;q=0.8' };

const build = ({ folder }: Served) => {
  mkdirSync(join(folder, 'assets'));
  writeFileSync(join(folder, 'index.html'), '<!doctype html><title>page</title>');
  writeFileSync(join(folder, 'icon.svg'), '<svg/>');
  writeFileSync(join(folder, 'assets', 'index-Ab3dEf.js'), 'export {};');
  writeFileSync(join(folder, '..', 'beside.txt'), 'not ours');
};

test('files named by content are kept for ever, the page is asked for anew', async () => {
  const served = await serve();
  build(served);
  const script = await served.ask('/assets/index-Ab3dEf.js');
  expect(script.status).toBe(200);
  expect(script.headers['content-type']).toMatch(/^text\/javascript/);
  // RFC 8246
  expect(script.headers['cache-control']).toBe('public, max-age=31536000, immutable');
  for (const path of ['/', '/index.html', '/icon.svg']) {
    const answer = await served.ask(path, { headers: HTML });
    expect(answer.status, path).toBe(200);
    expect(answer.headers['cache-control'], path).toBe('no-cache');
  }
});

test('addresses that the page knows lead to the page; files and paths of the API do not', async () => {
  const served = await serve();
  build(served);
  for (const path of ['/watch', '/look-back/B1?from=1', '/alarms/']) {
    const answer = await served.ask(path, { headers: HTML });
    expect(answer.status, path).toBe(200);
    expect(answer.body).toContain('<title>page</title>');
  }
  for (const path of ['/assets/index-old.js', '/api/nothing', '/none.txt']) {
    expect((await served.ask(path, { headers: HTML })).status, path).toBe(404);
  }
  expect((await served.ask('/watch', { headers: { Accept: 'application/json' } })).status).toBe(
    404,
  );
});

test('nothing outside the folder is served', async () => {
  const served = await serve();
  build(served);
  for (const path of ['/../beside.txt', '/%2e%2e/beside.txt', '/..%2fbeside.txt']) {
    const answer = await served.ask(path);
    expect([400, 403, 404], path).toContain(answer.status);
    expect(answer.body).not.toContain('not ours');
  }
});

test('a page that is not built says so and what to do; the API answers', async () => {
  const { ask } = await serve();
  const answer = await ask('/', { headers: HTML });
  expect(answer.status).toBe(503);
  expect(answer.headers['content-type']).toMatch(/^text\/html/);
  expect(answer.body).toContain('npm run build');
  expect(answer.body).not.toMatch(/<script|<style|style=/);
  expect((await ask('/api/health')).status).toBe(200);
});
