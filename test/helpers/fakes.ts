import { epochSeconds } from '../../shared/model/units.ts';
import type { Clock } from '../../server/ports.ts';

export interface FakeClock extends Clock {
  /** Moves time on and calls back what falls due, in order. */
  advance(seconds: number): void;
}

/** A clock that moves only when told. */
export const fakeClock = (start = 1_800_000_000): FakeClock => {
  let now = start;
  let timers: { at: number; call: () => void }[] = [];
  return {
    now: () => epochSeconds(now),
    after: (seconds, call) => {
      const timer = { at: now + seconds, call };
      timers.push(timer);
      return () => {
        timers = timers.filter((other) => other !== timer);
      };
    },
    advance: (seconds) => {
      const end = now + seconds;
      for (;;) {
        const due = timers.filter(({ at }) => at <= end).sort((a, b) => a.at - b.at)[0];
        if (!due) break;
        timers = timers.filter((other) => other !== due);
        now = due.at;
        due.call();
      }
      now = end;
    },
  };
};
