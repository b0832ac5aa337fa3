/** Heads of CBOR items (RFC 8949 §3), as the walk of well-formed.ts meets them. */
export const BREAK = 0xff;
/** Stands for the value of a head of indefinite length. */
export const ENDLESS = -1;

/** Major types, RFC 8949 §3.1. */
export const [UNSIGNED, NEGATIVE, BYTES, TEXT, ARRAY, MAP, TAG] = [0, 1, 2, 3, 4, 5, 6];
export const IN_WORDS = [
  ...['a whole number', 'a negative whole number', 'a byte string', 'a text'],
  ...['an array', 'a map', 'a tag', 'a float or simple value'],
];

/** A message, and how far into it the walk has come. */
export interface Scan {
  readonly bytes: Uint8Array;
  readonly view: DataView;
  readonly tags: ReadonlySet<number>;
  /** What leads to the item under way: where a key begins, or −1 − i for place i of an array. */
  readonly path: number[];
  /** Keys are told apart by their text; otherwise by a figure of it that others may share. */
  readonly exact: boolean;
  at: number;
}

export interface Head {
  readonly start: number;
  readonly major: number;
  readonly low: number;
  /** ENDLESS for an indefinite length. */
  readonly value: number;
}

/** Thrown and caught within the walk: the way out of its depth. */
export class Malformed extends Error {
  /** Two keys share a figure: only an exact walk can tell. */
  readonly unsure: boolean;
  readonly expected: string;
  readonly came: string;
  constructor(at: number, expected: string, came: string, unsure = false) {
    super(expected);
    this.unsure = unsure;
    this.expected = expected;
    this.came = `${came} at byte ${at}`;
  }
}

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

/** Reads the head at `scan.at` and goes past it. */
export const head = (scan: Scan): Head => {
  const start = scan.at;
  const first = scan.bytes[scan.at++];
  if (first === undefined) throw new Malformed(start, 'an item', 'the end');
  const low = first & 31;
  return { start, major: first >> 5, low, value: argument(scan, low) };
};

export const isWhole = ({ major, value }: Head): boolean =>
  (major === UNSIGNED || major === NEGATIVE) && value !== ENDLESS;

export const isFloat = ({ major, low }: Head): boolean => major > TAG && low > 24 && low < 28;

/** Goes past the bytes of a byte or text string. */
export const string = (scan: Scan, { start, major, value }: Head): void => {
  const words = IN_WORDS[major] ?? '';
  if (value === ENDLESS) throw new Malformed(start, `${words} of stated length`, 'one in chunks');
  if (value > scan.bytes.length - scan.at) {
    throw new Malformed(start, `${words} that ends`, `one of ${value} bytes`);
  }
  scan.at += value;
};
