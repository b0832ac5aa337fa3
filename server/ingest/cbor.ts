import { Decoder, Encoder } from 'cbor-x';
import { accept, refuse, type Result } from '../../shared/model/frame.ts';
import { malformed } from '../../shared/pipeline/1-decode/well-formed.ts';

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

/**
 * Bytes to plain values. Typed arrays come out as copies, on memory of their own.
 * Everything that the reader could stumble over is refused before it sees it.
 */
export const readCbor = (bytes: Uint8Array, tags: ReadonlySet<number>): Result<unknown> => {
  const refusal = malformed(bytes, tags);
  if (refusal) return { ok: false, refusal };
  try {
    return accept(decoder.decode(bytes));
  } catch (error) {
    const came = error instanceof Error ? error.message.slice(0, 80) : 'something else';
    return refuse('cbor', '(message)', 'CBOR (RFC 8949)', came);
  }
};

/** Plain values to bytes on memory of their own. */
export const writeCbor = (value: unknown): Uint8Array => new Uint8Array(encoder.encode(value));
