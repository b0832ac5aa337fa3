import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { readCbor } from '../../../server/ingest/cbor.ts';
import { decodeFrame, encodeFrame } from '../../../shared/pipeline/1-decode/frame.ts';
import { decodeStatus, encodeStatus } from '../../../shared/pipeline/1-decode/status.ts';
import { EpochTime, FRAME_TAGS } from '../../../shared/pipeline/1-decode/tags.ts';
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

test('the frame of docs/wire.md, byte by byte', () => {
  const prose = readFileSync(new URL('../../../docs/wire.md', import.meta.url), 'utf8');
  const listing = /```cbor\n([^]*?)```/.exec(prose)?.[1] ?? '';
  const bytes = Buffer.from(listing.replace(/#.*$/gm, '').replace(/\s/g, ''), 'hex');
  expect(prose).toContain(`${bytes.length} bytes:`);
  const read = readCbor(bytes, FRAME_TAGS);
  expect(read.ok && decodeFrame(read.value, 'n1')).toEqual({
    ok: true,
    value: {
      ...{ node: 'n1', boot: 'b7', seq: 3, sequenced: true, t0: 1_700_000_000.25, dt: 0.5 },
      inputs: [
        { input: 's1', samples: Float32Array.of(1, -2.5) },
        { input: 's2', samples: Int16Array.of(1, -2) },
      ],
    },
  });
});

test('one sample needs no interval, and none is written for it; unknown keys are passed over', () => {
  const { dt: _, ...rest } = good;
  const single = { ...rest, in: { s1: Float64Array.of(1) }, battery: 3.7 };
  const decoded = decodeFrame(single, 'n1');
  expect(decoded).toMatchObject({ ok: true, value: { dt: 0 } });
  expect(decoded.ok && Object.keys(encodeFrame(decoded.value))).not.toContain('dt');
  expect(decodeFrame({ ...single, dt: 0 }, 'n1')).toEqual(decoded);
});

test('tag 1 for a time, and integers of eight bytes, are numbers like any other', () => {
  const wide = { ...good, v: 1n, seq: 3n, t0: new EpochTime(1_700_000_000n), dt: 2n };
  expect(decodeFrame(wide, 'n1')).toMatchObject({
    ok: true,
    value: { seq: 3, t0: 1_700_000_000, dt: 2 },
  });
  const exact = { ...good, t0: new EpochTime(1_700_000_000.000_25) };
  expect(decodeFrame(exact, 'n1')).toMatchObject({ value: { t0: 1_700_000_000.000_25 } });
  expect(decodeFrame({ ...good, seq: new EpochTime(3) }, 'n1')).toMatchObject({ ok: false });
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
    ['time that runs back', { dt: -0.01 }, 'dt', '-0.01'],
    ['an interval without end', { dt: Infinity }, 'dt', 'Infinity'],
    ['a frame that ends after 2100', { dt: 2e9 }, 'dt', '2000000000'],
    [
      'a name of 65 characters',
      { in: { ['x'.repeat(65)]: Float32Array.of(1) } },
      'in',
      `"${'x'.repeat(65)}"`,
    ],
    ['a name with a slash', { in: { 'a/b': Float32Array.of(1) } }, 'in', '"a/b"'],
    ['a tagged time for the inputs', { in: new EpochTime(5) }, 'in', 'a map'],
    ['100,001 samples', { in: { s1: new Int16Array(100_001) } }, 'in.s1', '100001'],
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
    expect(decoded.ok ? Infinity : decoded.refusal.came.length).toBeLessThanOrEqual(80);
  });

  test('512 inputs are taken, 513 are not', () => {
    const inputs = (count: number) =>
      Object.fromEntries(Array.from({ length: count }, (_, i) => [`s${i}`, Int16Array.of(1, 2)]));
    expect(decodeFrame({ ...good, in: inputs(512) }, 'n1')).toMatchObject({ ok: true });
    expect(decodeFrame({ ...good, in: inputs(513) }, 'n1')).toMatchObject({
      refusal: { field: 'in', came: '513' },
    });
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
  expect(decodeStatus({ v: 1, online: false })).toEqual({
    ok: true,
    value: { online: false, boot: null, software: null },
  });
  expect(decodeStatus({ v: 2, online: true })).toMatchObject({
    refusal: { field: 'v', came: '2' },
  });
  expect(decodeStatus({ v: 1, online: true, boot: 7 })).toMatchObject({
    refusal: { field: 'boot' },
  });
  expect(decodeStatus({ v: 1, online: true, software: 'x'.repeat(201) })).toMatchObject({
    refusal: { field: 'software', expected: 'at most 200 characters of text' },
  });
  const status = { online: true, boot: 'b7', software: 'demo 1' };
  expect(decodeStatus(encodeStatus(status))).toEqual({ ok: true, value: status });
  expect(decodeStatus({ v: 1, online: 'yes' })).toMatchObject({
    ok: false,
    refusal: { field: 'online', expected: 'true or false', came: '"yes"' },
  });
});
