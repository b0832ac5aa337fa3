import type { Database } from './schema.ts';
import { emptySummary, merge, type Summary } from '../summary.ts';

/** Buckets of level k are 4^k s wide; the widest is 18 h. */
export const LEVELS = 9;
export const bucketWidth = (k: number): number => 4 ** k;

/** Whole-second buckets not yet written, by series. */
type Pending = Map<number, Map<number, Summary>>;

/**
 * The pyramid of envelopes. Frames are taken in at once and written now and then,
 * in the transaction that also moves the mark of the last frame taken in: after a
 * crash the frames above the mark are taken in again, and each counts once.
 */
export class Levels {
  readonly #database: Database;
  readonly #upsert;
  readonly #mark;
  #pending: Pending = new Map();
  #last = 0;

  constructor(database: Database) {
    this.#database = database;
    this.#upsert = database.prepare(`
      INSERT INTO level VALUES (?, ?, ?, ?, ?, ?, ?)
      ON CONFLICT DO UPDATE SET
        min = min(min, excluded.min), max = max(max, excluded.max),
        sum = sum + excluded.sum, count = count + excluded.count`);
    this.#mark = database.prepare(`UPDATE meta SET value = ? WHERE name = 'levelled'`);
  }

  get levelled(): number {
    const row = this.#database.prepare(`SELECT value FROM meta WHERE name = 'levelled'`).get();
    return (row as { value: number }).value;
  }

  get isClean(): boolean {
    return this.#pending.size === 0;
  }

  add(series: number, second: number, summary: Summary): void {
    if (summary.count === 0) return;
    let seconds = this.#pending.get(series);
    if (!seconds) this.#pending.set(series, (seconds = new Map<number, Summary>()));
    const there = seconds.get(second);
    if (there) merge(there, summary);
    else seconds.set(second, { ...summary });
  }

  took(frame: number): void {
    this.#last = Math.max(this.#last, frame);
  }

  /** Forgets what a transaction that came to nothing had taken in. */
  reset(): void {
    this.#pending = new Map();
    this.#last = 0;
  }

  /** Writes what is pending; inside a transaction of the caller's. */
  write(): void {
    if (this.isClean && this.#last === 0) return;
    for (const [series, seconds] of this.#pending) {
      let buckets = seconds;
      for (let k = 0; k < LEVELS; k++) {
        const wider = new Map<number, Summary>();
        for (const [bucket, summary] of buckets) {
          const { min, max, sum, count } = summary;
          this.#upsert.run(series, k, bucket, min, max, sum, count);
          const above = Math.floor(bucket / 4);
          const into = wider.get(above) ?? emptySummary();
          merge(into, summary);
          wider.set(above, into);
        }
        buckets = wider;
      }
    }
    this.#mark.run(this.#last);
  }

  /** After the transaction that `write` was part of. */
  written(): void {
    this.#pending = new Map();
  }
}
