import { addExtension, Decoder, Encoder } from 'cbor-x';
import { accept, refuse, type RawArray, type Result } from '../../shared/model/frame.ts';
import { EPOCH_TAG, EpochTime, RAW_ARRAYS } from '../../shared/pipeline/1-decode/tags.ts';
import { malformed } from '../../shared/pipeline/1-decode/well-formed.ts';
import { OwnMemory } from './own-memory.ts';

/** Plain CBOR only: no records, no structured clone, maps as objects. */
const OPTIONS = {
  useRecords: false,
  mapsAsObjects: true,
  structuredClone: false,
  variableMapSize: true,
  tagUint8Array: false,
};

const decoder = new Decoder(OPTIONS);
/** Maps stay maps, so that they may have integer keys; objects are written as maps all the same. */
const encoder = new Encoder({ ...OPTIONS, mapsAsObjects: false });

/** Of the message under way: made at its first array, let go at its end. */
let memory: OwnMemory | null = null;
let messageLength = 0;

/**
 * cbor-x makes an array a view on the message wherever that happens to be aligned,
 * and copies it otherwise; here it is always copied, once.
 * Written as it lies in memory: little-endian, as on every machine this runs on.
 */
for (const [tag, ArrayType] of RAW_ARRAYS) {
  addExtension<RawArray, Uint8Array>({
    Class: ArrayType,
    tag,
    encode: (array, write) =>
      write(new Uint8Array(array.buffer, array.byteOffset, array.byteLength)),
    decode: (bytes) => (memory ??= new OwnMemory(messageLength)).copy(bytes, ArrayType),
  });
}

/** cbor-x makes a date of it, rounded to milliseconds. */
addExtension<EpochTime, unknown>({
  Class: EpochTime,
  tag: EPOCH_TAG,
  encode: ({ seconds }, write) => write(seconds),
  decode: (seconds) => new EpochTime(seconds),
});

/**
 * Bytes to plain values. Typed arrays come out as copies, aligned, on memory that
 * is the message's alone; an 8-byte integer as a bigint, tag 1 as an EpochTime.
 * Everything that the reader could stumble over is refused before it sees it.
 */
export const readCbor = (bytes: Uint8Array, tags: ReadonlySet<number>): Result<unknown> => {
  const refusal = malformed(bytes, tags);
  if (refusal) return { ok: false, refusal };
  messageLength = bytes.length;
  try {
    return accept(decoder.decode(bytes));
  } catch (error) {
    const came = error instanceof Error ? error.message.slice(0, 80) : 'something else';
    return refuse('cbor', '(message)', 'CBOR (RFC 8949)', came);
  } finally {
    memory = null;
  }
};

/** Plain values to bytes on memory of their own. */
export const writeCbor = (value: unknown): Uint8Array => new Uint8Array(encoder.encode(value));
