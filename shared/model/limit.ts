import type { Measurand } from './site.ts';
import type { EpochSeconds, Pascal, Seconds, Share } from './units.ts';

export type LimitLevel = 'caution' | 'stop';

/** How a limit was stated; it is compared as strain (or N, m, °C for a transducer). */
export type LimitBasis =
  /** Strain, m/m. */
  | 'strain'
  /** Stress, Pa. */
  | 'stress'
  /** Share of yield. */
  | 'share'
  /** The channel's own SI unit, for force, displacement and temperature. */
  | 'value';

export interface Limit {
  readonly level: LimitLevel;
  readonly basis: LimitBasis;
  /** Magnitude, > 0, on both sides of zero: tension and compression alike. */
  readonly value: number;
  /** Same basis as `value`: returns to normal below `value − deadband`. */
  readonly deadband: number;
  /** The value must stay beyond the limit this long before the alarm is raised. */
  readonly onDelay: Seconds;
}

/** What a limit of a channel is judged by. */
export interface LimitContext {
  readonly measurand: Measurand;
  /** Stress for a strain of 1 by the member's material; null for a transducer. */
  readonly stressPerStrain: Pascal | null;
  /** In the measurand's kind of stress (normal or shear); null for a transducer. */
  readonly yieldStrength: Pascal | null;
  /** The share of yield that no limit may pass. */
  readonly highestLimit: Share;
}

export type AlarmEventKind = 'raised' | 'returned';

export interface AlarmEvent {
  /** `channel/level/kind/time in µs`: the same crossing has the same id, however often it is computed. */
  readonly id: string;
  readonly channel: string;
  readonly level: LimitLevel;
  readonly kind: AlarmEventKind;
  /** Time of the sample that brought it about, on-delay included. */
  readonly at: EpochSeconds;
  /** The channel's value at that sample, SI. */
  readonly value: number;
  /** The threshold it was compared with, in the channel's SI unit, signed to the side crossed. */
  readonly threshold: number;
  /** Of a frame that came late: it is said of the past, and nothing stands or ends by it now. */
  readonly late: boolean;
}
