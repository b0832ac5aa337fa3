import type { Limit, LimitContext } from '../../shared/model/limit.ts';
import {
  channelsOf,
  type Channel,
  type Member,
  type Site,
  type Station,
  type Structure,
} from '../../shared/model/site.ts';
import { pascal, strain, type Pascal, type Share } from '../../shared/model/units.ts';
import { sourcesOf } from '../../shared/model/virtual.ts';
import { limitContextOf } from '../../shared/pipeline/index.ts';
import { stressOf, utilisation } from '../../shared/pipeline/4-stress/stress.ts';
import {
  shareOfThreshold,
  thresholdOf,
  type Threshold,
} from '../../shared/pipeline/5-alarm/threshold.ts';

/** A channel with all that does not change while it is watched. */
export interface ChannelFacts {
  /** Place among the site's channels, in site order. */
  readonly index: number;
  readonly channel: Channel;
  readonly member: Member;
  readonly station: Station;
  readonly structure: Structure;
  readonly context: LimitContext;
  /** Without a frame of its node for so long it is stale, s. */
  readonly staleAfter: number;
}

export const channelFacts = (site: Site): ChannelFacts[] => {
  const structureOf = new Map(
    site.structures.flatMap((structure) => structure.members.map((m) => [m, structure] as const)),
  );
  const channels = new Map(channelsOf(site).map(({ channel }) => [channel.id, channel]));
  const nodesOf = (channel: Channel): readonly string[] =>
    channel.kind === 'measured'
      ? [channel.node]
      : sourcesOf(channel.definition).flatMap((id) => {
          const source = channels.get(id);
          return source ? nodesOf(source) : [];
        });
  const staleAfter = new Map<string, number>(site.nodes.map((n) => [n.id, n.staleAfter]));
  return channelsOf(site).flatMap(({ channel, member, station }, index) => {
    const structure = structureOf.get(member);
    return structure
      ? {
          ...{ index, channel, member, station, structure },
          context: limitContextOf(channel, member, site),
          staleAfter: nodesOf(channel)
            .map((node) => staleAfter.get(node) ?? Infinity)
            .reduce((most, one) => Math.max(most, one), 0),
        }
      : [];
  });
};

export const placesById = (facts: readonly ChannelFacts[]): ReadonlyMap<string, number> =>
  new Map(facts.map(({ channel, index }) => [channel.id, index]));

/** What a channel is judged by at present. */
export interface Bounds {
  readonly caution: Threshold | null;
  readonly stop: Threshold | null;
}

export const boundsOf = (limits: readonly Limit[], context: LimitContext): Bounds => {
  const at = (level: Limit['level']) => {
    const limit = limits.find((candidate) => candidate.level === level);
    return limit ? thresholdOf(limit, context) : null;
  };
  return { caution: at('caution'), stop: at('stop') };
};

/** Normal or shear stress, tension positive; null for what is no strain. */
export const stressAt = (value: number, { stressPerStrain }: LimitContext): Pascal | null =>
  stressPerStrain === null ? null : stressOf(strain(value), stressPerStrain);

/** Share of yield; null for what is no strain. */
export const utilisationAt = (value: number, context: LimitContext): Share | null => {
  const stress = stressAt(value, context);
  return stress === null || context.yieldStrength === null
    ? null
    : utilisation(stress, pascal(context.yieldStrength));
};

/** Share of the way to the stop limit; NaN if the channel has none. */
export const shareOfStop = (value: number, { stop }: Bounds): number =>
  stop === null ? NaN : shareOfThreshold(value, stop);

/** 1 is all of it; both N, the load's sign kept. */
export const shareOfSafeWorkingLoad = (load: number, safeWorkingLoad: number): number =>
  load / safeWorkingLoad;

/** The value at which a two-sided bar is full: the stop limit, or yield where there is none. */
export const fullBar = ({ stop }: Bounds, context: LimitContext): number => {
  if (stop !== null) return stop.raise;
  const { stressPerStrain, yieldStrength } = context;
  return stressPerStrain === null || yieldStrength === null ? NaN : yieldStrength / stressPerStrain;
};
