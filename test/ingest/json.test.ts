import { expect, test } from 'vitest';
import { readJson } from '../../server/ingest/json.ts';

const bytes = (text: string) => new TextEncoder().encode(text);

test('JSON (RFC 8259) in UTF-8, with figures as doubles', () => {
  expect(readJson(bytes('[{"n":"ü","v":1.5e-3}]'))).toEqual({
    ok: true,
    value: [{ n: 'ü', v: 0.0015 }],
  });
});

test.each([
  ['bytes that are no UTF-8 (RFC 3629 §3)', Uint8Array.of(0x22, 0xc3, 0x28, 0x22)],
  ['half a text', bytes('[{"n":"x')],
  ['a name without quotes', bytes('{n:1}')],
  ['nothing', new Uint8Array(0)],
  ['a mebibyte of brackets', bytes('['.repeat(2 ** 20))],
  ['a half mebibyte of nested maps', bytes('{"a":'.repeat(2 ** 17))],
])('%s is refused, not thrown', (_, message) => {
  const read = readJson(message);
  expect(read).toMatchObject({ ok: false, refusal: { code: 'json', field: '(message)' } });
  expect(read.ok ? Infinity : read.refusal.came.length).toBeLessThanOrEqual(80);
});

test('nested as deep as a message can be, it is read without a deep stack', () => {
  const deep = 2 ** 19;
  expect(readJson(bytes('['.repeat(deep) + ']'.repeat(deep))).ok).toBe(true);
});
