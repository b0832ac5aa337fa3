import type { Limit, LimitContext } from '../../model/limit.ts';

/** A limit's value or deadband, stated in its basis, as a magnitude in the channel's SI unit. */
const inChannelUnit = (figure: number, basis: Limit['basis'], context: LimitContext): number => {
  const { stressPerStrain, yieldStrength } = context;
  switch (basis) {
    case 'strain':
    case 'value':
      return figure;
    case 'stress':
      return stressPerStrain === null ? NaN : figure / stressPerStrain;
    case 'share':
      return stressPerStrain === null || yieldStrength === null
        ? NaN
        : (figure * yieldStrength) / stressPerStrain;
  }
};

/** A limit as it is compared: magnitudes in the channel's SI unit. */
export interface Threshold {
  readonly level: Limit['level'];
  /** Beyond it, on either side of zero, the limit is passed. */
  readonly raise: number;
  /** Below it the value has returned; `raise` less the deadband. */
  readonly clear: number;
  readonly onDelay: number;
}

/** NaN thresholds where the basis does not fit the channel; `limitFaults` refuses those. */
export const thresholdOf = (limit: Limit, context: LimitContext): Threshold => ({
  level: limit.level,
  raise: inChannelUnit(limit.value, limit.basis, context),
  clear: inChannelUnit(limit.value - limit.deadband, limit.basis, context),
  onDelay: limit.onDelay,
});

/** Share of the way from nought to a threshold that a value has gone; 1 is at it. */
export const shareOfThreshold = (value: number, threshold: Threshold): number =>
  Math.abs(value) / threshold.raise;
