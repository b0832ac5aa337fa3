/** From what is true at a channel to the figure that its input shows. */
import {
  apply,
  compose,
  inverse,
  type FractionalLinear,
} from '../../shared/model/fractional-linear.ts';
import type { RawArray } from '../../shared/model/frame.ts';
import type { NodeInput } from '../../shared/model/site.ts';
import { volt, type Volt } from '../../shared/model/units.ts';
import { conversionAt, type ChannelPlan } from '../../shared/pipeline/index.ts';
import { shuntedFigure } from './shunt.ts';

/** The exact forward of a channel's calibration: SI value to raw figure (per V of excitation). */
export interface Acquisition {
  readonly forward: FractionalLinear;
  /** The input that measures the bridge's excitation, if one does. */
  readonly excitation: string | null;
  /** What the node's own shunt makes of a raw figure; null: no bridge. */
  readonly shunted: FractionalLinear | null;
}

/** null before the channel's first calibration record. `at` in s since 1970. */
export const acquisitionOf = (plan: ChannelPlan, at: number): Acquisition | null => {
  const conversion = plan.conversions[conversionAt(plan.conversions, at)];
  if (!conversion) return null;
  const { map, excitation, record } = conversion;
  return { forward: inverse(map), excitation, shunted: shuntedFigure(record) };
};

/** The figure for a true `value` in SI, with the shunt or without, before the converter rounds it. */
export const rawFigure = (
  { forward, excitation, shunted }: Acquisition,
  value: number,
  supply: Volt,
  withShunt: boolean,
): number => {
  const map = withShunt && shunted ? compose(forward, shunted) : forward;
  return apply(map, value) * (excitation === null ? 1 : supply);
};

/** What a 24-bit converter gives. */
const [LOWEST_COUNT, HIGHEST_COUNT] = [-(2 ** 23), 2 ** 23 - 1];

/** An empty array of the kind that an input measures in; counts round to whole ones when stored. */
export const samplesFor = ({ unit }: NodeInput, count: number): RawArray =>
  unit === 'count' ? new Int32Array(count) : new Float32Array(count);

/** Rounded as the converter does. */
export const converted = ({ unit }: NodeInput, figure: number): number =>
  unit === 'count' ? Math.min(HIGHEST_COUNT, Math.max(LOWEST_COUNT, Math.round(figure))) : figure;

/** What an input shows that hangs in the air: the rail. */
export const railFigure = ({ range }: NodeInput): number => range?.[1] ?? Infinity;

/** Nominal supply of the bridges, V, and its slow sag as a share of it. */
const [SUPPLY, SAG, SAG_PERIOD] = [5, 0.0004, 600];

/** Excitation at a time, s since 1970: steady but for a slow sag. */
export const supplyAt = (at: number): Volt =>
  volt(SUPPLY * (1 - (SAG * (1 - Math.cos((2 * Math.PI * at) / SAG_PERIOD))) / 2));
