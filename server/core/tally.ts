import { sampleCount, type Frame, type Refusal } from '../../shared/model/frame.ts';
import type { Site } from '../../shared/model/site.ts';
import type { EpochSeconds } from '../../shared/model/units.ts';
import type { NodeTally, RefusalCount } from '../../shared/protocol/http.ts';
import { contains, highest, include, missing, type Ranges } from '../../shared/series/ranges.ts';
import type { BootTally, Stored } from '../ports.ts';

/** Kept of each, so that a broken or hostile sender cannot grow the server. */
const MOST_STRANGERS = 50;
const MOST_REFUSAL_KINDS = 40;
const MOST_UNASSIGNED = 64;
const OTHERS = '(others)';

/** again: seen before. late: behind a frame seen already, so no news of the present. */
export type Placement = 'next' | 'late' | 'again';

interface Boot {
  ranges: Ranges;
  /** Newest time of an input without sequence numbers. */
  newest: number;
}

interface Entry {
  readonly node: string;
  readonly known: boolean;
  readonly staleAfter: number;
  readonly assigned: ReadonlySet<string>;
  readonly boots: Map<string, Boot>;
  currentBoot: string | null;
  status: NodeTally['status'];
  lastFrameAt: EpochSeconds | null;
  received: number;
  stored: number;
  duplicate: number;
  refused: number;
  samples: number;
  readonly refusals: Map<string, RefusalCount>;
  readonly unassigned: Set<string>;
}

const inputsOfChannels = (site: Site, node: string): Set<string> => {
  const inputs = new Set<string>();
  for (const { members } of site.structures) {
    for (const channel of members.flatMap((m) => m.stations.flatMap((s) => s.channels))) {
      if (channel.kind !== 'measured' || channel.node !== node) continue;
      inputs.add(channel.input);
      for (const { signal } of channel.calibration) {
        if ('excitation' in signal && signal.excitation.kind === 'measured') {
          inputs.add(signal.excitation.input);
        }
      }
    }
  }
  return inputs;
};

/** What came of each node, and what did not: counts, sequence gaps, refusals, silence. */
export class Tally {
  readonly #entries = new Map<string, Entry>();

  constructor(site: Site, boots: readonly BootTally[]) {
    for (const node of site.nodes) {
      this.#add(node.id, true, node.staleAfter, inputsOfChannels(site, node.id));
    }
    for (const boot of [...boots].sort((a, b) => a.firstArrived - b.firstArrived)) {
      const entry = this.#entry(boot.node);
      entry.boots.set(boot.boot, { ranges: boot.sequenced ? boot.ranges : [], newest: -Infinity });
      if (boot.sequenced) entry.currentBoot = boot.boot;
      entry.stored += boot.frames;
      entry.samples += boot.samples;
    }
  }

  /** Goes on with another set-up: nodes may be known now that were not, and the reverse. */
  replan(site: Site): void {
    const nodes = new Map(site.nodes.map((node) => [node.id, node]));
    for (const [name, entry] of this.#entries) {
      const node = nodes.get(name);
      const assigned = node ? inputsOfChannels(site, name) : new Set<string>();
      const [known, staleAfter] = [node !== undefined, node?.staleAfter ?? Infinity];
      entry.unassigned.clear();
      this.#entries.set(name, { ...entry, known, staleAfter, assigned });
    }
    for (const { id, staleAfter } of site.nodes) {
      if (!this.#entries.has(id)) this.#add(id, true, staleAfter, inputsOfChannels(site, id));
    }
  }

  /** Notes that a frame came, and says where it stands among those that came before. */
  place(frame: Frame, arrived: EpochSeconds): Placement {
    const entry = this.#entry(frame.node);
    entry.received++;
    entry.lastFrameAt = arrived;
    for (const { input } of frame.inputs) {
      if (!entry.assigned.has(input) && entry.unassigned.size < MOST_UNASSIGNED) {
        entry.unassigned.add(input);
      }
    }
    let boot = entry.boots.get(frame.boot);
    if (!boot) {
      boot = { ranges: [], newest: -Infinity };
      entry.boots.set(frame.boot, boot);
      if (frame.sequenced) entry.currentBoot = frame.boot;
    }
    if (!frame.sequenced) {
      const late = frame.t0 <= boot.newest;
      boot.newest = Math.max(boot.newest, frame.t0);
      return late ? 'late' : 'next';
    }
    if (contains(boot.ranges, frame.seq)) return 'again';
    const late = frame.boot !== entry.currentBoot || frame.seq < highest(boot.ranges);
    boot.ranges = include(boot.ranges, frame.seq);
    return late ? 'late' : 'next';
  }

  settled(frame: Frame, outcome: Stored): void {
    const entry = this.#entry(frame.node);
    entry[outcome]++;
    if (outcome === 'stored') entry.samples += sampleCount(frame) * frame.inputs.length;
  }

  refused(node: string, refusal: Refusal, at: EpochSeconds): void {
    const entry = this.#entry(node);
    entry.refused++;
    const full = entry.refusals.size >= MOST_REFUSAL_KINDS;
    const key = `${refusal.code} ${refusal.field}`;
    const place = entry.refusals.has(key) || !full ? key : OTHERS;
    const count = (entry.refusals.get(place)?.count ?? 0) + 1;
    entry.refusals.set(place, { ...refusal, count, lastAt: at });
  }

  status(node: string, online: boolean): void {
    this.#entry(node).status = online ? 'online' : 'offline';
  }

  isStale(node: string, now: EpochSeconds): boolean {
    const entry = this.#entry(node);
    return entry.lastFrameAt !== null && now - entry.lastFrameAt > entry.staleAfter;
  }

  report(now: EpochSeconds): NodeTally[] {
    return [...this.#entries.values()].map((entry) => ({
      node: entry.node,
      known: entry.known,
      status: entry.status,
      boot: entry.currentBoot,
      lastFrameAt: entry.lastFrameAt,
      stale: this.isStale(entry.node, now),
      received: entry.received,
      stored: entry.stored,
      duplicate: entry.duplicate,
      missing: [...entry.boots.values()].reduce((sum, boot) => sum + missing(boot.ranges), 0),
      refused: entry.refused,
      refusals: [...entry.refusals.values()],
      unassigned: [...entry.unassigned],
    }));
  }

  #entry(node: string): Entry {
    const found = this.#entries.get(node);
    if (found) return found;
    const strangers = [...this.#entries.values()].filter(({ known }) => !known).length;
    const name = strangers < MOST_STRANGERS ? node : OTHERS;
    return this.#entries.get(name) ?? this.#add(name, false, Infinity, new Set());
  }

  #add(node: string, known: boolean, staleAfter: number, assigned: ReadonlySet<string>): Entry {
    const entry: Entry = {
      node,
      known,
      staleAfter,
      assigned,
      boots: new Map(),
      currentBoot: null,
      status: 'unknown',
      lastFrameAt: null,
      received: 0,
      stored: 0,
      duplicate: 0,
      refused: 0,
      samples: 0,
      refusals: new Map(),
      unassigned: new Set(),
    };
    this.#entries.set(node, entry);
    return entry;
  }
}
