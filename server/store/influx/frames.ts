import type { RawArray } from '../../../shared/model/frame.ts';
import { parseLayout, unpackBody, type Layout } from '../layout.ts';
import { isCounted, type Boots } from './boots.ts';
import { entriesOf, quoted, type Database } from './database.ts';
import { isBefore, nanosOf, nanosText, readTime, type Nanos } from './time.ts';

/** A frame in store, without its samples. */
export interface FrameEntry {
  readonly boot: string;
  /** Frames of a boot that overlap in time lie in lanes of their own, lest they overwrite each other. */
  readonly lane: string;
  readonly seq: number;
  readonly t0: number;
  readonly dt: number;
  readonly count: number;
  readonly layout: Layout;
  /** Pairs in its blocks: `input/over`. */
  readonly pairs: readonly string[];
}

const longestOf = (boots: Boots, node: string): number =>
  Math.max(0, ...[...boots.values()].filter((b) => b.node === node).map((b) => b.longest));

/** Bytes of the widest sample. */
const WIDEST = 8;

/** Rounding to ns and the summing of t0 + i·dt stay within it, s. */
const MARGIN = 1e-5;

const read = async (database: Database, condition: string): Promise<FrameEntry[]> => {
  const rows = entriesOf(
    await database.select(
      `SELECT "seq", "t0", "dt", "count" FROM "frame" WHERE ${condition} ` +
        'GROUP BY "boot", "lane", "layout", "pairs"',
    ),
  );
  return rows.map(({ boot, lane, seq, t0, dt, count, layout, pairs }) => ({
    ...{ boot: String(boot), lane: String(lane) },
    ...{ seq: Number(seq), t0: Number(t0), dt: Number(dt), count: Number(count) },
    layout: parseLayout(String(layout)),
    pairs: String(pairs)
      .split(',')
      .filter((pair) => pair !== ''),
  }));
};

/** Every frame of one boot that may have samples from `from` to `to`, counted or not yet. */
export const framesOfBoot = (
  database: Database,
  node: string,
  boot: string,
  longest: number,
  from: number,
  to: number,
): Promise<FrameEntry[]> =>
  read(
    database,
    `"node" = ${quoted(node)} AND "boot" = ${quoted(boot)} ` +
      `AND time >= ${nanosText(from - longest - MARGIN)} AND time <= ${nanosText(to)}`,
  );

/** Counted frames of the node with samples in [from, to), by time, then boot. */
export const framesIn = async (
  database: Database,
  boots: Boots,
  node: string,
  from: number,
  to: number,
): Promise<FrameEntry[]> => {
  const start = from - longestOf(boots, node) - MARGIN;
  const frames = await read(
    database,
    `"node" = ${quoted(node)} AND time >= ${nanosText(start)} AND time < ${nanosText(to)}`,
  );
  return frames
    .filter(
      ({ boot, seq, t0, dt, count }) =>
        t0 < to && t0 + (count - 1) * dt >= from && isCounted(boots, node, boot, seq),
    )
    .sort((a, b) => a.t0 - b.t0 || (a.boot < b.boot ? -1 : a.boot > b.boot ? 1 : a.seq - b.seq));
};

interface Track {
  readonly times: readonly Nanos[];
  readonly values: readonly (number | null)[];
  readonly bits: readonly (string | null)[];
}

const firstAtOrAfter = (times: readonly Nanos[], t: Nanos): number => {
  let [low, high] = [0, times.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    const there = times[middle];
    if (there && isBefore(there, t)) low = middle + 1;
    else high = middle;
  }
  return low;
};

const fill = (frame: FrameEntry, samples: RawArray, { times, values, bits }: Track): boolean => {
  const bytes = new Uint8Array(samples.buffer);
  let at = firstAtOrAfter(times, nanosOf(frame.t0));
  for (let i = 0; i < frame.count; i++) {
    const { second, ns } = nanosOf(frame.t0 + i * frame.dt);
    const time = times[at];
    if (time?.second !== second || time.ns !== ns) return false;
    const hex = bits[at];
    if (hex) bytes.set(Buffer.from(hex, 'hex'), i * samples.BYTES_PER_ELEMENT);
    else samples[i] = values[at] ?? NaN;
    at++;
  }
  return true;
};

/** The samples of one input in the given frames of a node, as they were measured. */
export const samplesOf = async (
  database: Database,
  node: string,
  input: string,
  frames: readonly FrameEntry[],
): Promise<Map<FrameEntry, RawArray>> => {
  const found = new Map<FrameEntry, RawArray>();
  if (frames.length === 0) return found;
  const from = Math.min(...frames.map(({ t0 }) => t0));
  const to = Math.max(...frames.map(({ t0, dt, count }) => t0 + (count - 1) * dt));
  const groups = await database.select(
    `SELECT "value", "bits" FROM "raw" WHERE "node" = ${quoted(node)} ` +
      `AND "input" = ${quoted(input)} AND time >= ${nanosText(from)} AND time <= ${nanosText(to)} ` +
      'GROUP BY "boot", "lane"',
  );
  const tracks = new Map(
    groups.map(({ tags, rows }): [string, Track] => [
      `${tags.boot} ${tags.lane}`,
      {
        times: rows.map(([time]) => readTime(String(time))),
        values: rows.map(([, value]) => (typeof value === 'number' ? value : null)),
        bits: rows.map(([, , bits]) => (typeof bits === 'string' ? bits : null)),
      },
    ]),
  );
  for (const frame of frames) {
    const track = tracks.get(`${frame.boot} ${frame.lane}`);
    const entry = frame.layout.inputs.find((one) => one.input === input);
    if (!entry || !track) continue;
    const room = new Uint8Array(frame.count * WIDEST);
    const [block] = unpackBody({ inputs: [entry] }, room, frame.count);
    if (block && fill(frame, block.samples, track)) found.set(frame, block.samples.slice());
  }
  return found;
};
