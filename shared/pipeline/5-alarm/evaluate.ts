import type { ChannelBlock } from '../../model/block.ts';
import type { AlarmEventKind } from '../../model/limit.ts';
import { epochSeconds, type EpochSeconds } from '../../model/units.ts';
import type { Threshold } from './threshold.ts';

/**
 * One limit of one channel. normal: within it. beyond: past it since `since`,
 * the on-delay running. raised: the alarm stands since `since`.
 */
export interface LimitState {
  readonly phase: 'normal' | 'beyond' | 'raised';
  readonly since: EpochSeconds;
}

export interface Crossing {
  readonly kind: AlarmEventKind;
  readonly at: EpochSeconds;
  readonly value: number;
}

export interface Evaluation {
  readonly state: LimitState;
  readonly crossings: readonly Crossing[];
}

export const UNSEEN: LimitState = { phase: 'normal', since: epochSeconds(-Infinity) };

const NOTHING: readonly Crossing[] = [];

/** From the block's extremes alone: no sample of it can change the phase. */
const cannotChange = ({ phase }: LimitState, { min, max }: ChannelBlock, limit: Threshold) => {
  if (min > max) return true;
  switch (phase) {
    case 'normal':
      return max < limit.raise && min > -limit.raise;
    case 'raised':
      return min >= limit.clear || max <= -limit.clear;
    case 'beyond':
      return false;
  }
};

/**
 * Every sample against one limit. Both sides of zero count alike. A sample that
 * is not believed (NaN) neither raises nor returns, and does not stop a running
 * on-delay. The on-delay has to pass in samples: silence raises nothing. A clock
 * that steps back starts a running on-delay again.
 */
export const evaluate = (state: LimitState, block: ChannelBlock, limit: Threshold): Evaluation => {
  if (cannotChange(state, block, limit)) return { state, crossings: NOTHING };
  const crossings: Crossing[] = [];
  let { phase, since } = state;
  for (let i = 0; i < block.values.length; i++) {
    const value = block.values[i] ?? NaN;
    if (Number.isNaN(value)) continue;
    const size = Math.abs(value);
    const at = epochSeconds(block.t0 + i * block.dt);
    if (phase === 'raised') {
      if (size >= limit.clear) continue;
      phase = 'normal';
      since = at;
      crossings.push({ kind: 'returned', at, value });
    } else if (size < limit.raise) {
      phase = 'normal';
    } else {
      if (phase === 'normal' || at < since) since = at;
      phase = 'beyond';
      if (at - since < limit.onDelay) continue;
      phase = 'raised';
      since = at;
      crossings.push({ kind: 'raised', at, value });
    }
  }
  return { state: { phase, since }, crossings };
};
