import type { Limit } from '../../shared/model/limit.ts';
import { accept, refuse } from '../../shared/model/frame.ts';
import type { Site } from '../../shared/model/site.ts';
import { limitFaults } from '../../shared/pipeline/5-alarm/check-limits.ts';
import type { PlannedChannel, SitePlan } from '../../shared/pipeline/index.ts';
import { MOST_POINTS } from '../../shared/protocol/parse.ts';
import type { Fault, Health, LimitsRequest } from '../../shared/protocol/http.ts';
import type { Clock, Core, Feed, RecordStore, SampleStore } from '../ports.ts';
import type { AlarmKeeper } from './alarms.ts';
import { pastOf } from './virtual-history.ts';
import type { PresentValues } from './present.ts';
import type { Tally } from './tally.ts';
import { textFaults } from './text-faults.ts';

export interface CoreParts {
  readonly site: () => Site;
  /** Of the set-up. */
  readonly revision: () => number;
  readonly plan: SitePlan;
  readonly samples: SampleStore;
  readonly records: Pick<RecordStore, 'addAlarmEvents' | 'addLimitChange'>;
  readonly tally: Tally;
  readonly alarms: AlarmKeeper;
  readonly present: PresentValues;
  readonly feed: Feed;
  readonly clock: Clock;
  readonly health: () => Health;
  readonly limits: Map<string, readonly Limit[]>;
}

/** Answers what screens and scripts ask, and takes what they change. */
export const createCore = (parts: CoreParts): Core => {
  const { site, plan, samples, records, tally, alarms, present, feed, clock, limits } = parts;
  const planOf = (id: string): PlannedChannel | undefined =>
    plan.channels.find(({ channel }) => channel.id === id);
  const values = () => present.values((node) => tally.isStale(node, clock.now()));

  const setLimits = async (id: string, request: LimitsRequest): Promise<readonly Fault[]> => {
    const channel = planOf(id);
    if (!channel) return [{ path: 'channel', expected: 'a channel of the site', came: id }];
    const faults = [
      ...limitFaults(request.limits, channel.context),
      ...textFaults('/author', request.author),
      ...textFaults('/reason', request.reason),
    ];
    if (faults.length > 0) return faults;
    const at = clock.now();
    await records.addLimitChange({ channel: id, at, ...request });
    limits.set(id, request.limits);
    const ended = alarms.setLimits(channel, request.limits, at);
    if (ended.length > 0) await records.addAlarmEvents(ended);
    feed.limits(id, request.limits);
    feed.alarms(alarms.list());
    return [];
  };

  const core: Core = {
    site,
    health: parts.health,
    values,
    alarms: () => alarms.list(),
    tally: () => tally.report(clock.now()),
    limits: () => Object.fromEntries(limits),
    setLimits,
    snapshot: () => ({
      now: clock.now(),
      revision: parts.revision(),
      health: parts.health(),
      values: values(),
      alarms: alarms.list(),
      nodes: tally.report(clock.now()),
      limits: Object.fromEntries(limits),
    }),
    history: async (id, from, to, points) => {
      const channel = planOf(id);
      if (!channel) return refuse('unknown-channel', 'channel', 'a channel of the site', id);
      if (!(from < to)) return refuse('window', 'to', `after from (${from})`, String(to));
      if (!(Number.isInteger(points) && points >= 1 && points <= MOST_POINTS)) {
        return refuse('points', 'points', `a whole number, 1 to ${MOST_POINTS}`, String(points));
      }
      const envelope = await pastOf({ store: samples, plan }, channel, from, to, points);
      return accept({ channel: id, simulated: site().simulated, from, to, ...envelope });
    },
  };
  return core;
};
