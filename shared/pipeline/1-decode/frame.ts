import {
  accept,
  refuse,
  type Frame,
  type InputBlock,
  type RawArray,
  type Result,
} from '../../model/frame.ts';
import { epochSeconds, seconds } from '../../model/units.ts';
import { EpochTime, FRAME_TAGS } from './tags.ts';
import { NAME, NAME_IN_WORDS, show } from './topics.ts';

export { FRAME_TAGS };

export const FRAME_VERSION = 1;
export const MOST_SAMPLES = 100_000;
export const MOST_INPUTS = 512;
/** 2000-01-01 and 2100-01-01 UTC: a clock outside is not set. */
const [EARLIEST, LATEST] = [946_684_800, 4_102_444_800];

const TYPES = 'a little-endian float32, float64, int16 or int32 array (RFC 8746)';

type Fields = Readonly<Record<string, unknown>>;

/** A map as JSON and CBOR readers make it: a plain object, of no class. */
export const isMap = (value: unknown): value is Fields => {
  if (typeof value !== 'object' || value === null) return false;
  const prototype: unknown = Object.getPrototypeOf(value);
  return prototype === Object.prototype || prototype === null;
};

const isRawArray = (value: unknown): value is RawArray =>
  value instanceof Float32Array ||
  value instanceof Float64Array ||
  value instanceof Int16Array ||
  value instanceof Int32Array;

/** A CBOR integer of eight bytes is read as a bigint, however small it is. */
export const plainNumber = (value: unknown): unknown =>
  typeof value === 'bigint' ? Number(value) : value;

const timeOf = (value: unknown): unknown =>
  plainNumber(value instanceof EpochTime ? value.seconds : value);

export const isClockTime = (value: unknown): value is number =>
  typeof value === 'number' && value >= EARLIEST && value < LATEST;

export const CLOCK_TIME = 'UTC seconds between the years 2000 and 2100';

const inputsOf = (value: unknown): Result<InputBlock[]> => {
  if (!isMap(value)) return refuse('type', 'in', 'a map of inputs', show(value));
  const names = Object.keys(value);
  if (names.length === 0 || names.length > MOST_INPUTS) {
    return refuse('size', 'in', `1 to ${MOST_INPUTS} inputs`, String(names.length));
  }
  const inputs: InputBlock[] = [];
  let length: number | null = null;
  for (const input of names) {
    const samples = value[input];
    if (!NAME.test(input)) return refuse('name', 'in', NAME_IN_WORDS, show(input));
    if (!isRawArray(samples)) return refuse('type', `in.${input}`, TYPES, show(samples));
    length ??= samples.length;
    if (samples.length !== length || length < 1 || length > MOST_SAMPLES) {
      const expected =
        length >= 1 && length <= MOST_SAMPLES
          ? `${length} samples, as the first input has`
          : `1 to ${MOST_SAMPLES} samples`;
      return refuse('size', `in.${input}`, expected, String(samples.length));
    }
    inputs.push({ input, samples });
  }
  return accept(inputs);
};

/** 0 for a single sample that states none; null where it is none, or leads past the year 2100. */
const intervalOf = (dt: unknown, t0: number, length: number): number | null => {
  if (length === 1 && (dt === undefined || dt === 0)) return 0;
  if (typeof dt !== 'number' || !Number.isFinite(dt) || dt <= 0) return null;
  return isClockTime(t0 + length * dt) ? dt : null;
};

/**
 * A frame as read from CBOR, checked against docs/wire.cddl. Keys that are not
 * known are passed over, so that nodes may say more than this version hears.
 * `topicNode` is the node that the topic names.
 */
export const decodeFrame = (parsed: unknown, topicNode: string): Result<Frame> => {
  if (!isMap(parsed)) return refuse('type', '(frame)', 'a map', show(parsed));
  const { v, node, boot, in: inputs } = parsed;
  const [seq, dt, t0] = [plainNumber(parsed.seq), plainNumber(parsed.dt), timeOf(parsed.t0)];
  if (plainNumber(v) !== FRAME_VERSION) {
    return refuse('version', 'v', String(FRAME_VERSION), show(v));
  }
  if (node !== topicNode)
    return refuse('node', 'node', `${topicNode}, as in its topic`, show(node));
  if (typeof boot !== 'string' || !NAME.test(boot)) {
    return refuse('name', 'boot', NAME_IN_WORDS, show(boot));
  }
  if (typeof seq !== 'number' || !Number.isSafeInteger(seq) || seq < 0) {
    return refuse('type', 'seq', 'a whole number from 0 to 2^53 − 1', show(parsed.seq));
  }
  if (!isClockTime(t0)) return refuse('time', 't0', CLOCK_TIME, show(t0));
  const blocks = inputsOf(inputs);
  if (!blocks.ok) return blocks;
  const interval = intervalOf(dt, t0, blocks.value[0]?.samples.length ?? 0);
  if (interval === null) {
    const expected = 'a sample interval above 0 s, and the frame over before the year 2100';
    return refuse('time', 'dt', expected, show(dt));
  }
  return accept({
    ...{ node: topicNode, boot, seq, sequenced: true, inputs: blocks.value },
    ...{ t0: epochSeconds(t0), dt: seconds(interval) },
  });
};

/** The map that a CBOR writer turns into a frame's bytes; the inverse of `decodeFrame`. */
export const encodeFrame = ({ node, boot, seq, t0, dt, inputs }: Frame): Fields => ({
  v: FRAME_VERSION,
  ...{ node, boot, seq, t0 },
  ...(dt > 0 ? { dt } : {}),
  in: Object.fromEntries(inputs.map(({ input, samples }) => [input, samples])),
});
