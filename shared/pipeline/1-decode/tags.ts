import type { RawArray } from '../../model/frame.ts';

/** RFC 8949 §3.4.2: seconds since 1970. */
export const EPOCH_TAG = 1;
/** RFC 8949 §3.4.4: exponent and mantissa to base 10. */
export const DECIMAL_TAG = 4;

/** What tag 1 holds, as it came: a date of milliseconds would round it. */
export class EpochTime {
  readonly seconds: unknown;
  constructor(seconds: unknown) {
    this.seconds = seconds;
  }
}

export interface RawArrayType {
  readonly BYTES_PER_ELEMENT: number;
  new (buffer: ArrayBuffer, byteOffset: number, length: number): RawArray;
}

/** RFC 8746 Table 1: little-endian s16, s32, f32, f64. */
export const RAW_ARRAYS: ReadonlyMap<number, RawArrayType> = new Map<number, RawArrayType>([
  [77, Int16Array],
  [78, Int32Array],
  [85, Float32Array],
  [86, Float64Array],
]);

/** Tags that a frame may use: epoch time, and the arrays of RAW_ARRAYS. */
export const FRAME_TAGS: ReadonlySet<number> = new Set([EPOCH_TAG, ...RAW_ARRAYS.keys()]);

/** Tags that a SenML pack may use (RFC 8428 §6). */
export const SENML_TAGS: ReadonlySet<number> = new Set([DECIMAL_TAG]);

/** RFC 8746 §2.1: a typed array's tag is 0b010_f_s_e_ll: float, signed, little-endian, log2 of size. */
export const tagInWords = (tag: number): string => {
  if (tag < 64 || tag > 87 || tag === 76) return `tag ${tag}`;
  const [isFloat, isSigned, isLittle] = [(tag & 16) > 0, (tag & 8) > 0, (tag & 4) > 0];
  const bits = (isFloat ? 16 : 8) << (tag & 3);
  const order = bits === 8 ? '' : isLittle ? 'little-endian ' : 'big-endian ';
  const kind = isFloat ? 'float' : isSigned ? 'int' : 'uint';
  return `tag ${tag}, ${order}${kind}${bits} array`;
};
