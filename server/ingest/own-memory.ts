import type { RawArray } from '../../shared/model/frame.ts';
import type { RawArrayType } from '../../shared/pipeline/1-decode/tags.ts';

/**
 * One piece of memory for the arrays of one message: each is copied into it once,
 * apart from the others and aligned, for thirty small pieces take longer than the
 * rest of the reading. What does not fit, by padding, gets a piece of its own.
 */
export class OwnMemory {
  readonly #bytes: Uint8Array<ArrayBuffer>;
  #used = 0;

  /** `size`: bytes; as long as the message is enough for arrays of one type. */
  constructor(size: number) {
    this.#bytes = new Uint8Array(size);
  }

  /** `bytes` must be a whole number of elements. */
  copy(bytes: Uint8Array, ArrayType: RawArrayType): RawArray {
    const width = ArrayType.BYTES_PER_ELEMENT;
    const start = Math.ceil(this.#used / width) * width;
    if (start + bytes.length > this.#bytes.length) {
      return new ArrayType(new Uint8Array(bytes).buffer, 0, bytes.length / width);
    }
    this.#bytes.set(bytes, start);
    this.#used = start + bytes.length;
    return new ArrayType(this.#bytes.buffer, start, bytes.length / width);
  }
}
