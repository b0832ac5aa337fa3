import type { Quality } from '../../shared/model/block.ts';

/** none: nothing came since the server started. */
export type ShownQuality = Quality | 'stale' | 'none';

const WORDS: Readonly<Record<ShownQuality, string>> = {
  good: 'good',
  'over-range': 'over range',
  missing: 'missing',
  excitation: 'excitation out of range',
  uncalibrated: 'not calibrated',
  uncorrected: 'temperature not known',
  stale: 'stale',
  none: 'no reading yet',
};

export const qualityWord = (quality: ShownQuality): string => WORDS[quality];
