import type { StoredFrame } from '../../server/ports.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';

export const STORM_T0 = 1_800_000_000;

/** The frame of a sequence number, always the same; about one in five is late by half a minute. */
export const stormFrame = (seq: number): StoredFrame => {
  const t0 = STORM_T0 + seq * 0.5 - (seq % 5 === 3 ? 30 : 0);
  const samples = Float32Array.from({ length: 16 }, (_, i) => Math.sin(seq * 16 + i));
  return {
    frame: {
      ...{ node: 'n1', boot: 'storm', seq, sequenced: true },
      ...{ t0: epochSeconds(t0), dt: seconds(1 / 16) },
      inputs: [
        { input: 'a', samples },
        { input: 'ex', samples: new Float32Array(16).fill(4 + (seq % 3)) },
      ],
    },
    // Slower than the samples: some hundred frames go between two writings of what is summed up.
    arrived: epochSeconds(STORM_T0 + seq * 0.01),
  };
};
