import { CLOCK_STEP } from './merge.ts';

/** How often messages may go to one browser. */
export interface Rate {
  /** Seconds between messages in the long run. */
  readonly gap: number;
  /** So many may go at once after a pause. */
  readonly burst: number;
}

/** Generic cell rate algorithm, virtual scheduling (ITU-T I.371). */
export class Meter {
  readonly #rate: Rate;
  /** When the next message would be due if they came evenly. */
  #due = -Infinity;

  constructor(rate: Rate) {
    this.#rate = rate;
  }

  /** Seconds from `now` until a message may go. */
  wait(now: number): number {
    const { gap, burst } = this.#rate;
    // Time that ran backwards was set right: the meter begins anew.
    if (this.#due - now > gap * burst + CLOCK_STEP) this.#due = now;
    const wait = this.#due - gap * (burst - 1) - now;
    return wait > CLOCK_STEP ? wait : 0;
  }

  count(now: number): void {
    this.#due = Math.max(now, this.#due) + this.#rate.gap;
  }
}
