import type { EpochSeconds, Seconds } from './units.ts';

/**
 * good: believed. over-range: at or beyond the input's range. missing: no
 * number came. excitation: the measured excitation is out of its range or
 * nought. uncalibrated: no calibration record was in force yet. uncorrected:
 * believed, but not put right for temperature, which is not known.
 */
export const QUALITIES = [
  'good',
  'over-range',
  'missing',
  'excitation',
  'uncalibrated',
  'uncorrected',
] as const;
export type Quality = (typeof QUALITIES)[number];

/** Is the value of this quality one to judge the structure by? */
export const isBelieved = (quality: string): boolean =>
  quality === 'good' || quality === 'uncorrected';

/** One channel's samples of one frame, in the channel's SI unit; NaN where not believed. */
export interface ChannelBlock {
  /** Index into the site's channels, in site order. */
  readonly channel: number;
  readonly t0: EpochSeconds;
  readonly dt: Seconds;
  readonly values: Float64Array;
  /** Over the believed samples; +Infinity, −Infinity where there is none. */
  readonly min: number;
  readonly max: number;
  /** The last sample, believed or not. */
  readonly last: number;
  readonly quality: Quality;
}
