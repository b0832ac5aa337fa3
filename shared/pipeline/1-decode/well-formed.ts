import type { Refusal } from '../../model/frame.ts';

const MOST_NESTED = 6;
const BREAK = 0xff;
const ENDLESS = -1;

interface Scan {
  readonly bytes: Uint8Array;
  readonly view: DataView;
  readonly tags: ReadonlySet<number>;
  at: number;
}

class Malformed extends Error {
  readonly at: number;
  readonly expected: string;
  constructor(at: number, expected: string, came: string) {
    super(came);
    this.at = at;
    this.expected = expected;
  }
}

/** Argument of an item's head, RFC 8949 §3; ENDLESS for an indefinite length. */
const argument = (scan: Scan, low: number): number => {
  const { view, at, bytes } = scan;
  const size = low < 24 ? 0 : low < 28 ? 1 << (low - 24) : low === 31 ? 0 : -1;
  if (size < 0) throw new Malformed(at - 1, 'a head of RFC 8949', `additional information ${low}`);
  if (at + size > bytes.length) throw new Malformed(at, `${size} bytes more`, 'the end');
  scan.at += size;
  if (low < 24) return low;
  switch (low) {
    case 24:
      return view.getUint8(at);
    case 25:
      return view.getUint16(at);
    case 26:
      return view.getUint32(at);
    case 27:
      return Number(view.getBigUint64(at));
    default:
      return ENDLESS;
  }
};

const items = (scan: Scan, count: number, perEntry: number, depth: number): void => {
  const left = scan.bytes.length - scan.at;
  if (count * perEntry > left) {
    throw new Malformed(scan.at, `at most ${left} entries in the bytes left`, String(count));
  }
  if (count === ENDLESS) {
    while (scan.bytes[scan.at] !== BREAK) for (let i = 0; i < perEntry; i++) item(scan, depth);
    scan.at++;
  } else {
    for (let i = 0; i < count * perEntry; i++) item(scan, depth);
  }
};

const text = (scan: Scan, length: number, major: number): void => {
  if (length === ENDLESS) {
    throw new Malformed(scan.at, 'strings of stated length', 'a string in chunks');
  }
  if (length > scan.bytes.length - scan.at) {
    throw new Malformed(
      scan.at,
      `a ${major === 2 ? 'byte' : 'text'} string that ends`,
      `${length} bytes`,
    );
  }
  scan.at += length;
};

const item = (scan: Scan, depth: number): void => {
  const start = scan.at;
  const head = scan.bytes[scan.at++];
  if (head === undefined) throw new Malformed(start, 'an item', 'the end');
  if (depth > MOST_NESTED) throw new Malformed(start, `at most ${MOST_NESTED} levels`, 'more');
  const major = head >> 5;
  const value = argument(scan, head & 31);
  switch (major) {
    case 0:
    case 1:
      if (value === ENDLESS) throw new Malformed(start, 'a whole number', 'no length');
      return;
    case 2:
    case 3:
      return text(scan, value, major);
    case 4:
      return items(scan, value, 1, depth + 1);
    case 5:
      return items(scan, value, 2, depth + 1);
    case 6:
      if (!scan.tags.has(value)) {
        const known = [...scan.tags].join(', ') || 'none';
        throw new Malformed(start, `no tag but ${known}`, `tag ${value}`);
      }
      return item(scan, depth + 1);
    default:
      if (value === ENDLESS) throw new Malformed(start, 'an item', 'a break');
  }
};

/**
 * Is this one whole item of CBOR (RFC 8949) that can be read in memory of its own
 * size: no length beyond the bytes at hand, no deep nesting, no tag but `tags`,
 * nothing after the end? Walks heads only, so its cost does not grow with arrays.
 */
export const malformed = (bytes: Uint8Array, tags: ReadonlySet<number>): Refusal | null => {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const scan: Scan = { bytes, view, tags, at: 0 };
  try {
    item(scan, 0);
  } catch (error) {
    if (!(error instanceof Malformed)) throw error;
    const { at, expected, message } = error;
    return { code: 'cbor', field: `byte ${at}`, expected, came: message };
  }
  if (scan.at === bytes.length) return null;
  const more = bytes.length - scan.at;
  return {
    code: 'cbor',
    field: `byte ${scan.at}`,
    expected: 'the end',
    came: `${more} bytes more`,
  };
};
