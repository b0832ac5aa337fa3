import { isBelieved, type ChannelBlock, type Quality } from '../../shared/model/block.ts';
import { epochSeconds, type EpochSeconds } from '../../shared/model/units.ts';
import type { CurrentValue } from '../../shared/protocol/http.ts';
import type { LiveValue } from '../../shared/protocol/socket.ts';
import type { PlannedChannel } from '../../shared/pipeline/index.ts';

interface Present {
  value: number | null;
  at: EpochSeconds | null;
  quality: Quality | 'none';
}

const NOTHING: Present = { value: null, at: null, quality: 'none' };

/** The last word of every channel. */
export class PresentValues {
  #present: Present[];
  #channels: readonly PlannedChannel[];

  constructor(channels: readonly PlannedChannel[]) {
    this.#channels = channels;
    this.#present = channels.map(() => ({ ...NOTHING }));
  }

  /** Goes on with another set-up; what was derived otherwise than now is forgotten. */
  replan(channels: readonly PlannedChannel[]): void {
    const before = new Map(
      this.#channels.map(({ channel }, i) => [
        channel.id,
        { derivation: JSON.stringify(channel), present: this.#present[i] },
      ]),
    );
    this.#present = channels.map(({ channel }) => {
      const was = before.get(channel.id);
      const same = was?.derivation === JSON.stringify(channel);
      return (same && was.present) || { ...NOTHING };
    });
    this.#channels = channels;
  }

  /** Takes the blocks in as the newest, and gives what a display shows of them. */
  accept(blocks: readonly ChannelBlock[]): LiveValue[] {
    return blocks.map((block) => {
      const at = epochSeconds(block.t0 + (block.values.length - 1) * block.dt);
      const present = this.#present[block.channel];
      if (present) {
        present.quality = block.quality;
        if (isBelieved(block.quality)) {
          present.value = block.last;
          present.at = at;
        }
      }
      const { channel, last, min, max, quality } = block;
      return { channel, at, last, min, max, quality };
    });
  }

  values(isStale: (node: string) => boolean): CurrentValue[] {
    return this.#channels.map(({ channel, nodes }, i) => {
      const { value, at, quality } = this.#present[i] ?? NOTHING;
      const stale = quality !== 'none' && nodes.some(isStale);
      return { channel: channel.id, value, at, quality: stale ? 'stale' : quality };
    });
  }
}
