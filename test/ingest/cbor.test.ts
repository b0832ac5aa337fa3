import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { readCbor, writeCbor } from '../../server/ingest/cbor.ts';
import { decodeFrame, encodeFrame, FRAME_TAGS } from '../../shared/pipeline/1-decode/frame.ts';
import type { Frame, RawArray } from '../../shared/model/frame.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';

const hex = (text: string) => Uint8Array.from(Buffer.from(text.replace(/\s/g, ''), 'hex'));
const toHex = (bytes: Uint8Array) => Buffer.from(bytes).toString('hex');
const TAGS = FRAME_TAGS;
const NAN = Number.NaN;

describe('RFC 8746 typed arrays, bytes from its tag table', () => {
  test.each<[string, RawArray, string]>([
    ['f32 (85)', Float32Array.of(1, -2.5, 100), 'd8554c0000803f000020c00000c842'],
    ['f64 (86)', Float64Array.of(1, -2.5), 'd85650000000000000f03f00000000000004c0'],
    ['s16 (77)', Int16Array.of(1, -2, 1000), 'd84d460100feffe803'],
    ['s32 (78)', Int32Array.of(1, -2, 100000), 'd84e4c01000000feffffffa0860100'],
  ])('%s', (_, samples, bytes) => {
    expect(toHex(writeCbor(samples))).toBe(bytes);
    const read = readCbor(hex(bytes), TAGS);
    expect(read).toEqual({ ok: true, value: samples });
  });

  test('what is read stands on memory of its own, not on the message', () => {
    const message = hex('d8554c0000803f000020c00000c842');
    const read = readCbor(message, TAGS);
    message.fill(0);
    expect(read).toEqual({ ok: true, value: Float32Array.of(1, -2.5, 100) });
  });
});

describe('what is refused before it is read, RFC 8949 §3 and §5', () => {
  test.each([
    ['an array of 4,294,967,295 in five bytes', '9affffffff', 'at most 0 entries'],
    ['a map of 2^64−1', 'bbffffffffffffffff', 'at most 0 entries'],
    ['a byte string of 2^48', '5b0000ffffffffffff', 'a byte string that ends'],
    ['a text that does not end', '7a00001000', 'a text string that ends'],
    ['a thousand arrays in one another', '81'.repeat(1000) + '01', 'at most 6 levels'],
    ['big-endian float32 (81)', 'd8514c3f800000c020000042c80000', 'no tag but 1, 77, 78, 85, 86'],
    ['reserved additional information', '1c', 'a head of RFC 8949'],
    ['two items', '0101', 'the end'],
    ['a lone break', 'ff', 'an item'],
    ['an array without end', '9f01', 'an item'],
    ['nothing at all', '', 'an item'],
  ])('%s', (_, bytes, expected) => {
    const read = readCbor(hex(bytes), TAGS);
    expect(read).toMatchObject({ ok: false, refusal: { code: 'cbor' } });
    expect(read.ok ? '' : read.refusal.expected).toContain(expected);
  });

  test('a typed array of broken length', () => {
    expect(readCbor(hex('d8554d0000803f000020c00000c84200'), TAGS)).toMatchObject({ ok: false });
  });
});

const sampleArrays = fc.oneof(
  fc.array(fc.float(), { minLength: 5, maxLength: 5 }).map((a) => Float32Array.from(a)),
  fc.array(fc.double(), { minLength: 5, maxLength: 5 }).map((a) => Float64Array.from(a)),
  fc
    .array(fc.integer({ min: -32768, max: 32767 }), { minLength: 5, maxLength: 5 })
    .map((a) => Int16Array.from(a)),
  fc.array(fc.integer(), { minLength: 5, maxLength: 5 }).map((a) => Int32Array.from(a)),
);

const frames = fc
  .record({
    boot: fc.stringMatching(/^[a-z0-9]{1,12}$/),
    seq: fc.nat(),
    t0: fc.double({ min: 1e9, max: 2e9, noNaN: true }).map(epochSeconds),
    dt: fc.double({ min: 1e-4, max: 100, noNaN: true }).map(seconds),
    inputs: fc.uniqueArray(
      fc.record({ input: fc.stringMatching(/^[a-z][a-z0-9]{0,5}$/), samples: sampleArrays }),
      { minLength: 1, maxLength: 6, selector: ({ input }) => input },
    ),
  })
  .map((parts): Frame => ({ node: 'n1', sequenced: true, ...parts }));

test('a frame written and read is the same frame, bit for bit', () => {
  fc.assert(
    fc.property(frames, (frame) => {
      const read = readCbor(writeCbor(encodeFrame(frame)), TAGS);
      const decoded = read.ok ? decodeFrame(read.value, 'n1') : read;
      expect(decoded).toEqual({ ok: true, value: frame });
    }),
  );
});

const GOOD = writeCbor(
  encodeFrame({
    ...{ node: 'n1', boot: 'b', seq: 7, sequenced: true },
    ...{ t0: epochSeconds(1_700_000_000), dt: seconds(0.01) },
    inputs: [
      { input: 's1', samples: Float32Array.of(0.1, 0.2, NAN) },
      { input: 's2', samples: Int16Array.of(1, 2, 3) },
    ],
  }),
);

test('a hundred thousand mutated frames and random bytes: always a frame or a reason, never a throw', () => {
  const mutation = fc.record({
    at: fc.nat({ max: GOOD.length - 1 }),
    byte: fc.nat({ max: 255 }),
    cut: fc.nat({ max: 3 * GOOD.length }),
  });
  let accepted = 0;
  const answer = (bytes: Uint8Array) => {
    const read = readCbor(bytes, TAGS);
    const frame = read.ok ? decodeFrame(read.value, 'n1') : read;
    if (frame.ok) accepted++;
    else expect(frame.refusal.came.length).toBeLessThanOrEqual(200);
  };
  fc.assert(
    fc.property(fc.array(mutation, { minLength: 1, maxLength: 100 }), (mutations) => {
      for (const { at, byte, cut } of mutations) {
        const bytes = GOOD.slice(0, Math.min(GOOD.length, cut + 1));
        if (at < bytes.length) bytes[at] = byte;
        answer(bytes);
      }
    }),
    { numRuns: 2000 },
  );
  fc.assert(fc.property(fc.uint8Array({ maxLength: 200 }), answer), { numRuns: 5000 });
  expect(accepted).toBeGreaterThan(0);
});
