import { parseLayout, unpackBody, type Layout } from '../layout.ts';
import type { Database } from './schema.ts';
import {
  arraysOf,
  seriesOf,
  summarise,
  SUMMARY_FIGURES,
  type SeriesInputs,
  type Summary,
} from '../summary.ts';

/** An envelope's part: what the samples of a stretch of time came to. */
export interface Piece {
  readonly t: number;
  readonly summary: Summary;
}

export interface FrameRow {
  readonly id: number;
  readonly t0: number;
  readonly dt: number;
  readonly count: number;
  readonly layout: number;
  readonly summary: Buffer;
}

interface LayoutEntry {
  readonly layout: Layout;
  readonly series: readonly SeriesInputs[];
}

/** First sample at or after time `t`. */
const sampleAt = (row: FrameRow, t: number): number => {
  if (!(row.dt > 0)) return row.t0 >= t ? 0 : row.count;
  let i = Math.max(0, Math.min(row.count, Math.ceil((t - row.t0) / row.dt)));
  while (i > 0 && row.t0 + (i - 1) * row.dt >= t) i--;
  while (i < row.count && row.t0 + i * row.dt < t) i++;
  return i;
};

/** Reads frames: whole ones from their summaries, those cut by a border from their samples. */
export class FrameReader {
  readonly #database: Database;
  readonly #frames;
  readonly #body;
  readonly #layouts = new Map<number, LayoutEntry>();

  constructor(database: Database) {
    this.#database = database;
    this.#frames = database.prepare(
      'SELECT id, t0, dt, count, layout, summary FROM frame ' +
        'WHERE node = ? AND t0 >= ? AND t0 < ? ORDER BY t0',
    );
    this.#body = database.prepare('SELECT bytes FROM body WHERE id = ?');
  }

  /** Frames of the node that may have samples in [from, to). */
  frames(node: number, longest: number, from: number, to: number): IterableIterator<FrameRow> {
    return this.#frames.iterate(node, from - longest, to) as IterableIterator<FrameRow>;
  }

  layout(id: number): LayoutEntry {
    const known = this.#layouts.get(id);
    if (known) return known;
    const row = this.#database.prepare('SELECT inputs, pairs FROM layout WHERE id = ?').get(id);
    const { inputs, pairs } = row as { inputs: string; pairs: string };
    const layout = parseLayout(inputs);
    const entry = { layout, series: seriesOf(layout.inputs, JSON.parse(pairs) as SeriesInputs[]) };
    this.#layouts.set(id, entry);
    return entry;
  }

  blocks(row: FrameRow) {
    const { bytes } = this.#body.get(row.id) as { bytes: Buffer };
    return unpackBody(this.layout(row.layout).layout, bytes, row.count);
  }

  /** Where a series stands in the summaries of a layout; −1 where it does not. */
  #place(layout: number, { input, over }: SeriesInputs): number {
    const { series } = this.layout(layout);
    for (let i = 0; i < series.length; i++) {
      if (series[i]?.input === input && series[i]?.over === over) return i;
    }
    return -1;
  }

  /** A frame's samples in [from, to), cut at the multiples of `step`. */
  *pieces(
    row: FrameRow,
    key: SeriesInputs,
    from: number,
    to: number,
    step: number,
  ): Generator<Piece> {
    const first = sampleAt(row, from);
    const end = sampleAt(row, to);
    if (first >= end) return;
    const pointOf = (i: number) => Math.floor((row.t0 + i * row.dt) / step);
    const place = this.#place(row.layout, key);
    const whole = first === 0 && end === row.count && pointOf(0) === pointOf(end - 1);
    if (whole && place >= 0) {
      const at = place * SUMMARY_FIGURES * 8;
      const figure = (i: number) => row.summary.readDoubleLE(at + 8 * i);
      const [min, max, sum, count] = [figure(0), figure(1), figure(2), figure(3)];
      yield { t: row.t0, summary: { min, max, sum, count } };
      return;
    }
    const arrays = arraysOf(this.blocks(row), key);
    if (!arrays) return;
    let i = first;
    while (i < end) {
      const point = pointOf(i);
      let next = Math.max(i + 1, Math.min(end, sampleAt(row, (point + 1) * step)));
      while (next > i + 1 && pointOf(next - 1) > point) next--;
      while (next < end && pointOf(next) === point) next++;
      yield { t: row.t0 + i * row.dt, summary: summarise(...arrays, i, next) };
      i = next;
    }
  }
}
