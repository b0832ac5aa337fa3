import type { HeatSink } from '../../model/calibration.ts';
import {
  volt,
  watt,
  wattPerSquareMetre,
  type Ohm,
  type SquareMetre,
  type Volt,
  type Watt,
  type WattPerSquareMetre,
} from '../../model/units.ts';

export interface PowerDensityRange {
  /** For steady, accurate readings. */
  readonly low: WattPerSquareMetre;
  /** For short readings of moderate accuracy. */
  readonly high: WattPerSquareMetre;
}

const range = (low: number, high: number): PowerDensityRange => ({
  low: wattPerSquareMetre(low * 1e6),
  high: wattPerSquareMetre(high * 1e6),
});

/**
 * Allowable power over the grid's area, given in W/mm². Dally and Riley, Experimental Stress
 * Analysis, table of allowable power densities (values from memory).
 */
export const ALLOWABLE_DENSITY: Readonly<Record<HeatSink, PowerDensityRange>> = {
  'thick-aluminium-or-copper': range(0.008, 0.016),
  'thick-steel': range(0.003, 0.008),
  'thin-steel': range(0.0015, 0.003),
  'glass-ceramic-or-composite': range(0.0003, 0.0008),
  'unfilled-plastic': range(0.00003, 0.00008),
};

/** In one gauge of a bridge of four equal arms, which sees half of the excitation: V²/(4·Rg). */
export const dissipatedPower = (excitation: Volt, gaugeResistance: Ohm): Watt =>
  watt(excitation ** 2 / (4 * gaugeResistance));

/** Over the grid's area, length times width. */
export const powerDensity = (power: Watt, gridArea: SquareMetre): WattPerSquareMetre =>
  wattPerSquareMetre(power / gridArea);

/** The excitation that brings a grid to a power density: 2·√(p·A·Rg). */
export const highestExcitation = (
  density: WattPerSquareMetre,
  gridArea: SquareMetre,
  gaugeResistance: Ohm,
): Volt => volt(2 * Math.sqrt(density * gridArea * gaugeResistance));

/** `cool`: at or below the range; `warm`: within it; `hot`: above it. Common practice, no source. */
export type SelfHeating = 'cool' | 'warm' | 'hot';

export const selfHeating = (density: WattPerSquareMetre, on: HeatSink): SelfHeating => {
  const { low, high } = ALLOWABLE_DENSITY[on];
  if (density <= low) return 'cool';
  return density <= high ? 'warm' : 'hot';
};
