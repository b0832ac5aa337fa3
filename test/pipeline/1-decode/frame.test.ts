import { describe, expect, test } from 'vitest';
import { decodeFrame } from '../../../shared/pipeline/1-decode/frame.ts';
import { decodeStatus, encodeStatus } from '../../../shared/pipeline/1-decode/status.ts';
import { parseTopic, topicOf } from '../../../shared/pipeline/1-decode/topics.ts';

const good = {
  ...{ v: 1, node: 'n1', boot: 'b7', seq: 3, t0: 1_700_000_000.25, dt: 0.01 },
  in: { s1: Float32Array.of(1, 2), s2: Int16Array.of(3, 4) },
};

test('a frame as docs/wire.cddl describes it', () => {
  expect(decodeFrame(good, 'n1')).toEqual({
    ok: true,
    value: {
      ...{ node: 'n1', boot: 'b7', seq: 3, sequenced: true, t0: 1_700_000_000.25, dt: 0.01 },
      inputs: [
        { input: 's1', samples: Float32Array.of(1, 2) },
        { input: 's2', samples: Int16Array.of(3, 4) },
      ],
    },
  });
});

test('one sample needs no interval; keys not known are passed over; tag 1 may come as a date', () => {
  const { dt: _, ...rest } = good;
  const single = { ...rest, in: { s1: Float64Array.of(1) }, battery: 3.7 };
  expect(decodeFrame({ ...single, t0: new Date(1.7e12) }, 'n1')).toMatchObject({
    ok: true,
    value: { dt: 0, t0: 1.7e9 },
  });
});

describe('every refusal names the field, what was expected and what came', () => {
  test.each<[string, object, string, string]>([
    ['not version 1', { v: 2 }, 'v', '2'],
    ['another node than its topic', { node: 'n2' }, 'node', '"n2"'],
    ['no boot', { boot: undefined }, 'boot', 'nothing'],
    ['a boot with a slash', { boot: 'a/b' }, 'boot', '"a/b"'],
    ['a sequence below 0', { seq: -1 }, 'seq', '-1'],
    ['a sequence beyond 2^53', { seq: 2n ** 60n }, 'seq', String(2n ** 60n)],
    ['half a sequence number', { seq: 1.5 }, 'seq', '1.5'],
    ['a clock that was never set', { t0: 12 }, 't0', '12'],
    ['milliseconds for seconds', { t0: 1_700_000_000_250 }, 't0', '1700000000250'],
    ['no number for a time', { t0: NaN }, 't0', 'NaN'],
    ['no interval for two samples', { dt: undefined }, 'dt', 'nothing'],
    ['an interval of 0', { dt: 0 }, 'dt', '0'],
    ['no inputs', { in: {} }, 'in', '0'],
    ['an array for the inputs', { in: [1] }, 'in', 'an array of 1'],
    ['plain numbers', { in: { s1: [1, 2] } }, 'in.s1', 'an array of 2'],
    ['unsigned bytes', { in: { s1: new Uint8Array(2) } }, 'in.s1', 'Uint8Array'],
    ['unequal lengths', { in: { ...good.in, s2: Int16Array.of(1) } }, 'in.s2', '1'],
    ['no samples', { in: { s1: new Float32Array(0) } }, 'in.s1', '0'],
    ['an input of no name', { in: { '': Float32Array.of(1) } }, 'in', '""'],
    ['markup in a name', { in: { '<b>': Float32Array.of(1) } }, 'in', '"<b>"'],
  ])('%s', (_, change, field, came) => {
    const decoded = decodeFrame({ ...good, ...change }, 'n1');
    expect(decoded).toMatchObject({ ok: false, refusal: { field, came } });
    expect(decoded.ok ? '' : decoded.refusal.expected).not.toBe('');
  });

  test.each([[null], [7], ['text'], [[good]], [new Float32Array(3)]])('%s for a frame', (value) => {
    expect(decodeFrame(value, 'n1')).toMatchObject({ ok: false, refusal: { expected: 'a map' } });
  });

  test('what came is cut short', () => {
    const decoded = decodeFrame({ ...good, boot: 'x'.repeat(10_000) }, 'n1');
    expect(decoded.ok ? Infinity : decoded.refusal.came.length).toBeLessThanOrEqual(82);
  });
});

describe('topics', () => {
  test('four leaves under yieldward/1/<node>', () => {
    for (const leaf of ['frame', 'senml/json', 'senml/cbor', 'status'] as const) {
      expect(parseTopic(topicOf('n1', leaf))).toEqual({ ok: true, value: { node: 'n1', leaf } });
    }
    expect(parseTopic('yieldward/1/n1/other')).toEqual({ ok: true, value: null });
    expect(parseTopic('elsewhere/1/n1/frame')).toEqual({ ok: true, value: null });
    expect(parseTopic('yieldward/1/<x>/frame')).toMatchObject({ ok: false });
  });
});

test('status, there and back; a will that says nothing of use is refused', () => {
  const status = { online: true, boot: 'b7', software: 'demo 1' };
  expect(decodeStatus(encodeStatus(status))).toEqual({ ok: true, value: status });
  expect(decodeStatus({ v: 1, online: 'yes' })).toMatchObject({
    ok: false,
    refusal: { field: 'online', expected: 'true or false', came: '"yes"' },
  });
});
