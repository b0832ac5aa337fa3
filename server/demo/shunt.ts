import type { CalibrationRecord } from '../../shared/model/calibration.ts';
import {
  affine,
  chain,
  inverse,
  type FractionalLinear,
} from '../../shared/model/fractional-linear.ts';
import { ohm } from '../../shared/model/units.ts';
import { shuntedOutput } from '../../shared/pipeline/2-ratio/shunt.ts';
import { signalMap } from '../../shared/pipeline/2-ratio/signal.ts';

/** What a simulated node lays across the gauge in arm 1 of an input's bridge, Ω. */
export const NODE_SHUNT = ohm(350e3);

/**
 * A raw figure (per V of excitation) without the shunt to that with it, by the exact output of the
 * bridge; null for a transducer, which has no arm to lay it across.
 */
export const shuntedFigure = ({
  signal,
  response,
}: Pick<CalibrationRecord, 'signal' | 'response'>): FractionalLinear | null => {
  if (response.kind !== 'bridge') return null;
  const shunt = { arm: 1, at: 'arm', resistance: NODE_SHUNT } as const;
  const step = shuntedOutput(response, shunt) - shuntedOutput(response, null);
  const toRatio = signalMap(signal);
  return chain(toRatio, affine(1, step), inverse(toRatio));
};
