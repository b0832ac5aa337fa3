import { isBelieved } from '../../shared/model/block.ts';
import { fetchHistory } from '../feed/api.ts';
import type { LiveState } from './live.svelte.ts';
import { buffersFor, NO_BUFFERS, type Buffers, type TrendBuffer } from './trend-buffer.ts';

/** Stretches in the whole width of a trend. */
export const BINS = 600;
/** Frames that come late are in the store only: the past is asked for again so often, s. */
const ASK_AGAIN = 30;
/** Two frames further apart than this share of its node's patience are no line, but a gap. */
const PATIENCE = 0.5;

/** The buffers of the chosen channels: live figures as they come, the past from the server. */
export class TrendState {
  /** Why some of the past is not there; null if all is well. */
  problem = $state<string | null>(null);
  /** Moves when the past has come. */
  filled = $state(0);

  readonly #live: LiveState;
  #buffers: Buffers = NO_BUFFERS;
  /** Width of a point of the history that came, s. */
  #pastStep = 0;

  constructor(live: LiveState) {
    this.#live = live;
  }

  buffer(index: number): TrendBuffer | undefined {
    return this.#buffers.get(index);
  }

  patience(index: number): number {
    const staleAfter = this.#live.facts[index]?.staleAfter ?? 0;
    const step = this.#buffers.get(index)?.step ?? 0;
    return Math.max(PATIENCE * staleAfter, 2.5 * step, 2.5 * this.#pastStep);
  }

  /** Watches channels over `span` s from now on; the returned function ends it. */
  watch(indices: readonly number[], span: number): () => void {
    const buffers = buffersFor(this.#buffers, indices, span / BINS, BINS);
    this.#buffers = buffers;
    const fill = () => void this.#fill(buffers);
    const endings = [
      this.#live.tap(({ channel, at, last, min, max, quality }) => {
        const believed = isBelieved(quality) || min <= max;
        buffers.get(channel)?.add(at, last, believed ? min : NaN, believed ? max : NaN);
      }),
      this.#live.onResumed(fill),
    ];
    const asking = setInterval(fill, ASK_AGAIN * 1e3);
    fill();
    return () => {
      clearInterval(asking);
      endings.forEach((end) => end());
    };
  }

  async #fill(buffers: Buffers): Promise<void> {
    if (buffers.size === 0) return;
    const to = this.#live.serverNow();
    let problem: string | null = null;
    for (const [index, buffer] of buffers) {
      const facts = this.#live.facts[index];
      if (!facts) continue;
      const from = (buffer.binOf(to) - buffer.bins + 1) * buffer.step;
      const answer = await fetchHistory(facts.channel.id, from, to, buffer.bins);
      if (buffers !== this.#buffers) return;
      if (answer.ok) {
        this.#pastStep = answer.value.step;
        buffer.merge(answer.value);
      } else problem = `${facts.channel.name}: ${answer.problem.error}`;
    }
    this.problem = problem;
    this.filled++;
  }
}
