import type { Bounds, ChannelFacts } from './channel-facts.ts';
import { stressAt } from './channel-facts.ts';
import type { Measurand } from '../../shared/model/site.ts';
import type { Scale } from './quantity.ts';
import type { Cell, TrendColumns } from './trend-buffer.ts';

/** Told apart without colour: by letter, and by dashes in px on and off. */
export const LETTERS = ['A', 'B', 'C', 'D', 'E', 'F'] as const;
export const DASHES: readonly (readonly number[])[] = [
  [],
  [10, 5],
  [3, 3],
  [14, 4, 3, 4],
  [6, 3, 2, 3, 2, 3],
  [20, 5],
];

export type StrainAs = 'stress' | 'strain';

/** What a chart has on its upright axis. Channels of one group share a chart. */
export type Group = Exclude<Measurand, 'shear'>;

export const groupOf = ({ channel }: ChannelFacts): Group =>
  channel.measurand === 'shear' ? 'strain' : channel.measurand;

/** From a channel's SI value to the figure on the axis. */
export const shownBy =
  (facts: ChannelFacts, scale: Scale, strainAs: StrainAs) =>
  (value: number): number => {
    const stress = strainAs === 'stress' ? stressAt(value, facts.context) : null;
    return scale.fromSi(stress ?? value);
  };

const mapCells = (cells: readonly Cell[], show: (value: number) => number): Cell[] =>
  cells.map((cell) => (typeof cell === 'number' ? show(cell) : cell));

export const shownColumns = (
  { last, min, max }: TrendColumns,
  show: (value: number) => number,
): TrendColumns => ({
  last: mapCells(last, show),
  min: mapCells(min, show),
  max: mapCells(max, show),
});

export interface ShownLimit {
  readonly value: number;
  readonly level: 'caution' | 'stop';
}

/** Both sides of each limit; the same line of several channels once. */
export const shownLimits = (
  of: readonly { bounds: Bounds; show: (value: number) => number }[],
): ShownLimit[] => {
  const lines = new Map<string, ShownLimit>();
  for (const { bounds, show } of of) {
    for (const threshold of [bounds.caution, bounds.stop]) {
      if (threshold === null) continue;
      for (const side of [threshold.raise, -threshold.raise]) {
        const line = { value: show(side), level: threshold.level };
        lines.set(`${line.level} ${line.value.toPrecision(6)}`, line);
      }
    }
  }
  return [...lines.values()];
};

/** A side that the figures go to for less than this share of the other side is no side. */
const LEAN = 0.2;

/**
 * Bounds of the upright axis: the figures and nought, with room. With `limits`
 * also the outermost limit of the side that the figures lean to, and of both
 * sides where they go both ways.
 */
export const axisRange = (
  extents: readonly { min: number; max: number }[],
  limits: readonly ShownLimit[],
  least: number,
): [low: number, high: number] => {
  let low = Math.min(0, ...extents.map(({ min }) => min));
  let high = Math.max(0, ...extents.map(({ max }) => max));
  const lean = Math.max(-low, high) * LEAN;
  const values = limits.map(({ value }) => value);
  const [up, down] = [high >= lean, -low >= lean];
  if (up) high = Math.max(high, ...values);
  if (down) low = Math.min(low, ...values);
  const room = Math.max((high - low) * 0.12, least);
  return [low < 0 ? low - room : -room / 2, high > 0 ? high + room : room];
};
