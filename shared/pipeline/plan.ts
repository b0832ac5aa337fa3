/** A checked site to all that is worked out once for it. */
import type { BridgeResponse, ZeroRecord } from '../model/calibration.ts';
import { apply, compose, type FractionalLinear } from '../model/fractional-linear.ts';
import { inForce, type InForce } from '../model/in-force.ts';
import type { LimitContext } from '../model/limit.ts';
import {
  channelsOf,
  type Channel,
  type Material,
  type MeasuredChannel,
  type Member,
  type Site,
  type VirtualChannel,
} from '../model/site.ts';
import { ratio, type Celsius, type Share } from '../model/units.ts';
import { sourcesOf } from '../model/virtual.ts';
import { excitationInput, signalMap } from './2-ratio/signal.ts';
import { bridgeStrain, linearValue } from './3-strain/bridge.ts';
import { thermalMap } from './3-strain/thermal-output.ts';
import { stressPerStrain, yieldFor } from './4-stress/stress.ts';
import type { Range } from './convert.ts';
import { evaluation, type CompileExpression, type Evaluate } from './evaluation.ts';

/** Records made ready: raw figure (over excitation, if measured) → channel's SI value. */
export interface Conversion extends InForce {
  readonly excitation: string | null;
  /** As if at the temperature of the zero state. */
  readonly map: FractionalLinear;
  /** null: not put right for temperature. */
  readonly correction: Correction | null;
}

interface Correction {
  /** Id of the channel whose temperature it is. */
  readonly channel: string;
  readonly at: (temperature: Celsius) => FractionalLinear;
}

/** A channel with what is worked out once for it, whether measured or virtual. */
export interface PlannedChannel {
  /** Place among the site's channels, in site order. */
  readonly index: number;
  readonly channel: Channel;
  readonly member: Member;
  readonly context: LimitContext;
  /** Ids of the nodes that it comes from. */
  readonly nodes: readonly string[];
}

export interface ChannelPlan extends PlannedChannel {
  readonly channel: MeasuredChannel;
  readonly conversions: readonly Conversion[];
  readonly range: Range;
  readonly excitationRange: (input: string) => Range;
}

export interface VirtualPlan extends PlannedChannel {
  readonly channel: VirtualChannel;
  /** Places of the channels that it comes from, in the order of its definition. */
  readonly sources: readonly number[];
  readonly evaluate: Evaluate;
}

export interface SitePlan {
  /** In site order. */
  readonly channels: readonly PlannedChannel[];
  readonly measured: readonly ChannelPlan[];
  /** Each after those that it comes from. */
  readonly virtual: readonly VirtualPlan[];
  /** Measured channels that read an input, by node and input. */
  readonly readers: ReadonlyMap<string, ReadonlyMap<string, readonly ChannelPlan[]>>;
}

export const conversionOf = (governing: InForce): Conversion => {
  const { record, zero } = governing;
  const { signal, response } = record;
  const toSignal = signalMap(signal);
  const own = zero === null ? response.zero : apply(toSignal, zero.raw);
  const toValue =
    response.kind === 'bridge'
      ? bridgeStrain({ ...response, zero: ratio(own) })
      : linearValue({ ...response, zero: own });
  const correction = response.kind === 'bridge' ? correctionOf(response, zero) : null;
  return {
    ...governing,
    excitation: excitationInput(signal),
    map: compose(toSignal, toValue),
    correction,
  };
};

const correctionOf = (response: BridgeResponse, zero: ZeroRecord | null): Correction | null => {
  const { temperature, gaugeFactor } = response;
  if (!temperature) return null;
  const zeroAt = zero?.temperature ?? temperature.zeroAt;
  const gauge = { ...temperature, gaugeFactor };
  return {
    channel: temperature.channel,
    at: (t) => thermalMap(gauge, gaugeFactor, zeroAt, t),
  };
};

export const conversionsOf = ({ calibration, zeros }: MeasuredChannel): readonly Conversion[] =>
  inForce(calibration, zeros).map(conversionOf);

/** A strain in any direction of a rosette, or one that no stress belongs to. */
const isBareStrain = (channel: Channel): boolean =>
  channel.kind === 'virtual' &&
  channel.measurand === 'strain' &&
  !['mean', 'difference'].includes(channel.definition.kind);

const isShearStress = (channel: Channel): boolean =>
  channel.kind === 'virtual' &&
  channel.definition.kind === 'rosette' &&
  channel.definition.quantity.startsWith('shear-stress');

export const limitContextFor = (
  channel: Channel,
  material: Material,
  highestLimit: Share,
): LimitContext => {
  const { measurand } = channel;
  const bare = isBareStrain(channel);
  return {
    measurand,
    stressPerStrain: bare ? null : stressPerStrain(measurand, material),
    yieldStrength: bare ? null : yieldFor(isShearStress(channel) ? 'shear' : measurand, material),
    highestLimit,
  };
};

export const limitContextOf = (channel: Channel, member: Member, site: Site): LimitContext =>
  limitContextFor(channel, member.material, site.highestLimit);

const measuredPlans = (site: Site): ChannelPlan[] => {
  const ranges = new Map(
    site.nodes.map((node) => [node.id, new Map(node.inputs.map((i) => [i.name, i.range]))]),
  );
  const rangeOf = (node: string, input: string): Range => ranges.get(node)?.get(input) ?? null;
  return channelsOf(site).flatMap(({ channel, member }, index): ChannelPlan[] =>
    channel.kind === 'virtual'
      ? []
      : [
          {
            ...{ index, channel, member, nodes: [channel.node] },
            context: limitContextOf(channel, member, site),
            conversions: conversionsOf(channel),
            range: rangeOf(channel.node, channel.input),
            excitationRange: (input) => rangeOf(channel.node, input),
          },
        ],
  );
};

/** Kt by the last record of a measured channel; 0 for a virtual one. */
const transverseOf = ({ channel }: PlannedChannel): number => {
  if (channel.kind === 'virtual') return 0;
  const response = inForce(channel.calibration, channel.zeros).at(-1)?.record.response;
  return response?.kind === 'bridge' ? response.transverseSensitivity : 0;
};

/** In the order in which they can be worked out; those of a circle are left out. */
const virtualPlans = (
  site: Site,
  measured: readonly ChannelPlan[],
  compile: CompileExpression,
): VirtualPlan[] => {
  const known = new Map<string, PlannedChannel>(measured.map((plan) => [plan.channel.id, plan]));
  const plans: VirtualPlan[] = [];
  let waiting = channelsOf(site).flatMap(({ channel, member }, index) =>
    channel.kind === 'virtual' ? [{ channel, member, index }] : [],
  );
  for (let before = Infinity; waiting.length < before;) {
    before = waiting.length;
    waiting = waiting.filter(({ channel, member, index }) => {
      const found = sourcesOf(channel.definition).map((id) => known.get(id));
      const sources = found.flatMap((source) => source ?? []);
      if (sources.length < found.length) return true;
      const plan: VirtualPlan = {
        ...{ index, channel, member },
        context: limitContextOf(channel, member, site),
        nodes: [...new Set(sources.flatMap(({ nodes }) => nodes))],
        sources: sources.map((source) => source.index),
        evaluate: evaluation(channel, member, sources.map(transverseOf), compile),
      };
      known.set(channel.id, plan);
      plans.push(plan);
      return false;
    });
  }
  return plans;
};

export const planSite = (site: Site, compile: CompileExpression): SitePlan => {
  const measured = measuredPlans(site);
  const virtual = virtualPlans(site, measured, compile);
  const channels = [...measured, ...virtual].sort((a, b) => a.index - b.index);
  const readers = new Map<string, Map<string, ChannelPlan[]>>();
  for (const plan of measured) {
    const inputs = readers.get(plan.channel.node) ?? new Map<string, ChannelPlan[]>();
    readers.set(plan.channel.node, inputs);
    inputs.set(plan.channel.input, [...(inputs.get(plan.channel.input) ?? []), plan]);
  }
  return { channels, measured, virtual, readers };
};
