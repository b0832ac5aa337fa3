import type { ChannelBlock, Quality } from '../../shared/model/block.ts';
import { epochSeconds, type EpochSeconds } from '../../shared/model/units.ts';
import type { CurrentValue } from '../../shared/protocol/http.ts';
import type { LiveValue } from '../../shared/protocol/socket.ts';
import type { ChannelPlan } from '../../shared/pipeline/index.ts';

interface Present {
  value: number | null;
  at: EpochSeconds | null;
  quality: Quality | 'none';
}

/** The last word of every channel. */
export class PresentValues {
  readonly #present: Present[];
  readonly #channels: readonly ChannelPlan[];

  constructor(channels: readonly ChannelPlan[]) {
    this.#channels = channels;
    this.#present = channels.map(() => ({ value: null, at: null, quality: 'none' }));
  }

  /** Takes the blocks in as the newest, and gives what a display shows of them. */
  accept(blocks: readonly ChannelBlock[]): LiveValue[] {
    return blocks.map((block) => {
      const at = epochSeconds(block.t0 + (block.values.length - 1) * block.dt);
      const present = this.#present[block.channel];
      if (present) {
        present.quality = block.quality;
        if (block.quality === 'good') {
          present.value = block.last;
          present.at = at;
        }
      }
      const { channel, last, min, max, quality } = block;
      return { channel, at, last, min, max, quality };
    });
  }

  values(isStale: (node: string) => boolean): CurrentValue[] {
    return this.#channels.map(({ channel }, i) => {
      const { value, at, quality } = this.#present[i] ?? { value: null, at: null, quality: 'none' };
      const stale = quality !== 'none' && isStale(channel.node);
      return { channel: channel.id, value, at, quality: stale ? 'stale' : quality };
    });
  }
}
