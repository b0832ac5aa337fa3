import type { ChannelBlock } from '../../shared/model/block.ts';
import type { AlarmEvent, Limit, LimitLevel } from '../../shared/model/limit.ts';
import type { EpochSeconds } from '../../shared/model/units.ts';
import {
  evaluate,
  UNSEEN,
  type Crossing,
  type LimitState,
} from '../../shared/pipeline/5-alarm/evaluate.ts';
import { thresholdOf, type Threshold } from '../../shared/pipeline/5-alarm/threshold.ts';
import type { PlannedChannel } from '../../shared/pipeline/index.ts';
import type { AlarmList } from '../../shared/protocol/http.ts';

const RECENT = 200;
const LEVELS: readonly LimitLevel[] = ['stop', 'caution'];

interface Watch {
  readonly threshold: Threshold;
  state: LimitState;
  /** Of late frames: what they raise and return stands in the past, not in the present. */
  late: LimitState;
}

const eventOf = (
  id: string,
  { threshold }: Watch,
  crossing: Crossing,
  late: boolean,
): AlarmEvent => ({
  id: `${id}/${threshold.level}/${crossing.kind}/${Math.round(crossing.at * 1e6)}`,
  channel: id,
  level: threshold.level,
  ...crossing,
  threshold: Math.sign(crossing.value) * threshold.raise,
  late,
});

/** The alarm stage with its memory: every sample of every channel against the limits in force. */
export class AlarmKeeper {
  #channels: readonly PlannedChannel[];
  #watches: Watch[][];
  readonly #active = new Map<string, AlarmEvent>();
  #recent: AlarmEvent[];

  /** `last`: the last event of each channel and level, late ones left out; `recent`: newest first. */
  constructor(
    channels: readonly PlannedChannel[],
    limits: Readonly<Record<string, readonly Limit[]>>,
    last: readonly AlarmEvent[],
    recent: readonly AlarmEvent[],
  ) {
    this.#channels = channels;
    this.#recent = recent.slice(0, RECENT);
    for (const event of last) this.#note(event);
    this.#watches = channels.map((plan) => this.#watch(plan, limits[plan.channel.id] ?? []));
  }

  /** Puts a channel's limits in force from the next sample on; gives what ends thereby. */
  setLimits(plan: PlannedChannel, limits: readonly Limit[], at: EpochSeconds): AlarmEvent[] {
    const dropped = (this.#watches[plan.index] ?? []).filter(
      ({ threshold, state }) =>
        state.phase === 'raised' && !limits.some(({ level }) => level === threshold.level),
    );
    const ended = dropped.flatMap((watch) => {
      const raised = this.#active.get(`${plan.channel.id}/${watch.threshold.level}`);
      if (!raised) return [];
      const returned = { kind: 'returned', at, value: raised.value } as const;
      return [eventOf(plan.channel.id, watch, returned, false)];
    });
    for (const event of ended) this.#note(event);
    this.#watches[plan.index] = this.#watch(plan, limits);
    return ended;
  }

  /** Goes on with another set-up; gives what ends with channels and limits that are gone. */
  replan(
    channels: readonly PlannedChannel[],
    limits: Readonly<Record<string, readonly Limit[]>>,
    at: EpochSeconds,
  ): AlarmEvent[] {
    const ended = this.#channels.flatMap((plan) =>
      this.setLimits(plan, limits[plan.channel.id] ?? [], at),
    );
    this.#channels = channels;
    this.#watches = channels.map((plan) => this.#watch(plan, limits[plan.channel.id] ?? []));
    return ended;
  }

  accept(blocks: readonly ChannelBlock[], late: boolean): AlarmEvent[] {
    const events: AlarmEvent[] = [];
    for (const block of blocks) {
      for (const watch of this.#watches[block.channel] ?? []) {
        const result = evaluate(late ? watch.late : watch.state, block, watch.threshold);
        if (late) watch.late = result.state;
        else watch.state = result.state;
        for (const crossing of result.crossings) {
          const id = this.#channels[block.channel]?.channel.id ?? '';
          events.push(eventOf(id, watch, crossing, late));
        }
      }
    }
    for (const event of events) {
      if (late) this.#remember(event);
      else this.#note(event);
    }
    return events;
  }

  list(): AlarmList {
    const active = [...this.#active.values()]
      .map((raised) => ({ channel: raised.channel, level: raised.level, raised }))
      .sort(
        (a, b) => LEVELS.indexOf(a.level) - LEVELS.indexOf(b.level) || b.raised.at - a.raised.at,
      );
    return { active, recent: this.#recent };
  }

  #watch(plan: PlannedChannel, limits: readonly Limit[]): Watch[] {
    return limits.map((limit) => {
      const raised = this.#active.get(`${plan.channel.id}/${limit.level}`);
      const state: LimitState = raised ? { phase: 'raised', since: raised.at } : UNSEEN;
      return { threshold: thresholdOf(limit, plan.context), state, late: UNSEEN };
    });
  }

  #note(event: AlarmEvent): void {
    const key = `${event.channel}/${event.level}`;
    if (event.kind === 'raised') this.#active.set(key, event);
    else this.#active.delete(key);
    this.#remember(event);
  }

  #remember(event: AlarmEvent): void {
    if (this.#recent.some(({ id }) => id === event.id)) return;
    // In its own time: what comes late may be older than all that is at hand.
    const older = this.#recent.findIndex(({ at }) => at <= event.at);
    const place = older < 0 ? this.#recent.length : older;
    this.#recent = this.#recent.toSpliced(place, 0, event).slice(0, RECENT);
  }
}
