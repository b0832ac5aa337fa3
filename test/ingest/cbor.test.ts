import { describe, expect, test } from 'vitest';
import { readCbor, writeCbor } from '../../server/ingest/cbor.ts';
import type { RawArray } from '../../shared/model/frame.ts';
import { EpochTime, FRAME_TAGS, SENML_TAGS } from '../../shared/pipeline/1-decode/tags.ts';

const hex = (text: string) => Uint8Array.from(Buffer.from(text.replace(/\s/g, ''), 'hex'));
const toHex = (bytes: Uint8Array) => Buffer.from(bytes).toString('hex');
const read = (text: string, tags = FRAME_TAGS) => readCbor(hex(text), tags);

/** RFC 8746 Table 1 gives tags and byte order; the bytes were worked out by hand. */
const ARRAYS: [string, RawArray, string][] = [
  ['f32 (85)', Float32Array.of(1, -2.5, 100), 'd8554c0000803f000020c00000c842'],
  ['f64 (86)', Float64Array.of(1, -2.5), 'd85650000000000000f03f00000000000004c0'],
  ['s16 (77)', Int16Array.of(1, -2, 1000), 'd84d460100feffe803'],
  ['s32 (78)', Int32Array.of(1, -2, 100000), 'd84e4c01000000feffffffa0860100'],
];

describe('RFC 8746 typed arrays', () => {
  test.each(ARRAYS)('%s, there and back', (_, samples, bytes) => {
    expect(toHex(writeCbor(samples))).toBe(bytes);
    expect(read(bytes)).toEqual({ ok: true, value: samples });
  });

  test.each(ARRAYS)('%s: a copy, aligned, wherever it lies in the message', (_, samples, bytes) => {
    for (let offset = 0; offset < 8; offset++) {
      const length = hex(bytes).length;
      const message = new Uint8Array(offset + length).subarray(offset);
      message.set(hex(bytes));
      const came = readCbor(message, FRAME_TAGS);
      const value = came.ok && ArrayBuffer.isView(came.value) ? came.value : null;
      expect(value?.buffer).not.toBe(message.buffer);
      message.fill(0);
      expect(value).toEqual(samples);
    }
  });

  test('a part of a longer array is written alone', () => {
    const part = Float32Array.of(9, 1, -2.5, 100, 9).subarray(1, 4);
    expect(toHex(writeCbor(part))).toBe('d8554c0000803f000020c00000c842');
  });

  test('arrays of one message do not touch: odd counts, mixed types', () => {
    const arrays = [
      ...[Int16Array.of(1, 2, 3), Float64Array.of(4, 5), Int16Array.of(6), Float32Array.of(7)],
      ...[Int16Array.of(8), Float64Array.of(9), Int32Array.of(10), Int16Array.of(11)],
    ];
    const came = readCbor(writeCbor(arrays), FRAME_TAGS);
    expect(came).toEqual({ ok: true, value: arrays });
    const values = came.ok ? (came.value as RawArray[]) : [];
    values[0]?.fill(-1);
    expect(values.slice(1)).toEqual(arrays.slice(1));
  });

  test.each([
    ['uint8 (64)', 'd84042 0102', 'tag 64, uint8 array'],
    ['big-endian int16 (73)', 'd84942 0001', 'tag 73, big-endian int16 array'],
    ['big-endian float32 (81)', 'd85144 3f800000', 'tag 81, big-endian float32 array'],
    ['little-endian uint32 (70)', 'd84644 01000000', 'tag 70, little-endian uint32 array'],
    ['little-endian float16 (84)', 'd85442 003c', 'tag 84, little-endian float16 array'],
    ['little-endian int64 (79)', 'd84f48 0100000000000000', 'tag 79, little-endian int64 array'],
    ['a date in text (0)', 'c06161', 'tag 0'],
  ])('another is refused by name and place: %s', (_, bytes, came) => {
    expect(read(`a162696e a1627331 ${bytes}`)).toMatchObject({
      ok: false,
      refusal: {
        field: 'in.s1',
        expected: 'no tag but 1, 77, 78, 85, 86',
        came: `${came} at byte 8`,
      },
    });
  });
});

/** RFC 8949 Appendix A. */
const APPENDIX_A: [string, unknown][] = [
  ['00', 0],
  ['17', 23],
  ['1818', 24],
  ['1903e8', 1000],
  ['1a000f4240', 1_000_000],
  ['1b000000e8d4a51000', 1_000_000_000_000n],
  ['20', -1],
  ['3863', -100],
  ['3903e7', -1000],
  ['3bffffffffffffffff', -(2n ** 64n)],
  ['f90000', 0],
  ['f93e00', 1.5],
  ['f97bff', 65504],
  ['f90001', 5.960464477539063e-8],
  ['fa47c35000', 100_000],
  ['fb3ff199999999999a', 1.1],
  ['fb7e37e43c8800759c', 1e300],
  ['f97c00', Infinity],
  ['f97e00', NaN],
  ['f4', false],
  ['f6', null],
  ['6449455446', 'IETF'],
  ['62c3bc', 'ü'],
  ['83010203', [1, 2, 3]],
  ['8301820203820405', [1, [2, 3], [4, 5]]],
  ['a26161016162820203', { a: 1, b: [2, 3] }],
  ['9f018202039f0405ffff', [1, [2, 3], [4, 5]]],
  ['bf61610161629f0203ffff', { a: 1, b: [2, 3] }],
  ['c11a514b67b0', new EpochTime(1363896240)],
  ['c1fb41d452d9ec200000', new EpochTime(1363896240.5)],
];

test.each(APPENDIX_A)('RFC 8949 Appendix A: %s', (bytes, value) => {
  expect(read(bytes)).toEqual({ ok: true, value });
});

test('RFC 8949 §3.4.4: 273.15 as a decimal fraction', () => {
  expect(read('c48221196ab3', SENML_TAGS)).toEqual({ ok: true, value: 273.15 });
});

test('tag 1 keeps what a millisecond cannot', () => {
  const message = `c1${toHex(writeCbor(1_700_000_000.000_25))}`;
  expect(read(message)).toEqual({ ok: true, value: new EpochTime(1_700_000_000.000_25) });
});

describe('what is refused before it is read, RFC 8949 §3 and §5', () => {
  test.each([
    ['an array of 4,294,967,295 in five bytes', '9affffffff', 'no more entries'],
    ['a map of 2^64−1', 'bbffffffffffffffff', 'no more entries'],
    ['a byte string of 2^48', '5b0000ffffffffffff', 'a byte string that ends'],
    ['a text that does not end', '7a00001000', 'a text that ends'],
    ['a text in chunks', '7f616161 62ff', 'a text of stated length'],
    ['a thousand arrays in one another', '81'.repeat(1000) + '01', 'at most 6 levels'],
    ['a thousand tags in one another', 'c1'.repeat(1000) + '01', 'a number in tag 1'],
    ['reserved additional information', '1c', 'a head of RFC 8949'],
    ['a whole number of no length', '1f', 'a whole number'],
    ['a simple value without meaning', 'f0', 'false, true, null, undefined or a float'],
    ['two items', '0101', 'the end'],
    ['a lone break', 'ff', 'an item'],
    ['an array without end', '9f01', 'an item'],
    ['a map that ends after a key', 'bf6161ff', 'an item'],
    ['nothing at all', '', 'an item'],
    ['a head cut short', '1a0000', '4 bytes more'],
    ['an array for a key', 'a1810102', 'a key of text or a whole number'],
    ['a tag for a key', 'a1c10102', 'a key of text or a whole number'],
    ['a key twice', 'a2 616101 616102', 'each key once'],
    ['a whole number and its text', 'a2 0501 613502', 'each key once'],
    ['a record of cbor-x (tag 57343)', 'd9dfff83 1980 81 6161 01', 'no tag but'],
    ['a shared reference (tag 28)', 'd81c8101', 'no tag but'],
  ])('%s', (_, bytes, expected) => {
    const came = read(bytes);
    expect(came).toMatchObject({ ok: false, refusal: { code: 'cbor' } });
    expect(came.ok ? '' : came.refusal.expected).toContain(expected);
  });

  test.each([
    ['13 bytes', 'd8554d0000803f000020c00000c84200', 'a multiple of 4 bytes'],
    ['13 bytes that lie aligned', '8500000000 d8554d0000803f000020c00000c84200', 'a multiple of 4'],
    ['an array', 'd85583010203', 'a byte string'],
    ['a text', 'd85564 61626364', 'a byte string'],
    ['another typed array', 'd855d85648 0000000000000000', 'a byte string'],
    ['a map that says how long it is', 'd855a166 627566666572 1a 7fffffff', 'a byte string'],
  ])('a float32 array of %s', (_, bytes, expected) => {
    const before = process.memoryUsage().arrayBuffers;
    const came = read(bytes);
    expect(came.ok ? '' : came.refusal.expected).toContain(expected);
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(1e6);
  });

  test.each([
    ['a time of text', 'c16161', FRAME_TAGS, 'a number in tag 1'],
    ['a fraction of three', 'c483010203', SENML_TAGS, 'an array of two whole numbers in tag 4'],
    ['a fraction of texts', 'c48261316132', SENML_TAGS, 'an array of two whole numbers in tag 4'],
    ['a typed array in SenML', 'd8554400000000', SENML_TAGS, 'no tag but 4'],
  ])('%s', (_, bytes, tags, expected) => {
    expect(read(bytes, tags)).toMatchObject({ ok: false, refusal: { expected } });
  });

  test('keys that share a figure but not their text are two: "Aa" and "BB"', () => {
    expect(read('a2 624161 01 624242 02')).toEqual({ ok: true, value: { Aa: 1, BB: 2 } });
    expect(read('a3 624161 01 624242 02 624161 03')).toMatchObject({ refusal: { field: 'Aa' } });
  });

  test('a key of the prototype stays a key', () => {
    const came = read('a1695f5f70726f746f5f5fa1616101');
    expect(came.ok && Object.getPrototypeOf(came.value)).toBe(Object.prototype);
    expect(Object.keys({})).toEqual([]);
    expect(({} as { a?: unknown }).a).toBeUndefined();
  });

  test('a key without end of names is cut where it is shown', () => {
    const message = writeCbor({ ['\u0007<'.repeat(5000)]: new EpochTime('x') });
    const came = readCbor(message, FRAME_TAGS);
    expect(came.ok ? Infinity : came.refusal.field.length).toBeLessThanOrEqual(80);
  });
});
