import { epochSeconds } from '../../../shared/model/units.ts';
import type { Envelope, EnvelopeQuery, RawRun, SampleQuery, SeriesKey } from '../../ports.ts';
import { stepFor } from '../step.ts';
import { bucketWidth, LEVELS } from './levels.ts';
import { FrameReader, type Piece } from './pieces.ts';
import { openFile, type Database } from './schema.ts';
import { emptySummary, envelopeOf, merge, type Summary } from '../summary.ts';

interface Source {
  readonly node: number;
  readonly longest: number;
  /** Its buckets; null where the series has none, or not for all of the window. */
  readonly series: number | null;
}

/** The widest buckets that a point is made of whole ones; −1 below whole seconds: frames are read. */
const levelFor = (step: number): number => {
  let k = -1;
  while (k + 1 < LEVELS && step % bucketWidth(k + 1) === 0) k++;
  return k;
};

/** The one who reads samples. Synchronous: lives on a thread of its own. */
export class SqliteReader {
  readonly #database: Database;
  readonly #frames: FrameReader;
  readonly #buckets;

  constructor(folder: string) {
    this.#database = openFile(folder, 'samples');
    this.#frames = new FrameReader(this.#database);
    this.#buckets = this.#database.prepare(
      'SELECT bucket, min, max, sum, count FROM level ' +
        'WHERE series = ? AND k = ? AND bucket >= ? AND bucket < ? ORDER BY bucket',
    );
  }

  /**
   * Points lie on whole multiples of a step that is itself, from 1 s on, a whole
   * multiple of a bucket's width; each covers just the samples of its own stretch
   * within [from, to).
   */
  envelope({ series: key, from, to, points }: EnvelopeQuery): Envelope {
    const step = stepFor((to - from) / points);
    const k = levelFor(step);
    const source = this.#source(key, from, to);
    const by = new Map<number, Summary>();
    if (source) {
      const level = source.series === null ? -1 : k;
      for (const { t, summary } of this.#pieces(source, key, from, to, step, level)) {
        if (summary.count === 0) continue;
        const point = Math.floor(t / step);
        const into = by.get(point) ?? emptySummary();
        merge(into, summary);
        by.set(point, into);
      }
    }
    return envelopeOf(by, step, from);
  }

  samples({ node, input, from, to, atMost }: SampleQuery): RawRun[] {
    const source = this.#source({ node, input, over: null }, from, to);
    if (!source) return [];
    const rows = [...this.#frames.frames(source.node, source.longest, from, to)].filter(
      (row) =>
        row.t0 + (row.count - 1) * row.dt >= from &&
        this.#frames.layout(row.layout).layout.inputs.some((entry) => entry.input === input),
    );
    const total = rows.reduce((sum, { count }) => sum + count, 0);
    if (total > atMost) {
      throw new RangeError(`samples: expected at most ${atMost} in the window, came ${total}`);
    }
    const boots = this.#database.prepare(
      'SELECT boot.name FROM frame JOIN boot ON boot.id = frame.boot WHERE frame.id = ?',
    );
    return rows
      .flatMap((row) => {
        const block = this.#frames.blocks(row).find((one) => one.input === input);
        const { name } = boots.get(row.id) as { name: string };
        if (!block) return [];
        return [{ ...block, boot: name, t0: epochSeconds(row.t0), dt: row.dt }];
      })
      .sort((a, b) => a.t0 - b.t0 || (a.boot < b.boot ? -1 : 1));
  }

  close(): void {
    this.#database.close();
  }

  /** [from, to) from buckets of level k where they fit, finer towards the ends. */
  *#pieces(
    source: Source,
    key: SeriesKey,
    from: number,
    to: number,
    step: number,
    k: number,
  ): Generator<Piece> {
    if (from >= to) return;
    if (k < 0) {
      for (const row of this.#frames.frames(source.node, source.longest, from, to)) {
        yield* this.#frames.pieces(row, key, from, to, step);
      }
      return;
    }
    const width = bucketWidth(k);
    const [first, end] = [Math.ceil(from / width), Math.floor(to / width)];
    if (first >= end) {
      yield* this.#pieces(source, key, from, to, step, k - 1);
      return;
    }
    yield* this.#pieces(source, key, from, first * width, step, k - 1);
    const rows = this.#buckets.iterate(source.series, k, first, end);
    for (const row of rows as IterableIterator<Summary & { bucket: number }>) {
      yield { t: row.bucket * width, summary: row };
    }
    yield* this.#pieces(source, key, end * width, to, step, k - 1);
  }

  #source({ node, input, over }: SeriesKey, from: number, to: number): Source | null {
    const found = this.#database.prepare('SELECT id, longest FROM node WHERE name = ?').get(node);
    if (!found) return null;
    const { id, longest } = found as { id: number; longest: number };
    const series = this.#database
      .prepare(
        'SELECT id, first_frame AS first FROM series WHERE node = ? AND input = ? AND over = ?',
      )
      .get(id, input, over ?? '') as { id: number; first: number } | undefined;
    if (!series) return { node: id, longest, series: null };
    // A pair may have been named after frames that have its inputs were stored.
    const older = this.#database.prepare(
      'SELECT 1 FROM frame WHERE node = ? AND t0 >= ? AND t0 < ? AND id < ? LIMIT 1',
    );
    const partly = over !== null && older.get(id, from - longest, to, series.first) !== undefined;
    return { node: id, longest, series: partly ? null : series.id };
  }
}
