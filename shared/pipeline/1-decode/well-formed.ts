import type { Refusal } from '../../model/frame.ts';
import {
  ARRAY,
  BREAK,
  BYTES,
  ENDLESS,
  head,
  IN_WORDS,
  isFloat,
  isWhole,
  Malformed,
  MAP,
  NEGATIVE,
  string,
  TAG,
  TEXT,
  UNSIGNED,
  type Head,
  type Scan,
} from './cbor-head.ts';
import { DECIMAL_TAG, EPOCH_TAG, RAW_ARRAYS, tagInWords } from './tags.ts';
import { NAME, show } from './topics.ts';

const MOST_NESTED = 6;

/** Goes past a key. */
const key = (scan: Scan): Head => {
  const first = head(scan);
  const { start, major } = first;
  if (isWhole(first)) return first;
  if (major !== TEXT) {
    throw new Malformed(start, 'a key of text or a whole number', IN_WORDS[major] ?? '');
  }
  string(scan, first);
  return first;
};

const wholeKey = ({ major, value }: Head): string =>
  String(major === UNSIGNED ? value : -1 - value);

/** A key as the property that it becomes; text byte by byte, which is as good to tell keys apart. */
const keyText = (bytes: Uint8Array, first: Head, end: number): string =>
  first.major === TEXT
    ? Array.from(bytes.subarray(end - first.value, end), (b) => String.fromCharCode(b)).join('')
    : wholeKey(first);

/** The same for equal keys, and mostly another for others. */
const keyFigure = (bytes: Uint8Array, first: Head, end: number): number => {
  let figure = 0;
  if (first.major === TEXT) {
    for (let i = end - first.value; i < end; i++)
      figure = (Math.imul(figure, 31) + (bytes[i] ?? 0)) | 0;
    return figure;
  }
  const text = wholeKey(first);
  for (let i = 0; i < text.length; i++) figure = (Math.imul(figure, 31) + text.charCodeAt(i)) | 0;
  return figure;
};

/** Goes past the next key of a map; RFC 8949 §5.6: with the same key twice it is not valid. */
const enterKey = (scan: Scan, seen: Set<string | number>): void => {
  const { at, bytes, exact } = scan;
  const first = key(scan);
  const name = exact ? keyText(bytes, first, scan.at) : keyFigure(bytes, first, scan.at);
  scan.path.push(at);
  if (seen.has(name)) throw new Malformed(at, 'each key once', 'the same key again', !exact);
  seen.add(name);
};

const entries = (scan: Scan, { start, major, value }: Head, depth: number): void => {
  const left = scan.bytes.length - scan.at;
  if (value * (major === MAP ? 2 : 1) > left) {
    throw new Malformed(start, 'no more entries than the bytes left can hold', `${value} entries`);
  }
  const seen = major === MAP ? new Set<string | number>() : null;
  for (let i = 0; value === ENDLESS ? scan.bytes[scan.at] !== BREAK : i < value; i++) {
    if (seen) enterKey(scan, seen);
    else scan.path.push(-1 - i);
    item(scan, depth);
    scan.path.pop();
  }
  if (value === ENDLESS) scan.at++;
};

const wrongContent = ({ start }: Head, tag: number, content: string, came: string | number) =>
  new Malformed(start, `${content} in ${tagInWords(tag)}`, String(came));

/** Tags whose content is known must have it, since readers trust them to. */
const tagged = (scan: Scan, { start, value: tag }: Head, depth: number): void => {
  if (!scan.tags.has(tag)) {
    const known = [...scan.tags].join(', ') || 'none';
    throw new Malformed(start, `no tag but ${known}`, tagInWords(tag));
  }
  const bytesEach = RAW_ARRAYS.get(tag)?.BYTES_PER_ELEMENT;
  if (bytesEach === undefined && tag !== EPOCH_TAG && tag !== DECIMAL_TAG) return item(scan, depth);
  const first = head(scan);
  const came = IN_WORDS[first.major] ?? '';
  if (bytesEach !== undefined) {
    if (first.major !== BYTES) throw wrongContent(first, tag, 'a byte string', came);
    string(scan, first);
    if (first.value % bytesEach === 0) return;
    throw wrongContent(first, tag, `a multiple of ${bytesEach} bytes`, first.value);
  }
  if (tag === EPOCH_TAG) {
    if (isWhole(first) || isFloat(first)) return;
    throw wrongContent(first, tag, 'a number', came);
  }
  const isPair = first.major === ARRAY && first.value === 2;
  if (!isPair || !isWhole(head(scan)) || !isWhole(head(scan))) {
    throw wrongContent(first, tag, 'an array of two whole numbers', isPair ? 'others' : came);
  }
};

const item = (scan: Scan, depth: number): void => {
  const first = head(scan);
  const { start, major, value } = first;
  if (depth > MOST_NESTED) throw new Malformed(start, `at most ${MOST_NESTED} levels`, 'more');
  switch (major) {
    case UNSIGNED:
    case NEGATIVE:
      if (!isWhole(first)) throw new Malformed(start, 'a whole number', 'no length');
      return;
    case BYTES:
    case TEXT:
      return string(scan, first);
    case ARRAY:
    case MAP:
      return entries(scan, first, depth + 1);
    case TAG:
      return tagged(scan, first, depth + 1);
    default:
      if (isFloat(first) || (first.low >= 20 && first.low <= 23)) return;
      if (value === ENDLESS) throw new Malformed(start, 'an item', 'a break');
      throw new Malformed(
        start,
        'false, true, null, undefined or a float',
        `simple value ${value}`,
      );
  }
};

const fieldOf = (scan: Scan): string => {
  const steps = scan.path.map((part) => {
    if (part < 0) return `[${-1 - part}]`;
    scan.at = part;
    const text = keyText(scan.bytes, key(scan), scan.at);
    return `.${NAME.test(text) ? text : show(text)}`;
  });
  return steps.join('').replace(/^\./, '') || '(message)';
};

const walk = (bytes: Uint8Array, tags: ReadonlySet<number>, exact: boolean): Refusal | null => {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const scan: Scan = { bytes, view, tags, path: [], exact, at: 0 };
  try {
    item(scan, 0);
    const more = bytes.length - scan.at;
    if (more > 0) throw new Malformed(scan.at, 'the end', `${more} bytes more`);
    return null;
  } catch (error) {
    if (!(error instanceof Malformed)) throw error;
    if (error.unsure) return walk(bytes, tags, true);
    return { code: 'cbor', field: fieldOf(scan), expected: error.expected, came: error.came };
  }
};

/**
 * Is this one whole item of CBOR (RFC 8949) that can be read in memory of its own
 * size: no length beyond the bytes at hand, no deep nesting, no key twice, no tag
 * but `tags` and in each what belongs there, nothing after the end? Walks heads
 * and keys only, so its cost does not grow with arrays. `field` is the path of keys.
 */
export const malformed = (bytes: Uint8Array, tags: ReadonlySet<number>): Refusal | null =>
  walk(bytes, tags, false);
