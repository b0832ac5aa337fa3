/** Frames that come late, twice, of another boot, or not from a node of ours, on their way through the flow. */
import { describe, expect, test } from 'vitest';
import { writeCbor } from '../../server/ingest/cbor.ts';
import type { Limit } from '../../shared/model/limit.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { encodeFrame } from '../../shared/pipeline/1-decode/frame.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import { START } from '../helpers/core.ts';
import { createEngine } from '../helpers/engine.ts';
import { memorySamples } from '../helpers/memory-samples.ts';
import { record, siteWith } from './one-channel.ts';

/** 10 kN a V, so that figures can be followed by eye; stop at 50 kN. */
const STOP: Limit = {
  ...{ level: 'stop', basis: 'value', value: 50e3, deadband: 0, onDelay: seconds(0) },
};
const SITE = siteWith({
  calibration: [
    record('c1', START - 1e6, { kind: 'linear', perUnit: 10e3, zero: 0 }, { kind: 'direct' }),
  ],
  measurand: 'force',
  limits: [STOP],
});

const FRAME = topicOf('n1', 'frame');
const frame = (seq: number, volts: readonly number[], boot = 'b1') =>
  writeCbor(
    encodeFrame({
      ...{ node: 'n1', boot, seq, sequenced: true },
      ...{ t0: epochSeconds(START + seq), dt: seconds(0.001) },
      inputs: [{ input: 'a', samples: Float64Array.from(volts) }],
    }),
  );

const scene = () => {
  const samples = memorySamples();
  const engine = createEngine(SITE, samples);
  const events = () => engine.records.events.map(({ kind, at, value }) => ({ kind, at, value }));
  const tallied = () => engine.tally.report(engine.clock.now()).find(({ node }) => node === 'n1');
  const value = () => engine.present.values(() => false)[0]?.value;
  return { ...engine, samples, events, tallied, value };
};

test('an alarm comes of every sample, though a display gets three figures of a frame', async () => {
  const { deliver, live, events } = scene();
  const volts = new Array<number>(1000).fill(1);
  volts[500] = -7;
  await deliver(FRAME, frame(0, volts));
  expect(live).toEqual([
    { channel: 0, at: START + 0.999, last: 10e3, min: -70e3, max: 10e3, quality: 'good' },
  ]);
  expect(events()).toEqual([
    { kind: 'raised', at: START + 0.5, value: -70e3 },
    { kind: 'returned', at: START + 0.501, value: 10e3 },
  ]);
});

describe('a frame behind one that was seen', () => {
  test('is stored and alarms at its own time; what is shown and what stands are the newer', async () => {
    const { deliver, live, events, tallied, value, alarms, samples } = scene();
    await deliver(FRAME, frame(0, [1]));
    await deliver(FRAME, frame(2, [2]));
    const shown = live.length;
    await deliver(FRAME, frame(1, [9]));
    expect(live).toHaveLength(shown);
    expect(value()).toBe(20e3);
    expect(events()).toEqual([{ kind: 'raised', at: START + 1, value: 90e3 }]);
    expect(alarms.list().active).toEqual([]);
    expect(alarms.list().recent).toHaveLength(1);
    expect(tallied()).toMatchObject({ received: 3, stored: 3, missing: 0 });
    expect(await samples.has('n1', 'b1', 1)).toBe(true);
  });

  test('does not return an alarm that stands now', async () => {
    const { deliver, events, alarms } = scene();
    await deliver(FRAME, frame(0, [1]));
    await deliver(FRAME, frame(2, [9]));
    await deliver(FRAME, frame(1, [1]));
    expect(events()).toEqual([{ kind: 'raised', at: START + 2, value: 90e3 }]);
    expect(alarms.list().active).toHaveLength(1);
  });

  test('so is one of an earlier boot, once the node has started anew', async () => {
    const { deliver, value, tallied } = scene();
    await deliver(FRAME, frame(7, [1], 'b1'));
    await deliver(FRAME, frame(0, [2], 'b2'));
    await deliver(FRAME, frame(8, [3], 'b1'));
    expect(value()).toBe(20e3);
    expect(tallied()).toMatchObject({ boot: 'b2', received: 3, stored: 3, missing: 0 });
  });
});

test('a frame that comes again is acknowledged again, stored once, and alarms once', async () => {
  const { deliver, live, events, tallied, samples } = scene();
  await deliver(FRAME, frame(0, [9]));
  const shown = live.length;
  await deliver(FRAME, frame(0, [9]));
  expect(tallied()).toMatchObject({ received: 2, stored: 1, duplicate: 1, missing: 0 });
  expect(events()).toHaveLength(1);
  expect(live).toHaveLength(shown);
  expect(await samples.tally()).toMatchObject([{ frames: 1, samples: 1 }]);
});

describe('a pack of readings', () => {
  const PACK = topicOf('n1', 'senml/json');
  /** RFC 8428 §4: each record a reading of its own. */
  const pack = (...units: string[]) =>
    Buffer.from(
      JSON.stringify(units.map((u, i) => ({ n: 'a', u, t: START + i, v: (i + 1) / 10 }))),
    );
  /** Acknowledgements of one delivery, counted. */
  const acknowledgements = async (parts: ReturnType<typeof scene>, payload: Uint8Array) => {
    let count = 0;
    const arrived = parts.clock.now();
    const acknowledge = () => count++;
    parts.receive({ topic: PACK, payload, retained: false, arrived, acknowledge });
    expect(count).toBe(0);
    await parts.committer.stop();
    return count;
  };

  test('is acknowledged once, when all of them are durable', async () => {
    const parts = scene();
    expect(await acknowledgements(parts, pack('/', '/', '/'))).toBe(1);
    expect(await parts.samples.tally()).toMatchObject([{ boot: 'senml/a', frames: 3 }]);
  });

  test('one in another unit is refused and counted, the others stand', async () => {
    const parts = scene();
    expect(await acknowledgements(parts, pack('/', 'V', '/'))).toBe(1);
    expect(parts.tallied()).toMatchObject({
      ...{ received: 2, stored: 2, refused: 1 },
      refusals: [{ field: '[1].u', came: '"V"', count: 1 }],
    });
    expect(await parts.samples.tally()).toMatchObject([{ frames: 2 }]);
  });
});
