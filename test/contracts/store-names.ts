import { expect, onTestFinished, test } from 'vitest';
import type { ExcitationPairs, SampleStore } from '../../server/ports.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { frameOf } from './sample-store.ts';

const T0 = 1_800_000_000;
const PAIR: ExcitationPairs = { n1: [{ input: 'a', over: 'ex' }] };

const tenSeconds = (seq: number, node = 'n1') =>
  frameOf({
    ...{ node, seq, t0: epochSeconds(T0 + seq * 10), dt: seconds(0.5) },
    inputs: [
      { input: 'a', samples: new Float32Array(20).fill(6 + seq) },
      { input: 'ex', samples: new Float32Array(20).fill(2) },
    ],
  });

/** What a store must do whatever nodes call themselves, and whatever pairs are named when. */
export const testNames = (
  name: string,
  open: (place: string, pairs: ExcitationPairs) => Promise<SampleStore>,
  newPlace: () => string,
) => {
  test(`${name}: a node may bear the name of anything that objects inherit`, async () => {
    const store = await open(newPlace(), PAIR);
    for (const node of ['constructor', 'toString', 'hasOwnProperty', 'n1']) {
      expect(await store.commit([tenSeconds(0, node)])).toEqual(['stored']);
      const window = { from: epochSeconds(T0), to: epochSeconds(T0 + 10), points: 1 };
      const envelope = await store.envelope({
        series: { node, input: 'a', over: 'ex' },
        ...window,
      });
      expect([[...envelope.count], [...envelope.max]]).toEqual([[20], [3]]);
    }
    await store.close();
  });

  test(`${name}: a pair named late, or dropped and named again, misses nothing`, async () => {
    const place = newPlace();
    for (const [seq, pairs] of [PAIR, PAIR, {}, PAIR, {}, PAIR].entries()) {
      const store = await open(place, pairs);
      await store.commit([tenSeconds(seq)]);
      const series = { node: 'n1', input: 'a', over: 'ex' };
      for (const points of [1, 6]) {
        const window = { from: epochSeconds(T0), to: epochSeconds(T0 + 60), points };
        const { count, max } = await store.envelope({ series, ...window });
        expect(count.reduce((sum, n) => sum + n, 0)).toBe(20 * (seq + 1));
        expect(Math.max(...max)).toBe((6 + seq) / 2);
      }
      await store.close();
    }
  });

  test(`${name}: pairs followed while it is open, dropped and followed again, miss nothing`, async () => {
    const store = await open(newPlace(), {});
    onTestFinished(() => store.close());
    for (const [seq, pairs] of [{}, PAIR, PAIR, {}, PAIR].entries()) {
      await store.follow(pairs);
      await store.commit([tenSeconds(seq)]);
      const series = { node: 'n1', input: 'a', over: 'ex' };
      for (const points of [1, 5]) {
        const window = { from: epochSeconds(T0), to: epochSeconds(T0 + 50), points };
        const { count, max } = await store.envelope({ series, ...window });
        expect(count.reduce((sum, n) => sum + n, 0)).toBe(20 * (seq + 1));
        expect(Math.max(...max)).toBe((6 + seq) / 2);
      }
    }
  });
};
