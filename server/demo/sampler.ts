import type { InputBlock } from '../../shared/model/frame.ts';
import type { FieldNode, NodeInput } from '../../shared/model/site.ts';
import { strain, type EpochSeconds, type Strain, type Volt } from '../../shared/model/units.ts';
import type { ChannelPlan, SitePlan } from '../../shared/pipeline/index.ts';
import {
  acquisitionOf,
  converted,
  railFigure,
  rawFigure,
  samplesFor,
  supplyAt,
  type Acquisition,
} from './acquisition.ts';
import type { FaultRequest } from './fault-request.ts';
import { bumpedLoad, nextSlip, sunWarmth } from './faults.ts';
import { influenceOf, type Influence } from './influence.ts';
import { programmeLoad } from './programme.ts';
import { normalRandom, type Random } from './random.ts';

export interface Sampler {
  /** The node's inputs, `count` samples from `t0` on, `dt` s apart; called in order of time. */
  block(t0: EpochSeconds, dt: number, count: number): readonly InputBlock[];
  /** Begins a fault at a time, or ends all of them. */
  play(request: FaultRequest, at: EpochSeconds): void;
  /** Lays the node's shunt across an input's bridge for so long from `at` on, 0: takes it off; false: there is none. */
  shunt(input: string, at: EpochSeconds, seconds: number): boolean;
}

interface Feeling {
  readonly influence: Influence;
  readonly acquisition: Acquisition;
}

/** The steel's slow swing about its rest, K over s. */
const [STEEL_SWING, STEEL_PERIOD] = [1.5, 3600];
/** Standard deviation of the measured excitation, V. */
const SUPPLY_NOISE = 20e-6;

const feelingOf = (plan: ChannelPlan, at: EpochSeconds): Feeling | null => {
  const { channel, member } = plan;
  const station = member.stations.find(({ channels }) => channels.includes(channel));
  const influence = station ? influenceOf(channel, member, station) : null;
  const acquisition = acquisitionOf(plan, at);
  return influence && acquisition ? { influence, acquisition } : null;
};

/**
 * What one node of the demo's site measures: the lift's mechanics at each channel, noise, the
 * exact forward of its calibration, the converter. Depends on time and chance given alone.
 */
export const createSampler = (options: {
  readonly plan: SitePlan;
  readonly node: FieldNode;
  /** When the load programme began. */
  readonly begin: EpochSeconds;
  readonly random: Random;
}): Sampler => {
  const { plan, node, begin } = options;
  const normal = normalRandom(options.random);
  const readers = plan.readers.get(node.id);
  const feelings = new Map<string, Feeling>();
  const supplies = new Set<string>();
  for (const { name } of node.inputs) {
    const reader = readers?.get(name)?.[0];
    const feeling = reader ? feelingOf(reader, begin) : null;
    if (feeling) feelings.set(name, feeling);
    if (feeling?.acquisition.excitation) supplies.add(feeling.acquisition.excitation);
  }
  const broken = new Set<string>();
  const slips = new Map<string, Strain>();
  /** When the shunt of an input was laid and when it comes off. */
  const shunts = new Map<string, { readonly from: number; readonly until: number }>();
  let bumpBegan = Infinity;
  let sunBegan = Infinity;

  const truth = ({ influence }: Feeling, at: number): number => {
    const load = bumpedLoad(programmeLoad(at - begin), at - bumpBegan);
    const steel = STEEL_SWING * Math.sin((2 * Math.PI * at) / STEEL_PERIOD);
    return (
      influence.atRest +
      influence.perNewton * load +
      influence.perSunKelvin * sunWarmth(at - sunBegan) +
      influence.perSteelKelvin * steel
    );
  };

  const shown = (name: string, feeling: Feeling, at: number, dt: number, supply: Volt) => {
    const value = truth(feeling, at);
    const slip = slips.get(name);
    if (slip !== undefined) slips.set(name, nextSlip(slip, strain(value), dt));
    const noise = feeling.influence.noise * normal();
    const shunt = shunts.get(name);
    const withShunt = shunt !== undefined && at >= shunt.from && at < shunt.until;
    const felt = value - (slips.get(name) ?? 0) + noise;
    return rawFigure(feeling.acquisition, felt, supply, withShunt);
  };

  const figure = (input: NodeInput, at: number, dt: number, supply: Volt): number => {
    if (broken.has(input.name)) return railFigure(input);
    if (supplies.has(input.name)) return supply + SUPPLY_NOISE * normal();
    const feeling = feelings.get(input.name);
    return feeling ? shown(input.name, feeling, at, dt, supply) : NaN;
  };

  return {
    block: (t0, dt, count) => {
      const blocks = node.inputs.map((input) => ({
        input,
        samples: samplesFor(input, count),
      }));
      for (let i = 0; i < count; i++) {
        const at = t0 + i * dt;
        const supply = supplyAt(at);
        for (const { input, samples } of blocks) {
          samples[i] = converted(input, figure(input, at, dt, supply));
        }
      }
      return blocks.map(({ input, samples }) => ({ input: input.name, samples }));
    },
    shunt: (input, at, seconds) => {
      if (!feelings.get(input)?.acquisition.shunted) return false;
      const laid = shunts.get(input);
      // Taken off: it was there until now, and the samples until now are still to come.
      const from = seconds > 0 ? at : (laid?.from ?? at);
      const until = seconds > 0 ? at + seconds : Math.min(at, laid?.until ?? at);
      shunts.set(input, { from, until });
      return true;
    },
    play: (request, at) => {
      switch (request.fault) {
        case 'overload-bump':
          bumpBegan = at;
          return;
        case 'sun':
          sunBegan = at;
          return;
        case 'debonding':
          slips.set(request.input, strain(0));
          return;
        case 'broken-wire':
          broken.add(request.input);
          return;
        case 'none':
          broken.clear();
          slips.clear();
          bumpBegan = sunBegan = Infinity;
          return;
        case 'drop-out':
          // The link's, not the gauges'.
          return;
      }
    },
  };
};
