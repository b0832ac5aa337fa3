import type { Band } from './verdict.ts';

/** What the checks of a channel judge by. A null band: the figure is told, not judged. */
export interface CheckLimits {
  /** Share of the samples due. */
  readonly alive: Band;
  /** Share of the window without a change. */
  readonly frozen: Band;
  /** Standard deviation, the channel's SI unit. */
  readonly noise: Band | null;
  /** Share of the noise's variance. */
  readonly mains: Band;
  /** Magnitude of the unloaded bridge's output, V/V, beside what its leads bring. */
  readonly offset: Band | null;
  /** Magnitude per s, the channel's SI unit. */
  readonly drift: Band | null;
  /** Drift is not judged from less, s. */
  readonly driftAfter: number;
  /** Ohm to ground. */
  readonly insulation: Band;
  /** Magnitude of the step shown over that which must be shown, less 1. */
  readonly shunt: Band;
  /** Share of the input's span between the samples and its nearer end. */
  readonly range: Band;
}

/**
 * Of any channel. Insulation: ASTM E1237 and textbooks, 100 MΩ for work in the field, to be looked
 * into below 10 MΩ (value from memory, little certain). All others: common practice, no source.
 */
const ANY: CheckLimits = {
  alive: { good: 0.99, bad: 0.9 },
  frozen: { good: 0.2, bad: 0.9 },
  noise: null,
  mains: { good: 0.1, bad: 0.5 },
  offset: null,
  drift: null,
  driftAfter: 60,
  insulation: { good: 100e6, bad: 10e6 },
  shunt: { good: 0.01, bad: 0.03 },
  range: { good: 0.2, bad: 0.05 },
};

/**
 * Of a strain channel: noise 2 and 10 µε, drift 1 and 5 µε/min, unloaded bridge within 2 and
 * 5 mV/V. Common practice, no source.
 */
const STRAIN: CheckLimits = {
  ...ANY,
  noise: { good: 2e-6, bad: 10e-6 },
  offset: { good: 2e-3, bad: 5e-3 },
  drift: { good: 1e-6 / 60, bad: 5e-6 / 60 },
};

export const defaultLimits = (of: 'bridge' | 'linear'): CheckLimits =>
  of === 'bridge' ? STRAIN : ANY;
