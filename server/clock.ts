import { epochSeconds } from '../shared/model/units.ts';
import type { Clock } from './ports.ts';

/** The machine's own clock. */
export const systemClock: Clock = {
  now: () => epochSeconds(Date.now() / 1e3),
  after: (seconds, call) => {
    const timer = setTimeout(call, seconds * 1e3);
    return () => clearTimeout(timer);
  },
};
