import fc from 'fast-check';
import { expect, test } from 'vitest';
import { readCbor, writeCbor } from '../../server/ingest/cbor.ts';
import type { Frame } from '../../shared/model/frame.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { decodeFrame, encodeFrame } from '../../shared/pipeline/1-decode/frame.ts';
import { decodeSenml } from '../../shared/pipeline/1-decode/senml.ts';
import { FRAME_TAGS, SENML_TAGS } from '../../shared/pipeline/1-decode/tags.ts';

const arrayOf = <T>(each: fc.Arbitrary<T>) => fc.array(each, { minLength: 5, maxLength: 5 });
const sampleArrays = fc.oneof(
  arrayOf(fc.float()).map((a) => Float32Array.from(a)),
  arrayOf(fc.double()).map((a) => Float64Array.from(a)),
  arrayOf(fc.integer({ min: -32768, max: 32767 })).map((a) => Int16Array.from(a)),
  arrayOf(fc.integer()).map((a) => Int32Array.from(a)),
);

const NAMES = /^[A-Za-z0-9][A-Za-z0-9\-:._]{0,63}$/;

const frames = fc
  .record({
    boot: fc.stringMatching(NAMES),
    seq: fc.maxSafeNat(),
    t0: fc.double({ min: 1e9, max: 2e9, noNaN: true }).map(epochSeconds),
    dt: fc.double({ min: 1e-4, max: 100, noNaN: true }).map(seconds),
    inputs: fc.uniqueArray(fc.record({ input: fc.stringMatching(NAMES), samples: sampleArrays }), {
      minLength: 1,
      maxLength: 6,
      selector: ({ input }) => input,
    }),
  })
  .map((parts): Frame => ({ node: 'n1', sequenced: true, ...parts }));

const byName = ({ inputs, ...rest }: Frame) => ({
  ...rest,
  inputs: new Map(inputs.map(({ input, samples }) => [input, samples])),
});

test('a frame written and read is the same frame, bit for bit', () => {
  fc.assert(
    fc.property(frames, (frame) => {
      const read = readCbor(writeCbor(encodeFrame(frame)), FRAME_TAGS);
      const decoded = read.ok ? decodeFrame(read.value, 'n1') : read;
      expect(decoded.ok && byName(decoded.value)).toEqual(byName(frame));
    }),
  );
});

const GOOD = writeCbor(
  encodeFrame({
    ...{ node: 'n1', boot: 'b', seq: 7, sequenced: true },
    ...{ t0: epochSeconds(1_700_000_000), dt: seconds(0.01) },
    inputs: [
      { input: 's1', samples: Float32Array.of(0.1, 0.2, NaN) },
      { input: 's2', samples: Int16Array.of(1, 2, 3) },
    ],
  }),
);

const bytesIn = (frame: Frame): number =>
  frame.inputs.reduce((sum, { samples }) => sum + samples.byteLength, 0);

/** True for a frame; checks what must hold of every answer. Throws for nothing that comes in. */
const isFrame = (bytes: Uint8Array): boolean => {
  const read = readCbor(bytes, FRAME_TAGS);
  const frame = read.ok ? decodeFrame(read.value, 'n1') : read;
  if (frame.ok) {
    if (bytesIn(frame.value) > bytes.length) throw new Error('more samples than bytes');
    return true;
  }
  const { field, expected, came } = frame.refusal;
  if (!field || !expected || !came || came.length > 80) throw new Error(`came ${came}`);
  return false;
};

test('fifty thousand frames with bytes changed or cut, each a frame or a reason', () => {
  const mutation = fc.record({
    at: fc.nat({ max: GOOD.length - 1 }),
    byte: fc.nat({ max: 255 }),
    cut: fc.nat({ max: 3 * GOOD.length }),
  });
  let [count, accepted] = [0, 0];
  const mutations = fc.array(mutation, { minLength: 50, maxLength: 50 });
  fc.assert(
    fc.property(mutations, (list) => {
      for (const { at, byte, cut } of list) {
        const bytes = GOOD.slice(0, Math.min(GOOD.length, cut + 1));
        if (at < bytes.length) bytes[at] = byte;
        count++;
        if (isFrame(bytes)) accepted++;
      }
    }),
    { numRuns: 1000 },
  );
  expect(count).toBeGreaterThanOrEqual(50_000);
  expect(accepted).toBeGreaterThan(0);
  expect(accepted).toBeLessThan(count);
});

test('random bytes are a frame or a reason, and SenML or a reason', () => {
  const context = { form: 'cbor', node: 'n1', arrived: epochSeconds(1.8e9) } as const;
  fc.assert(
    fc.property(fc.uint8Array({ maxLength: 200 }), (bytes) => {
      isFrame(bytes);
      const read = readCbor(bytes, SENML_TAGS);
      const pack = read.ok ? decodeSenml(read.value, { ...context, declared: () => null }) : read;
      expect(pack.ok ? pack.value.frames.length : pack.refusal.came.length).toBeLessThan(201);
    }),
    { numRuns: 10_000 },
  );
});

/** A head of RFC 8949 §3 in a width that need not be the shortest. */
const headOf = (major: number, value: number, width: number): number[] => {
  if (value < 24 && width === 0) return [(major << 5) | value];
  if (value < 256 && width <= 1) return [(major << 5) | 24, value];
  if (value < 65536 && width <= 2) return [(major << 5) | 25, value >> 8, value & 255];
  const tail = [24, 16, 8, 0].map((shift) => (value >>> shift) & 255);
  return [(major << 5) | 26, ...tail];
};
const width = fc.nat({ max: 3 });
const heads = (major: number, value: fc.Arbitrary<number>) =>
  fc.tuple(value, width).map(([v, w]) => headOf(major, v, w));
const sized = (major: number, content: fc.Arbitrary<number[]>, per = 1) =>
  fc.tuple(content, width).map(([c, w]) => [...headOf(major, c.length / per, w), ...c]);
const words = fc.constantFrom('v', 'node', 'n1', 'boot', 'seq', 't0', 'dt', 'in', 'buffer', 's1');
const { item } = fc.letrec<{ item: number[] }>((tie) => ({
  item: fc.oneof(
    { maxDepth: 5 },
    heads(0, fc.nat()),
    heads(1, fc.nat()),
    sized(2, fc.array(fc.nat({ max: 255 }), { maxLength: 24 })),
    sized(
      3,
      words.map((word) => [...Buffer.from(word)]),
    ),
    fc.nat({ max: 31 }).map((low) => [0xe0 | low]),
    fc
      .tuple(fc.constantFrom(1, 4, 28, 64, 77, 78, 81, 85, 86, 259), width, tie('item'))
      .map(([tag, w, content]) => [...headOf(6, tag, w), ...content]),
    fc
      .tuple(fc.array(tie('item'), { maxLength: 4 }), width)
      .map(([list, w]) => [...headOf(4, list.length, w), ...list.flat()]),
    fc
      .tuple(fc.array(fc.tuple(tie('item'), tie('item')), { maxLength: 4 }), width)
      .map(([list, w]) => [...headOf(5, list.length, w), ...list.flat(2)]),
  ),
}));

const bytesHeld = (value: unknown, depth = 0): number => {
  if (ArrayBuffer.isView(value)) return value.byteLength;
  if (typeof value !== 'object' || value === null) return 0;
  if (depth > 12) throw new Error('deeper than was let in');
  return Object.values(value).reduce((sum: number, v) => sum + bytesHeld(v, depth + 1), 0);
};

test('CBOR of any shape, tags on anything: read within its own size, or refused', () => {
  let accepted = 0;
  fc.assert(
    fc.property(item, fc.nat({ max: 9 }), (content, offset) => {
      const message = new Uint8Array(offset + content.length + 9).subarray(offset);
      message.set(content);
      const bytes = message.subarray(0, content.length);
      const read = readCbor(bytes, FRAME_TAGS);
      isFrame(bytes);
      if (!read.ok) return;
      accepted++;
      expect(bytesHeld(read.value)).toBeLessThanOrEqual(bytes.length);
      // In a longer buffer as by itself.
      expect(readCbor(Uint8Array.from(content), FRAME_TAGS)).toEqual(read);
    }),
    { numRuns: 20_000 },
  );
  expect(accepted).toBeGreaterThan(1000);
});
