import { describe, expect, test } from 'vitest';
import { createEngine } from '../helpers/engine.ts';
import { memorySamples } from '../helpers/memory-samples.ts';
import { SITE, START } from '../helpers/core.ts';
import type { SampleStore, StoredFrame } from '../../server/ports.ts';
import { writeCbor } from '../../server/ingest/cbor.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { encodeFrame } from '../../shared/pipeline/1-decode/frame.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';

const payloadOf = (seq: number, node = 'n1') =>
  writeCbor(
    encodeFrame({
      ...{ node, boot: 'b', seq, sequenced: true },
      ...{ t0: epochSeconds(START + seq), dt: seconds(0.1) },
      inputs: [{ input: 'ratio', samples: Float64Array.of(1e-4, 2e-4, 3e-4) }],
    }),
  );

const frameTopic = topicOf('n1', 'frame');

/** A store whose commits are let through one by one. */
const heldStore = () => {
  const waiting: { frames: readonly StoredFrame[]; let: () => void; fail: () => void }[] = [];
  let wake = () => undefined as void;
  const store: Pick<SampleStore, 'commit'> = {
    commit: (frames) =>
      new Promise((resolve, reject) => {
        waiting.push({
          frames,
          let: () => resolve(frames.map(() => 'stored')),
          fail: () => reject(new Error('disk full')),
        });
        wake();
      }),
  };
  const next = async () => {
    while (waiting.length === 0) await new Promise<void>((resolve) => (wake = resolve));
    const first = waiting.shift();
    if (!first) throw new Error('nothing waits');
    return first;
  };
  return { store: store as SampleStore, next };
};

describe('acknowledged', () => {
  test('a frame, only when it is durable; its alarm and its value do not wait for that', async () => {
    const { store, next } = heldStore();
    const engine = createEngine(SITE, store);
    let acknowledged = false;
    const done = engine.deliver(frameTopic, payloadOf(0)).then(() => (acknowledged = true));
    const commit = await next();
    expect(acknowledged).toBe(false);
    expect(engine.live.length).toBeGreaterThan(0);
    commit.let();
    await done;
    expect(engine.tally.report(epochSeconds(START))[0]).toMatchObject({ received: 1, stored: 1 });
  });

  test('not while the store fails, and once when it writes again', async () => {
    const { store, next } = heldStore();
    const engine = createEngine(SITE, store);
    let times = 0;
    const done = engine.deliver(frameTopic, payloadOf(0)).then(() => times++);
    (await next()).fail();
    await expect.poll(() => engine.troubles).toEqual(['disk full']);
    expect(times).toBe(0);
    engine.clock.advance(1);
    (await next()).let();
    await done;
    expect(times).toBe(1);
    expect(engine.troubles).toEqual(['disk full', null]);
  });

  test('what is refused, a status, another topic: at once', async () => {
    const { store } = heldStore();
    const engine = createEngine(SITE, store);
    await engine.deliver(frameTopic, Uint8Array.of(0xff));
    await engine.deliver(topicOf('n1', 'status'), Buffer.from('{"v":1,"online":true}'));
    await engine.deliver('weather/today', Buffer.from('rain'));
    expect(engine.tally.report(epochSeconds(START))[0]).toMatchObject({
      ...{ status: 'online', refused: 1, received: 0 },
    });
  });
});

test('a node that the site does not have is refused, counted under its name, and not stored', async () => {
  const store = memorySamples();
  const engine = createEngine(SITE, store);
  await engine.deliver(topicOf('n7', 'frame'), payloadOf(0, 'n7'));
  const stranger = engine.tally.report(epochSeconds(START)).find(({ node }) => node === 'n7');
  expect(stranger).toMatchObject({
    ...{ known: false, refused: 1, received: 0 },
    refusals: [{ code: 'unknown-node', came: 'n7' }],
  });
  expect(await store.tally()).toEqual([]);
});

test('one bad message loses nothing of those round it', async () => {
  const engine = createEngine(SITE, memorySamples());
  await Promise.all([
    engine.deliver(frameTopic, payloadOf(0)),
    engine.deliver(frameTopic, Buffer.from('{"not":"cbor"}')),
    engine.deliver(frameTopic, payloadOf(1)),
  ]);
  expect(engine.tally.report(epochSeconds(START))[0]).toMatchObject({
    ...{ received: 2, stored: 2, refused: 1, missing: 0 },
  });
});
