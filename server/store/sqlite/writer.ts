import { include, type Ranges } from '../../../shared/series/ranges.ts';
import type { BootTally, ExcitationPairs, Stored } from '../../ports.ts';
import { parseLayout, unpackBody } from '../layout.ts';
import { Levels } from './levels.ts';
import { retirePairs } from './pairs.ts';
import { openFile, type Database } from './schema.ts';
import {
  arraysOf,
  emptySummary,
  merge,
  secondsOf,
  seriesOf,
  summarise,
  SUMMARY_FIGURES,
  type SeriesInputs,
} from '../summary.ts';
import { hasFrame, readTally } from './tally.ts';

/** A frame ready to be written: its samples packed by `packBody`. */
export interface PackedFrame {
  readonly node: string;
  readonly boot: string;
  readonly sequenced: boolean;
  readonly seq: number;
  readonly t0: number;
  readonly dt: number;
  readonly count: number;
  readonly arrived: number;
  readonly layout: string;
  readonly body: ArrayBuffer;
}

interface Boot {
  readonly id: number;
  ranges: Ranges;
  frames: number;
  samples: number;
  firstArrived: number;
  lastArrived: number;
  touched: boolean;
}

interface Plan {
  readonly id: number;
  readonly inputs: ReturnType<typeof parseLayout>;
  readonly series: readonly (SeriesInputs & { readonly id: number })[];
}

const FLUSH_FRAMES = 2048;
const FLUSH_SECONDS = 1;

/** The one who writes samples. Synchronous: lives on a thread of its own. */
export class SqliteWriter {
  readonly #database: Database;
  /** null: not said yet. */
  #pairs: ExcitationPairs | null;
  readonly #levels: Levels;
  readonly #statements;
  readonly #nodes = new Map<string, { id: number; longest: number }>();
  readonly #boots = new Map<string, Boot>();
  readonly #plans = new Map<string, Plan>();
  #sinceFlush = 0;
  #flushedAt = -Infinity;

  constructor(folder: string, pairs: ExcitationPairs | null) {
    this.#database = openFile(folder, 'samples');
    this.#pairs = pairs;
    this.#levels = new Levels(this.#database);
    const prepare = (sql: string) => this.#database.prepare(sql);
    this.#statements = {
      frame: prepare(
        'INSERT INTO frame (node, boot, seq, t0, dt, count, arrived, layout, summary) ' +
          'VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?) ON CONFLICT (boot, seq) DO NOTHING',
      ),
      body: prepare('INSERT INTO body VALUES (?, ?)'),
      boot: prepare(
        'UPDATE boot SET ranges = ?, frames = ?, samples = ?, first_arrived = ?, last_arrived = ? ' +
          'WHERE id = ?',
      ),
      longest: prepare('UPDATE node SET longest = ? WHERE id = ?'),
    };
    this.#takeInAgain();
  }

  /** On disk when it returns; on a throw nothing of it is. */
  commit(frames: readonly PackedFrame[]): Stored[] {
    const newest = Math.max(...frames.map(({ arrived }) => arrived));
    this.#sinceFlush += frames.length;
    const flush = this.#sinceFlush >= FLUSH_FRAMES || !(newest - this.#flushedAt < FLUSH_SECONDS);
    try {
      const outcomes = this.#database.transaction(() => {
        const stored = frames.map((frame) => this.#insert(frame));
        this.#saveBoots();
        if (flush) this.#levels.write();
        return stored;
      })();
      if (flush) this.#flushed(newest);
      return outcomes;
    } catch (error) {
      this.#forget();
      throw error;
    }
  }

  follow(pairs: ExcitationPairs): void {
    this.flush();
    this.#pairs = pairs;
    this.#plans.clear();
    this.#retire();
  }

  /** Writes the levels up to the last frame, so that a reader finds everything in them. */
  flush(): void {
    if (this.#levels.isClean) return;
    this.#database.transaction(() => this.#levels.write())();
    this.#flushed(this.#flushedAt);
  }

  has(node: string, boot: string, seq: number): boolean {
    return hasFrame(this.#database, node, boot, seq);
  }

  tally(): BootTally[] {
    return readTally(this.#database);
  }

  close(): void {
    this.flush();
    this.#database.close();
  }

  #insert(frame: PackedFrame): Stored {
    const node = this.#node(frame.node);
    const boot = this.#boot(node.id, frame);
    const plan = this.#plan(node.id, frame);
    const blocks = unpackBody(plan.inputs, new Uint8Array(frame.body), frame.count);
    const stretches = secondsOf(frame.t0, frame.dt, frame.count);
    const summaries = new Float64Array(plan.series.length * SUMMARY_FIGURES);
    const parts = plan.series.map((series, s) => {
      const arrays = arraysOf(blocks, series);
      const whole = emptySummary();
      const bySecond = stretches.map(({ from, to, second }) => {
        const summary = arrays ? summarise(...arrays, from, to) : emptySummary();
        merge(whole, summary);
        return { second, summary };
      });
      summaries.set([whole.min, whole.max, whole.sum, whole.count], s * SUMMARY_FIGURES);
      return { id: series.id, bySecond };
    });
    const { seq, t0, dt, count, arrived } = frame;
    const done = this.#statements.frame.run(
      ...[node.id, boot.id, seq, t0, dt, count, arrived, plan.id, Buffer.from(summaries.buffer)],
    );
    if (done.changes === 0) return 'duplicate';
    const id = Number(done.lastInsertRowid);
    this.#statements.body.run(id, Buffer.from(frame.body));
    for (const part of parts) {
      for (const { second, summary } of part.bySecond) this.#levels.add(part.id, second, summary);
    }
    this.#levels.took(id);
    if (frame.sequenced) boot.ranges = include(boot.ranges, seq);
    boot.frames++;
    boot.samples += count * blocks.length;
    boot.firstArrived = Math.min(boot.firstArrived, arrived);
    boot.lastArrived = Math.max(boot.lastArrived, arrived);
    boot.touched = true;
    const length = dt * count;
    if (length > node.longest) {
      node.longest = length;
      this.#statements.longest.run(length, node.id);
    }
    return 'stored';
  }

  #saveBoots(): void {
    for (const boot of this.#boots.values()) {
      if (!boot.touched) continue;
      const { ranges, frames, samples, firstArrived, lastArrived, id } = boot;
      const text = JSON.stringify(ranges);
      this.#statements.boot.run(text, frames, samples, firstArrived, lastArrived, id);
      boot.touched = false;
    }
  }

  #flushed(at: number): void {
    this.#levels.written();
    this.#sinceFlush = 0;
    this.#flushedAt = at;
  }

  /** After a transaction that came to nothing: what is remembered is read again. */
  #forget(): void {
    this.#nodes.clear();
    this.#boots.clear();
    this.#plans.clear();
    this.#levels.reset();
    this.#takeInAgain();
  }

  /** Frames that are stored but not yet in the levels. */
  #takeInAgain(): void {
    const rows = this.#database
      .prepare(
        'SELECT frame.id, frame.node, t0, dt, count, layout.inputs, layout.pairs, bytes ' +
          'FROM frame JOIN body ON body.id = frame.id JOIN layout ON layout.id = frame.layout ' +
          'WHERE frame.id > ? ORDER BY frame.id',
      )
      .all(this.#levels.levelled) as {
      id: number;
      node: number;
      t0: number;
      dt: number;
      count: number;
      inputs: string;
      pairs: string;
      bytes: Buffer;
    }[];
    for (const row of rows) {
      const layout = parseLayout(row.inputs);
      const blocks = unpackBody(layout, row.bytes, row.count);
      for (const series of seriesOf(layout.inputs, JSON.parse(row.pairs) as SeriesInputs[])) {
        const id = this.#series(row.node, series, row.id);
        const arrays = arraysOf(blocks, series);
        if (!arrays) continue;
        for (const { from, to, second } of secondsOf(row.t0, row.dt, row.count)) {
          this.#levels.add(id, second, summarise(...arrays, from, to));
        }
      }
      this.#levels.took(row.id);
    }
    this.#retire();
  }

  #retire(): void {
    if (this.#pairs) retirePairs(this.#database, (node) => this.#pairsOf(node));
  }

  /** A node may bear the name of something that every object inherits. */
  #pairsOf(node: string): readonly SeriesInputs[] {
    const pairs = this.#pairs ?? {};
    return Object.hasOwn(pairs, node) ? (pairs[node] ?? []) : [];
  }

  #node(name: string): { id: number; longest: number } {
    const known = this.#nodes.get(name);
    if (known) return known;
    this.#database.prepare('INSERT OR IGNORE INTO node (name, longest) VALUES (?, 0)').run(name);
    const row = this.#database.prepare('SELECT id, longest FROM node WHERE name = ?').get(name);
    const node = row as { id: number; longest: number };
    this.#nodes.set(name, node);
    return node;
  }

  #boot(node: number, { boot: name, sequenced, arrived }: PackedFrame): Boot {
    const key = `${node} ${name}`;
    const known = this.#boots.get(key);
    if (known) return known;
    this.#database
      .prepare(`INSERT OR IGNORE INTO boot VALUES (NULL, ?, ?, ?, '[]', 0, 0, ?, ?)`)
      .run(node, name, sequenced ? 1 : 0, arrived, arrived);
    const row = this.#database
      .prepare(
        'SELECT id, ranges, frames, samples, first_arrived AS firstArrived, ' +
          'last_arrived AS lastArrived FROM boot WHERE node = ? AND name = ?',
      )
      .get(node, name) as Omit<Boot, 'ranges' | 'touched'> & { ranges: string };
    const boot: Boot = { ...row, ranges: JSON.parse(row.ranges) as Ranges, touched: false };
    this.#boots.set(key, boot);
    return boot;
  }

  #plan(node: number, { node: name, layout }: PackedFrame): Plan {
    const key = `${node} ${layout}`;
    const known = this.#plans.get(key);
    if (known) return known;
    const inputs = parseLayout(layout);
    const pairs = this.#pairsOf(name);
    const pairsText = JSON.stringify(pairs);
    this.#database
      .prepare('INSERT OR IGNORE INTO layout (inputs, pairs) VALUES (?, ?)')
      .run(layout, pairsText);
    const row = this.#database
      .prepare('SELECT id FROM layout WHERE inputs = ? AND pairs = ?')
      .get(layout, pairsText) as { id: number };
    const next = this.#nextFrame();
    const series = seriesOf(inputs.inputs, pairs).map((one) => ({
      ...one,
      id: this.#series(node, one, next),
    }));
    const plan = { id: row.id, inputs, series };
    this.#plans.set(key, plan);
    return plan;
  }

  #nextFrame(): number {
    const row = this.#database.prepare('SELECT coalesce(max(id), 0) + 1 AS id FROM frame').get();
    return (row as { id: number }).id;
  }

  #series(node: number, { input, over }: SeriesInputs, firstFrame: number): number {
    this.#database
      .prepare('INSERT OR IGNORE INTO series VALUES (NULL, ?, ?, ?, ?)')
      .run(node, input, over ?? '', firstFrame);
    const row = this.#database
      .prepare('SELECT id FROM series WHERE node = ? AND input = ? AND over = ?')
      .get(node, input, over ?? '');
    return (row as { id: number }).id;
  }
}
