import type { StoredFrame } from '../../ports.ts';
import { bootKey, spanOf, type Boot, type Boots } from './boots.ts';
import type { Database } from './database.ts';
import { framesOfBoot } from './frames.ts';

interface Taken {
  readonly seq: number;
  readonly lane: number;
  readonly from: number;
  readonly to: number;
}

const laneFor = (taken: readonly Taken[], seq: number, from: number, to: number): number => {
  const again = taken.find((one) => one.seq === seq);
  if (again) return again.lane;
  const used = new Set(
    taken.filter((one) => one.from <= to && one.to >= from).map(({ lane }) => lane),
  );
  let lane = 0;
  while (used.has(lane)) lane++;
  return lane;
};

/**
 * A lane for each frame, such that frames of a boot that overlap in time have
 * different ones: points are known by their time, and none must overwrite
 * another. Frames written but not counted (the server died) keep their lane.
 */
export class Lanes {
  readonly #database: Database;
  /** Boots whose uncounted frames, if there are any, have been looked at. */
  readonly #clean = new Set<string>();

  constructor(database: Database) {
    this.#database = database;
  }

  /** After a write that failed: what of it is there is not known. */
  forget(): void {
    this.#clean.clear();
  }

  async assign(frames: readonly StoredFrame[], boots: Boots): Promise<Map<StoredFrame, number>> {
    const lanes = new Map<StoredFrame, number>();
    const byBoot = new Map<string, StoredFrame[]>();
    for (const stored of frames) {
      const key = bootKey(stored.frame.node, stored.frame.boot);
      byBoot.set(key, [...(byBoot.get(key) ?? []), stored]);
    }
    for (const [key, list] of byBoot) {
      const taken = await this.#taken(key, list, boots.get(key));
      for (const stored of list) {
        const { seq, t0 } = stored.frame;
        const to = t0 + spanOf(stored);
        const lane = laneFor(taken, seq, t0, to);
        taken.push({ seq, lane, from: t0, to });
        lanes.set(stored, lane);
      }
      this.#clean.add(key);
    }
    return lanes;
  }

  async #taken(key: string, list: readonly StoredFrame[], boot: Boot | undefined) {
    const from = Math.min(...list.map(({ frame }) => frame.t0));
    if (this.#clean.has(key) && from > (boot?.newest ?? -Infinity)) return [];
    const [first] = list;
    if (!first) return [];
    const to = Math.max(...list.map((stored) => stored.frame.t0 + spanOf(stored)));
    const longest = Math.max(boot?.longest ?? 0, ...list.map(spanOf));
    const { node, boot: name } = first.frame;
    const there = await framesOfBoot(this.#database, node, name, longest, from, to);
    return there.map(({ seq, lane, t0, dt, count }): Taken => ({
      ...{ seq, lane: Number(lane), from: t0, to: t0 + (count - 1) * dt },
    }));
  }
}
