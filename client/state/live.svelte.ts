import { isBelieved } from '../../shared/model/block.ts';
import { fetchHistory } from '../feed/api.ts';
import { openLive } from '../feed/live.ts';
import type { Limit } from '../../shared/model/limit.ts';
import type { AlarmList, Health, NodeTally } from '../../shared/protocol/http.ts';
import type { LiveValue, Snapshot } from '../../shared/protocol/socket.ts';
import {
  boundsOf,
  placesById,
  shareOfStop,
  type Bounds,
  type ChannelFacts,
} from './channel-facts.ts';
import { Listeners } from './listeners.ts';
import { holdShares, ladderOrder } from './ladder.ts';
import { paced } from './pace.ts';
import { Values, type Reading } from './values.ts';

export type Connection = 'connecting' | 'live' | 'lost';

/** Drawn figures: at most so often, s. Bars and lines at the display rate, text as fast as read. */
const DRAW_GAP = 0.05;
const TEXT_GAP = 0.25;
/** Questions to the server at a time. */
const AT_A_TIME = 4;

const steady = (): number => performance.now() / 1e3;
const wall = (): number => Date.now() / 1e3;

const NO_BOUNDS: Bounds = { caution: null, stop: null };

/** What the server says, as it says it. Samples stay outside reactivity; `beat` and `pulse` say when to look. */
export class LiveState {
  connection = $state<Connection>('connecting');
  /** When the connection was lost, by the server's clock, s. */
  lostAt = $state<number | null>(null);
  /** The server's clock, to the second. */
  now = $state(wall());
  /** Moves with every drawing. */
  beat = $state(0);
  /** Moves as often as a figure can be read. */
  pulse = $state(0);
  alarms = $state.raw<AlarmList>({ active: [], recent: [] });
  nodes = $state.raw<readonly NodeTally[]>([]);
  health = $state.raw<Health | null>(null);
  limits = $state.raw<Readonly<Record<string, readonly Limit[]>>>({});
  /** Channels by how near they are to their stop limit, nearest first. */
  ladder = $state.raw<readonly number[]>([]);
  /** Since when least and greatest are kept, by the server's clock, s. */
  extremesSince = $state(wall());

  readonly facts: readonly ChannelFacts[];
  readonly values: Values;
  readonly #index: ReadonlyMap<string, number>;
  readonly #held: Float64Array;
  readonly #shares: Float64Array;
  /** Server's clock less ours, s. */
  #ahead = 0;
  #pulsed = -Infinity;
  readonly #taps = new Listeners<LiveValue>();
  readonly #resumed = new Listeners<void>();
  readonly #bounds = $derived.by(() =>
    this.facts.map(({ channel, context }) =>
      boundsOf(this.limits[channel.id] ?? channel.limits, context),
    ),
  );
  readonly #draw: () => void;

  constructor(facts: readonly ChannelFacts[]) {
    this.facts = facts;
    this.values = new Values(facts.map(({ staleAfter }) => staleAfter));
    this.#index = placesById(facts);
    this.#held = new Float64Array(facts.length).fill(NaN);
    this.#shares = new Float64Array(facts.length).fill(NaN);
    this.#draw = paced(
      DRAW_GAP,
      (now) => this.#frame(now),
      steady,
      (call) => void requestAnimationFrame(call),
      (seconds, call) => void setTimeout(call, seconds * 1e3),
    );
  }

  serverNow(): number {
    return wall() + this.#ahead;
  }

  indexOf(id: string): number | undefined {
    return this.#index.get(id);
  }

  bounds(index: number): Bounds {
    return this.#bounds[index] ?? NO_BOUNDS;
  }

  /** As it stands now; not reactive: read `beat` or `pulse` beside it. */
  read(index: number): Reading {
    return this.values.read(index, steady());
  }

  /** Hears of every live value; the returned function ends it. */
  tap(hear: (value: LiveValue) => void): () => void {
    return this.#taps.add(hear);
  }

  /** Told when a connection that was lost is back. */
  onResumed(call: () => void): () => void {
    return this.#resumed.add(call);
  }

  forgetExtremes(): void {
    this.values.forgetExtremes();
    this.extremesSince = this.serverNow();
    this.pulse++;
  }

  /** Connects; the returned function ends it. */
  open(): () => void {
    const close = openLive({
      disconnected: () => {
        this.lostAt ??= this.serverNow();
        this.connection = 'lost';
      },
      snapshot: (snapshot) => {
        if (this.#knows(snapshot.values)) this.#restate(snapshot);
        else location.reload();
      },
      live: (values) => this.#accept(values),
      alarms: (list) => (this.alarms = list),
      nodes: (nodes) => (this.nodes = nodes),
      limits: (channel, limits) => (this.limits = { ...this.limits, [channel]: limits }),
      health: (health) => (this.health = health),
      outdated: () => location.reload(),
    });
    const ticking = setInterval(() => {
      this.now = this.serverNow();
      this.#draw();
    }, 1000);
    return () => {
      clearInterval(ticking);
      close();
    };
  }

  #accept(values: readonly LiveValue[]): void {
    const heard = steady();
    for (const value of values) {
      this.values.accept(value, heard);
      this.#taps.tell(value);
    }
    this.#draw();
  }

  /** Live values name channels by their place: with other channels than these all would be wrong. */
  #knows(values: Snapshot['values']): boolean {
    const { facts } = this;
    return (
      values.length === facts.length && values.every((v, i) => v.channel === facts[i]?.channel.id)
    );
  }

  #restate({ now, health, values, alarms, nodes, limits }: Snapshot): void {
    this.#ahead = now - wall();
    this.now = now;
    this.health = health;
    this.alarms = alarms;
    this.nodes = nodes;
    this.limits = limits;
    const heard = steady();
    for (const value of values) {
      const index = this.#index.get(value.channel);
      if (index === undefined) continue;
      this.values.restate(index, value, value.quality === 'stale' ? -Infinity : heard);
    }
    const { lostAt } = this;
    this.lostAt = null;
    this.connection = 'live';
    this.#draw();
    if (lostAt === null) {
      this.extremesSince = now;
      return;
    }
    void this.#catchUp(lostAt, now);
    this.#resumed.tell();
  }

  /** Least and greatest of what was missed: one point of history a channel. */
  async #catchUp(from: number, to: number): Promise<void> {
    const begin = Math.max(from - 1, this.extremesSince);
    if (!(begin < to)) return;
    const waiting = [...this.facts];
    const next = async (): Promise<void> => {
      for (let facts = waiting.pop(); facts; facts = waiting.pop()) {
        const answer = await fetchHistory(facts.channel.id, begin, to, 1);
        if (!answer.ok) continue;
        const { min, max } = answer.value;
        const { index } = facts;
        min.forEach((low, i) => this.values.widen(index, low ?? NaN, max[i] ?? NaN));
      }
    };
    await Promise.all(Array.from({ length: AT_A_TIME }, next));
    this.#draw();
  }

  #frame(now: number): void {
    this.beat++;
    if (now - this.#pulsed < TEXT_GAP) return;
    this.#pulsed = now;
    this.pulse++;
    // A ladder that is not live stays as it last stood.
    if (this.connection !== 'live') return;
    for (const { index } of this.facts) {
      const { value, quality } = this.values.read(index, now);
      const judged = value !== null && isBelieved(quality);
      this.#shares[index] = judged ? shareOfStop(value, this.bounds(index)) : NaN;
    }
    if (holdShares(this.#held, this.#shares)) this.ladder = ladderOrder(this.#held);
  }
}
