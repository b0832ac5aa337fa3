import { epochSeconds } from '../../../shared/model/units.ts';
import type {
  BootTally,
  Envelope,
  EnvelopeQuery,
  RawRun,
  SampleQuery,
  SampleStore,
  Stored,
  StoredFrame,
  ExcitationPairs,
} from '../../ports.ts';
import type { SeriesInputs } from '../summary.ts';
import {
  bootKey,
  bootPoint,
  isCounted,
  readBoots,
  withFrame,
  type Boot,
  type Boots,
} from './boots.ts';
import { Database, quoted } from './database.ts';
import { readEnvelope } from './envelope.ts';
import { framesIn, samplesOf } from './frames.ts';
import { Lanes } from './lanes.ts';
import { blockPoints, framePoint, rawPoints } from './points.ts';
import { nanosText } from './time.ts';

const keyOf = (node: string, boot: string, seq: number): string => `${node} ${boot} ${seq}`;

/**
 * Samples in an InfluxDB 1.x database, one point each, to be read by anybody.
 * A commit writes frames, samples, blocks, and last the tallies of their boots,
 * which make it count; every point has its own place, so that a commit that is
 * tried again writes the same points again.
 */
class InfluxStore implements SampleStore {
  readonly #database: Database;
  #pairs: ExcitationPairs;
  readonly #lanes: Lanes;
  #boots: Boots;
  #last: Promise<unknown> = Promise.resolve();

  constructor(database: Database, pairs: ExcitationPairs, boots: Boots) {
    this.#database = database;
    this.#pairs = pairs;
    this.#boots = boots;
    this.#lanes = new Lanes(database);
  }

  commit(frames: readonly StoredFrame[]): Promise<readonly Stored[]> {
    const commit = this.#last.then(() => this.#commit(frames));
    this.#last = commit.catch(() => this.#lanes.forget());
    return commit;
  }

  async follow(pairs: ExcitationPairs): Promise<void> {
    this.#pairs = pairs;
  }

  async has(node: string, boot: string, seq: number): Promise<boolean> {
    const entry = this.#boots.get(bootKey(node, boot));
    if (!entry) return false;
    if (entry.sequenced) return isCounted(this.#boots, node, boot, seq);
    return (await this.#readings(node, boot, [seq])).has(seq);
  }

  async tally(): Promise<readonly BootTally[]> {
    return [...this.#boots.values()].map(({ longest: _, newest: __, ...tally }) => tally);
  }

  envelope(query: EnvelopeQuery): Promise<Envelope> {
    return readEnvelope(this.#database, this.#boots, query);
  }

  async samples({ node, input, from, to, atMost }: SampleQuery): Promise<readonly RawRun[]> {
    const all = await framesIn(this.#database, this.#boots, node, from, to);
    const frames = all.filter(({ layout }) => layout.inputs.some((one) => one.input === input));
    const total = frames.reduce((sum, { count }) => sum + count, 0);
    if (total > atMost) {
      throw new RangeError(`samples: expected at most ${atMost} in the window, came ${total}`);
    }
    const found = await samplesOf(this.#database, node, input, frames);
    return frames.flatMap((frame) => {
      const samples = found.get(frame);
      const { boot, t0, dt } = frame;
      return samples ? [{ input, samples, boot, t0: epochSeconds(t0), dt }] : [];
    });
  }

  async close(): Promise<void> {
    await this.#last;
  }

  async #commit(frames: readonly StoredFrame[]): Promise<Stored[]> {
    const known = await this.#knownReadings(frames);
    const seen = new Set<string>();
    const outcomes = frames.map((stored): Stored => {
      const { node, boot, seq, sequenced } = stored.frame;
      const key = keyOf(node, boot, seq);
      const there = sequenced ? isCounted(this.#boots, node, boot, seq) : known.has(key);
      if (there || seen.has(key)) return 'duplicate';
      seen.add(key);
      return 'stored';
    });
    const fresh = frames.filter((_, i) => outcomes[i] === 'stored');
    if (fresh.length > 0) await this.#write(fresh);
    return outcomes;
  }

  async #write(fresh: readonly StoredFrame[]): Promise<void> {
    const lanes = await this.#lanes.assign(fresh, this.#boots);
    const laneOf = (stored: StoredFrame) => lanes.get(stored) ?? 0;
    const pointOf = (stored: StoredFrame) =>
      framePoint(stored, laneOf(stored), this.#pairsOf(stored));
    const touched = new Map<string, Boot>();
    for (const stored of fresh) {
      const key = bootKey(stored.frame.node, stored.frame.boot);
      touched.set(key, withFrame(touched.get(key) ?? this.#boots.get(key), stored));
    }
    await this.#database.write(fresh.filter(({ frame }) => frame.sequenced).map(pointOf));
    await this.#database.write(this.#samplePoints(fresh, laneOf));
    // A single reading counts from its frame on; its tally may lag behind by one commit.
    await this.#database.write([
      ...fresh.filter(({ frame }) => !frame.sequenced).map(pointOf),
      ...[...touched.values()].map(bootPoint),
    ]);
    this.#boots = new Map([...this.#boots, ...touched]);
  }

  /** Made as they are written: a backlog at once is millions. */
  *#samplePoints(fresh: readonly StoredFrame[], laneOf: (stored: StoredFrame) => number) {
    for (const stored of fresh) {
      yield* rawPoints(stored, laneOf(stored));
      yield* blockPoints(stored, laneOf(stored), this.#pairsOf(stored));
    }
  }

  #pairsOf({ frame }: StoredFrame): readonly SeriesInputs[] {
    return Object.hasOwn(this.#pairs, frame.node) ? (this.#pairs[frame.node] ?? []) : [];
  }

  /** Keys of those single readings among `frames` that are in store. */
  async #knownReadings(frames: readonly StoredFrame[]): Promise<Set<string>> {
    const byBoot = new Map<string, { node: string; boot: string; seqs: number[] }>();
    for (const { node, boot, seq, sequenced } of frames.map(({ frame }) => frame)) {
      if (sequenced) continue;
      const entry = byBoot.get(bootKey(node, boot)) ?? { node, boot, seqs: [] };
      entry.seqs.push(seq);
      byBoot.set(bootKey(node, boot), entry);
    }
    const known = new Set<string>();
    for (const { node, boot, seqs } of byBoot.values()) {
      for (const seq of await this.#readings(node, boot, seqs)) {
        known.add(keyOf(node, boot, seq));
      }
    }
    return known;
  }

  /** Which of a boot's single readings are in store; their seq is their time in µs (see Frame). */
  async #readings(node: string, boot: string, seqs: readonly number[]): Promise<Set<number>> {
    const [from, to] = [Math.min(...seqs) / 1e6 - 1, Math.max(...seqs) / 1e6 + 1];
    const groups = await this.#database.select(
      `SELECT "seq" FROM "frame" WHERE "node" = ${quoted(node)} AND "boot" = ${quoted(boot)} ` +
        `AND time >= ${nanosText(from)} AND time <= ${nanosText(to)}`,
    );
    return new Set(groups.flatMap(({ rows }) => rows.map(([, seq]) => Number(seq))));
  }
}

/**
 * Opens `influx+http://host:port/database` (https too), makes the database if it
 * is not there. Rejects if it cannot be reached.
 */
export const openInfluxStore = async (
  url: string,
  pairs: ExcitationPairs = {},
): Promise<SampleStore> => {
  const database = new Database(url);
  await database.create();
  return new InfluxStore(database, pairs, await readBoots(database));
};
