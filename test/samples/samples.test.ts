/**
 * Golden samples: frames in, strains and alarms out. Each folder is a sentence that holds: its
 * site, the messages that come, and what must come of them, with where those figures are from.
 */
import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { writeCbor } from '../../server/ingest/cbor.ts';
import { siteFormat } from '../../server/site/format.ts';
import type { RawArray } from '../../shared/model/frame.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { encodeFrame } from '../../shared/pipeline/1-decode/frame.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import { createEngine } from '../helpers/engine.ts';
import { memorySamples } from '../helpers/memory-samples.ts';

interface FrameOfSample {
  readonly node: string;
  readonly boot: string;
  readonly seq: number;
  readonly t0: number;
  readonly dt: number;
  readonly in: Readonly<Record<string, { readonly type: Type; readonly values: number[] }>>;
}

type Message =
  | { readonly frame: FrameOfSample }
  | { readonly topic: string; readonly hex: string }
  | { readonly topic: string; readonly text: string };

interface Expected {
  readonly source: string;
  /** Significant digits; 12 where not said. */
  readonly digits?: number;
  /** The last live value of a channel. */
  readonly live?: readonly {
    readonly channel: string;
    readonly last: number | null;
    readonly min?: number;
    readonly max?: number;
    readonly quality: string;
  }[];
  readonly present?: Readonly<Record<string, number | null>>;
  readonly events?: readonly {
    readonly channel: string;
    readonly level: string;
    readonly kind: string;
    readonly at: number;
    readonly value: number;
  }[];
  /** Channels whose alarms are active at the end; not looked at where left out. */
  readonly active?: readonly string[];
  readonly tally?: Readonly<Record<string, unknown>> & { readonly node: string };
}

const ARRAYS = {
  f4: (values: number[]): RawArray => Float32Array.from(values),
  f8: (values: number[]): RawArray => Float64Array.from(values),
  i2: (values: number[]): RawArray => Int16Array.from(values),
  i4: (values: number[]): RawArray => Int32Array.from(values),
} as const;
type Type = keyof typeof ARRAYS;

const folders = readdirSync(new URL('.', import.meta.url), { withFileTypes: true })
  .filter((entry) => entry.isDirectory())
  .map(({ name }) => name);

const textOf = (folder: string, file: string): string =>
  readFileSync(new URL(`${encodeURIComponent(folder)}/${file}`, import.meta.url), 'utf8');

const payloadOf = (message: Message): { topic: string; payload: Uint8Array } => {
  if ('hex' in message) {
    return { topic: message.topic, payload: Buffer.from(message.hex, 'hex') };
  }
  if ('text' in message) return { topic: message.topic, payload: Buffer.from(message.text) };
  const { node, boot, seq, t0, dt, in: inputs } = message.frame;
  const frame = {
    ...{ node, boot, seq, sequenced: true, t0: epochSeconds(t0), dt: seconds(dt) },
    inputs: Object.entries(inputs).map(([input, { type, values }]) => ({
      ...{ input, samples: ARRAYS[type](values) },
    })),
  };
  return { topic: topicOf(node, 'frame'), payload: writeCbor(encodeFrame(frame)) };
};

/** Relative, and absolute below 1e-15, where a strain is nought. */
const expectClose = (actual: number, expected: number, digits: number) => {
  const within = Math.max(Math.abs(expected) * 10 ** -digits, 1e-15);
  expect(Math.abs(actual - expected), `${actual} for ${expected}`).toBeLessThanOrEqual(within);
};

const DIGITS = 9;

describe('golden samples', () => {
  test('each names where its figures are from', () => {
    expect(folders.length).toBeGreaterThanOrEqual(18);
    for (const folder of folders) {
      const { source } = JSON.parse(textOf(folder, 'expected.json')) as Expected;
      expect(source.length, folder).toBeGreaterThan(20);
    }
  });

  test.each(folders)('%s', async (folder) => {
    const read = siteFormat.read(textOf(folder, 'site.json'));
    if (!read.ok) throw new Error(JSON.stringify(read.faults, null, 1));
    const messages = JSON.parse(textOf(folder, 'messages.json')) as Message[];
    const expected = JSON.parse(textOf(folder, 'expected.json')) as Expected;
    const digits = expected.digits ?? DIGITS;
    const engine = createEngine(read.site, memorySamples());
    for (const message of messages) {
      const { topic, payload } = payloadOf(message);
      await engine.deliver(topic, payload);
    }

    const indexOf = (id: string) =>
      engine.current.channels.findIndex(({ channel }) => channel.id === id);
    for (const want of expected.live ?? []) {
      const came = engine.live.findLast(({ channel }) => channel === indexOf(want.channel));
      expect(came?.quality).toBe(want.quality);
      if (want.last === null) expect(came?.last).toBeNaN();
      else expectClose(came?.last ?? NaN, want.last, digits);
      if (want.min !== undefined) expectClose(came?.min ?? NaN, want.min, digits);
      if (want.max !== undefined) expectClose(came?.max ?? NaN, want.max, digits);
    }
    const values = engine.present.values(() => false);
    for (const [id, want] of Object.entries(expected.present ?? {})) {
      const value = values.find(({ channel }) => channel === id)?.value ?? null;
      if (want === null) expect(value).toBeNull();
      else expectClose(value ?? NaN, want, digits);
    }
    if (expected.events) {
      const came = engine.records.events.map(({ channel, level, kind }) => [channel, level, kind]);
      const want = expected.events.map(({ channel, level, kind }) => [channel, level, kind]);
      expect(came).toEqual(want);
      expected.events.forEach(({ at, value }, i) => {
        expectClose(engine.records.events[i]?.at ?? NaN, at, 15);
        expectClose(engine.records.events[i]?.value ?? NaN, value, digits);
      });
    }
    if (expected.active) {
      expect(engine.alarms.list().active.map(({ channel }) => channel)).toEqual(expected.active);
    }
    if (expected.tally) {
      const { node } = expected.tally;
      const report = engine.tally.report(engine.clock.now());
      expect(report.find((one) => one.node === node)).toMatchObject(expected.tally);
    }
    expect(engine.troubles).toEqual([]);
  });
});
