import fc from 'fast-check';
import { expect, test } from 'vitest';
import { hostAllowed, hostName, sameOrigin } from '../../shared/protocol/origin.ts';
import { parseHistoryQuery, parseLimitsRequest, parseTime } from '../../shared/protocol/parse.ts';

// RFC 3339 §5.8, its examples; their seconds by GNU date.
test('times of RFC 3339 are read to the second, and to the fraction', () => {
  expect(parseTime('1985-04-12T23:20:50.52Z')).toBeCloseTo(482196050.52, 6);
  expect(parseTime('1996-12-19T16:39:57-08:00')).toBe(851042397);
  expect(parseTime('1996-12-20T00:39:57Z')).toBe(851042397);
  // Before 1970, and a leap second, which POSIX time has not.
  expect(parseTime('1937-01-01T12:00:27.87+00:20')).toBeNull();
  expect(parseTime('1990-12-31T23:59:60Z')).toBeNull();
});

test('an offset that came through a query with its plus as a space is the same', () => {
  const query = Object.fromEntries(new URLSearchParams('t=2026-03-01T09:00:00+01:00'));
  expect(query.t).toBe('2026-03-01T09:00:00 01:00');
  expect(parseTime(query.t ?? '')).toBe(Date.UTC(2026, 2, 1, 8) / 1e3);
});

test('dates that are none, times without offset and other words are no time', () => {
  const none = ['2026-02-30T00:00:00Z', '2026-13-01T00:00:00Z', '2026-03-01T25:00:00Z'];
  const vague = ['2026-03-01T08:00:00', '2026-03-01', 'yesterday', '', '-5', '1e9', 'NaN', '0x10'];
  const far = ['253402300800', '2026-03-01T08:00:00+99:99'];
  for (const text of [...none, ...vague, ...far]) expect(parseTime(text), text).toBeNull();
});

test('every instant to the millisecond survives writing and reading', () => {
  const instants = fc.integer({ min: 0, max: 253_402_300_799_000 });
  fc.assert(
    fc.property(instants, (ms) => {
      const text = new Date(ms).toISOString();
      expect(parseTime(text)).toBeCloseTo(ms / 1e3, 4);
      expect(parseTime(String(ms / 1e3))).toBe(ms / 1e3);
    }),
  );
});

test('a history query: all its faults at once, or its values', () => {
  expect(parseHistoryQuery({ channel: 'c', from: '0', to: '2026-03-01T00:00:00Z' })).toEqual({
    ok: true,
    value: { channel: 'c', from: 0, to: 1772323200, points: 2000, format: 'json' },
  });
  const bad = { from: ['1', '2'], to: 'noon', points: '20001', format: 'xml', step: '1' };
  const parsed = parseHistoryQuery(bad);
  expect(parsed.ok ? [] : parsed.faults.map(({ path, came }) => [path, came])).toEqual([
    ['step', '"1"'],
    ['channel', 'nothing'],
    ['from', 'more than one'],
    ['to', '"noon"'],
    ['points', '"20001"'],
    ['format', '"xml"'],
  ]);
  const backwards = parseHistoryQuery({ channel: 'c', from: '5', to: '5', points: '1' });
  expect(backwards.ok ? [] : backwards.faults).toEqual([
    { path: 'to', expected: 'after from (5)', came: '5' },
  ]);
});

test('points: 1 to 20000, whole', () => {
  const ok = (points: string) => parseHistoryQuery({ channel: 'c', from: '1', to: '2', points }).ok;
  for (const points of ['1', '20000']) expect(ok(points), points).toBe(true);
  for (const points of ['0', '-1', '1.5', '20001', '', ' 1', '1e3', 'Infinity']) {
    expect(ok(points), points).toBe(false);
  }
});

const limit = { level: 'stop', basis: 'share', value: 0.7, deadband: 0.02, onDelay: 0 };

test('a limits body: all its faults at once, each by its JSON pointer (RFC 6901)', () => {
  const good = { limits: [limit], author: 'A', reason: 'R' };
  expect(parseLimitsRequest(good)).toEqual({ ok: true, value: good });
  const faulty = {
    limits: [{ ...limit, level: 'high', value: '0.7', 'a/b': 1 }, 7],
    author: 5,
    why: 'x',
  };
  const parsed = parseLimitsRequest(faulty);
  expect(parsed.ok ? [] : parsed.faults.map(({ path, came }) => [path, came])).toEqual([
    ['/limits/0/level', '"high"'],
    ['/limits/0/value', '"0.7"'],
    ['/limits/0/a~1b', '1'],
    ['/limits/1', '7'],
    ['/author', '5'],
    ['/reason', 'nothing'],
    ['/why', '"x"'],
  ]);
  expect(parseLimitsRequest({ ...good, limits: [limit, limit, limit] }).ok).toBe(false);
  // JSON has no infinity, but a figure beyond the double's range becomes one (RFC 8259 §6).
  expect(
    parseLimitsRequest({ ...good, limits: [{ ...limit, value: JSON.parse('1e999') }] }).ok,
  ).toBe(false);
});

test('whatever comes as a body or query is answered with a value or with faults', () => {
  fc.assert(
    fc.property(fc.jsonValue(), (body) => {
      const parsed = parseLimitsRequest(body);
      expect(parsed.ok || parsed.faults.length > 0).toBe(true);
    }),
  );
  const text = fc.oneof(fc.string(), fc.array(fc.string()));
  fc.assert(
    fc.property(fc.dictionary(fc.string(), text), (query) => {
      const parsed = parseHistoryQuery(query);
      expect(parsed.ok || parsed.faults.length > 0).toBe(true);
    }),
  );
});

test('hosts and origins', () => {
  expect(hostName('LocalHost:8080')).toBe('localhost');
  expect(hostName('[::1]:80')).toBe('[::1]');
  for (const none of [undefined, '', 'a b', 'x:y', 'a/b', 'u@h']) expect(hostName(none)).toBeNull();
  for (const listensOn of ['127.0.0.1', 'localhost', '::1', '127.0.0.2']) {
    expect(hostAllowed('localhost:8080', listensOn)).toBe(true);
    expect(hostAllowed('evil.example:8080', listensOn)).toBe(false);
    expect(hostAllowed('localhost.evil.example', listensOn)).toBe(false);
  }
  expect(hostAllowed('127.0.0.2:1', '127.0.0.2')).toBe(true);
  expect(hostAllowed('yard-pc:8080', '0.0.0.0')).toBe(true);
  expect(sameOrigin('http://localhost:8080', 'localhost:8080')).toBe(true);
  for (const other of ['http://localhost:81', 'http://evil.example', 'null', 'file://', '']) {
    expect(sameOrigin(other, 'localhost:8080'), other).toBe(false);
  }
});
