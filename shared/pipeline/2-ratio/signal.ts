import type { Excitation, Signal } from '../../model/calibration.ts';
import { affine, IDENTITY, type FractionalLinear } from '../../model/fractional-linear.ts';

const excitationOf = (signal: Signal): Excitation | null =>
  'excitation' in signal ? signal.excitation : null;

/** The input of the same node that measures the excitation, or null where none does. */
export const excitationInput = (signal: Signal): string | null => {
  const excitation = excitationOf(signal);
  return excitation?.kind === 'measured' ? excitation.input : null;
};

/**
 * The raw figure to V/V for a bridge, to V or the SI unit for a transducer.
 * With a measured excitation the raw figure has been divided by the
 * excitation's raw figure, sample by sample, before it comes here.
 */
export const signalMap = (signal: Signal): FractionalLinear => {
  const excitation = excitationOf(signal);
  const perVolt = excitation?.kind === 'stated' ? 1 / excitation.volts : 1;
  switch (signal.kind) {
    case 'ratio':
    case 'direct':
      return IDENTITY;
    case 'volts':
      return affine(perVolt);
    case 'counts': {
      const gain = signal.perCount * perVolt;
      return affine(gain, -signal.zeroCount * gain);
    }
  }
};

/** What a signal cannot be, or null: a zero count cannot be taken off after a division. */
export const signalFault = (signal: Signal): { expected: string; came: string } | null =>
  signal.kind === 'counts' && excitationInput(signal) !== null && signal.zeroCount !== 0
    ? { expected: 'a zero count of 0 with a measured excitation', came: String(signal.zeroCount) }
    : null;
