import type { Quality } from '../../shared/model/block.ts';

/** none: nothing came since the server started. */
export type ShownQuality = Quality | 'stale' | 'none';

/** Only these may be judged against a limit now. */
export const isBelieved = (quality: ShownQuality): boolean => quality === 'good';

const WORDS: Readonly<Record<ShownQuality, string>> = {
  good: 'good',
  'over-range': 'over range',
  missing: 'missing',
  excitation: 'excitation out of range',
  uncalibrated: 'not calibrated',
  stale: 'stale',
  none: 'no reading yet',
};

export const qualityWord = (quality: ShownQuality): string => WORDS[quality];
