import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { EnvelopeQuery, SampleStore, StoredFrame } from '../../server/ports.ts';
import type { Frame, InputBlock, RawArray } from '../../shared/model/frame.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';

/** What every SampleStore must do. `open` on the same folder or database finds what was stored. */
export interface StoreUnderTest {
  readonly open: (place: string) => Promise<SampleStore>;
  readonly newPlace: () => Promise<string>;
  /** Cases of each property test. */
  readonly runs: number;
}

export const PAIRS = { n1: [{ input: 'b', over: 'ex' }] };
const T0 = 1_800_000_000;

export const frameOf = (
  change: Partial<Frame> & { inputs: readonly InputBlock[] },
): StoredFrame => ({
  frame: {
    ...{ node: 'n1', boot: 'boot-1', seq: 0, sequenced: true },
    ...{ t0: epochSeconds(T0), dt: seconds(0.01) },
    ...change,
  },
  arrived: epochSeconds(T0 + 1),
});

const ramp = (seq: number, boot = 'boot-1', node = 'n1') =>
  frameOf({
    ...{ seq, boot, node, t0: epochSeconds(T0 + seq * 0.1) },
    inputs: [{ input: 'a', samples: Float32Array.from({ length: 10 }, (_, i) => seq * 10 + i) }],
  });

const samplesOf = (frames: readonly StoredFrame[], input: string, over: string | null) =>
  frames.flatMap(({ frame }) => {
    const raw = frame.inputs.find((one) => one.input === input)?.samples;
    const by = over === null ? null : frame.inputs.find((one) => one.input === over)?.samples;
    if (!raw || by === undefined) return [];
    return Array.from(raw, (x, i) => ({
      t: frame.t0 + i * frame.dt,
      x: by === null ? x : x / (by[i] ?? NaN),
    })).filter(({ x }) => Number.isFinite(x));
  });

/** Each point held against every sample of its own stretch, with nothing but a filter. */
const expectEnvelope = async (
  store: SampleStore,
  frames: readonly StoredFrame[],
  query: EnvelopeQuery,
) => {
  const { input, over } = query.series;
  const inWindow = samplesOf(frames, input, over).filter(
    ({ t }) => t >= query.from && t < query.to,
  );
  const envelope = await store.envelope(query);
  expect(envelope.t.length).toBeLessThanOrEqual(query.points + 1);
  let counted = 0;
  envelope.t.forEach((t, i) => {
    const point = Math.floor(t / envelope.step);
    const own = inWindow.filter((sample) => Math.floor(sample.t / envelope.step) === point);
    const values = own.map(({ x }) => x);
    counted += own.length;
    expect(envelope.count[i]).toBe(own.length);
    // `+ 0` makes −0 into 0: the same figure, whichever of the two came first.
    expect((envelope.min[i] ?? NaN) + 0).toBe(Math.min(...values) + 0);
    expect((envelope.max[i] ?? NaN) + 0).toBe(Math.max(...values) + 0);
    const mean = values.reduce((sum, x) => sum + x, 0) / values.length;
    const size = Math.max(...values.map(Math.abs), 1e-300);
    expect(Math.abs((envelope.mean[i] ?? NaN) - mean) / size).toBeLessThan(1e-9);
  });
  expect(counted).toBe(inWindow.length);
  expect([...envelope.t]).toEqual([...envelope.t].sort((a, b) => a - b));
};

const float32 = fc.float({ min: -1000, max: 1000, noNaN: true });
const arrays = (count: number): fc.Arbitrary<RawArray> =>
  fc
    .array(fc.oneof({ weight: 20, arbitrary: float32 }, fc.constantFrom(NaN, Infinity)), {
      minLength: count,
      maxLength: count,
    })
    .map((list) => Float32Array.from(list));

/** Frames of two boots that overlap in time, late, with gaps, of several intervals and lengths. */
const someFrames: fc.Arbitrary<StoredFrame[]> = fc
  .array(
    fc
      .record({
        boot: fc.constantFrom('boot-1', 'boot-2'),
        at: fc.nat({ max: 4000 }),
        // Binary fractions, so that a sample's time is the same double however it is reached.
        dt: fc.constantFrom(1 / 256, 1 / 16, 0.5, 3),
        count: fc.integer({ min: 1, max: 40 }),
      })
      .chain(({ boot, at, dt, count }) =>
        fc
          .tuple(arrays(count), arrays(count), fc.float({ min: 4, max: 5, noNaN: true }))
          .map(([a, b, ex]) => ({
            boot,
            t0: epochSeconds(T0 + at / 8),
            dt: seconds(dt),
            inputs: [
              { input: 'a', samples: a },
              { input: 'b', samples: b },
              { input: 'ex', samples: new Float32Array(count).fill(ex) },
            ],
          })),
      ),
    { minLength: 1, maxLength: 25 },
  )
  .map((list) => list.map((one, seq) => frameOf({ ...one, seq })));

const windows = fc.record({
  from: fc.integer({ min: -400, max: 5000 }).map((n) => epochSeconds(T0 + n / 8)),
  length: fc.oneof(fc.integer({ min: 1, max: 40 }), fc.integer({ min: 1, max: 8000 })),
  points: fc.integer({ min: 1, max: 200 }),
});

export const describeSampleStore = (name: string, { open, newPlace, runs }: StoreUnderTest) =>
  describe(`SampleStore: ${name}`, () => {
    const withStore = async (use: (store: SampleStore, place: string) => Promise<void>) => {
      const place = await newPlace();
      const store = await open(place);
      try {
        await use(store, place);
      } finally {
        await store.close();
      }
    };

    test('a frame that comes twice is stored once: in one batch, in two, and after a restart', async () => {
      const place = await newPlace();
      const first = await open(place);
      expect(await first.commit([ramp(0), ramp(1), ramp(0)])).toEqual([
        ...['stored', 'stored', 'duplicate'],
      ]);
      expect(await first.commit([ramp(1), ramp(2)])).toEqual(['duplicate', 'stored']);
      await first.close();
      const again = await open(place);
      expect(await again.commit([ramp(2), ramp(0, 'boot-2'), ramp(3)])).toEqual([
        ...['duplicate', 'stored', 'stored'],
      ]);
      expect(await again.has('n1', 'boot-1', 3)).toBe(true);
      expect(await again.has('n1', 'boot-1', 4)).toBe(false);
      expect(await again.has('n2', 'boot-1', 3)).toBe(false);
      const query = { node: 'n1', input: 'a', from: epochSeconds(T0), to: epochSeconds(T0 + 9) };
      const runsRead = await again.samples({ ...query, atMost: 1000 });
      expect(runsRead.map(({ boot, t0 }) => [boot, t0])).toEqual([
        ['boot-1', T0],
        ['boot-2', T0],
        ['boot-1', T0 + 0.1],
        ['boot-1', T0 + 0.2],
        ['boot-1', T0 + 0.30000000000000004],
      ]);
      await again.close();
    });

    test('samples come back as they were measured: type and every bit', () =>
      withStore(async (store) => {
        const inputs: InputBlock[] = [
          { input: 'f4', samples: Float32Array.of(0.1, NaN, -0, Infinity, -3.4e38) },
          { input: 'f8', samples: Float64Array.of(0.1, NaN, -0, -Infinity, 5e-324) },
          { input: 'i2', samples: Int16Array.of(-32768, 32767, 0, 1, -1) },
          { input: 'i4', samples: Int32Array.of(-2147483648, 2147483647, 0, 1, -1) },
        ];
        await store.commit([frameOf({ inputs })]);
        for (const { input, samples } of inputs) {
          const [run] = await store.samples({
            ...{ node: 'n1', input, from: epochSeconds(T0 - 1), to: epochSeconds(T0 + 1) },
            atMost: 5,
          });
          expect(run?.samples.constructor).toBe(samples.constructor);
          expect(Array.from(run?.samples ?? [], (x) => x)).toEqual(Array.from(samples));
          expect(run).toMatchObject({ boot: 'boot-1', t0: T0, dt: 0.01, input });
        }
      }));

    test('a view on a bigger buffer is stored as what it shows', () =>
      withStore(async (store) => {
        const big = Float32Array.from({ length: 100 }, (_, i) => i);
        await store.commit([frameOf({ inputs: [{ input: 'a', samples: big.subarray(10, 13) }] })]);
        const [run] = await store.samples({
          ...{ node: 'n1', input: 'a', from: epochSeconds(T0), to: epochSeconds(T0 + 1) },
          atMost: 3,
        });
        expect([...(run?.samples ?? [])]).toEqual([10, 11, 12]);
      }));

    test('the tally shows gaps by sequence, and backfill closes them', () =>
      withStore(async (store) => {
        await store.commit([ramp(0), ramp(1), ramp(5), ramp(3), ramp(7, 'boot-2')]);
        const ranges = async () =>
          (await store.tally()).map(({ boot, ranges: have, frames, samples }) => ({
            ...{ boot, have, frames, samples },
          }));
        expect(await ranges()).toEqual([
          {
            boot: 'boot-1',
            have: [
              [0, 1],
              [3, 3],
              [5, 5],
            ],
            frames: 4,
            samples: 40,
          },
          { boot: 'boot-2', have: [[7, 7]], frames: 1, samples: 10 },
        ]);
        await store.commit([ramp(4), ramp(2)]);
        expect((await ranges())[0]).toMatchObject({ have: [[0, 5]], frames: 6 });
      }));

    test('readings without sequence numbers are kept apart by time', () =>
      withStore(async (store) => {
        const reading = (t: number) =>
          frameOf({
            ...{ boot: 'senml/air', sequenced: false, seq: Math.round(t * 1e6), dt: seconds(0) },
            ...{ t0: epochSeconds(t) },
            inputs: [{ input: 'air', samples: Float64Array.of(18.5) }],
          });
        const outcome = await store.commit([reading(T0), reading(T0 + 0.5), reading(T0)]);
        expect(outcome).toEqual(['stored', 'stored', 'duplicate']);
        expect(await store.tally()).toMatchObject([{ sequenced: false, ranges: [], frames: 2 }]);
        const envelope = await store.envelope({
          series: { node: 'n1', input: 'air', over: null },
          ...{ from: epochSeconds(T0 - 1), to: epochSeconds(T0 + 10), points: 500 },
        });
        expect([...envelope.count]).toEqual([1, 1]);
      }));

    test('more samples than asked for are refused before they are read', () =>
      withStore(async (store) => {
        await store.commit([ramp(0), ramp(1)]);
        const query = { node: 'n1', input: 'a', from: epochSeconds(T0), to: epochSeconds(T0 + 1) };
        await expect(store.samples({ ...query, atMost: 19 })).rejects.toThrow(RangeError);
        expect(await store.samples({ ...query, atMost: 20 })).toHaveLength(2);
        expect(await store.samples({ ...query, node: 'n9', atMost: 1 })).toEqual([]);
      }));

    test('every point of every envelope is that of the plain samples, pairs too', async () => {
      await fc.assert(
        fc.asyncProperty(
          someFrames,
          fc.array(windows, { minLength: 1, maxLength: 6 }),
          (frames, list) =>
            withStore(async (store, place) => {
              const half = Math.ceil(frames.length / 2);
              await store.commit(frames.slice(0, half));
              if (frames.length > half) await store.commit(frames.slice(half));
              for (const { from, length, points } of list) {
                const window = { from, to: epochSeconds(from + length / 8), points };
                const a = { node: 'n1', input: 'a', over: null };
                const pair = { node: 'n1', input: 'b', over: 'ex' };
                await expectEnvelope(store, frames, { series: a, ...window });
                await expectEnvelope(store, frames, { series: pair, ...window });
              }
              expect(place).not.toBe('');
            }),
        ),
        { numRuns: runs, endOnFailure: true },
      );
    }, 60_000);

    test('one peak among a hundred thousand samples is in the envelope at every width', () =>
      withStore(async (store) => {
        const frames = Array.from({ length: 1000 }, (_, seq) => {
          const samples = new Float32Array(100).fill(1);
          if (seq === 617) samples[41] = 77;
          const t0 = epochSeconds(T0 + seq * 6.25);
          return frameOf({ seq, t0, dt: seconds(0.0625), inputs: [{ input: 'a', samples }] });
        });
        await store.commit(frames);
        const at = T0 + 617 * 6.25 + 41 * 0.0625;
        for (const points of [1, 7, 100, 2000, 20_000]) {
          const { t, max, step } = await store.envelope({
            series: { node: 'n1', input: 'a', over: null },
            ...{ from: epochSeconds(T0), to: epochSeconds(T0 + 6250), points },
          });
          const peaks = [...max].flatMap((x, i) => (x === 77 ? [t[i] ?? NaN] : []));
          expect(peaks).toHaveLength(1);
          expect(at - (peaks[0] ?? NaN)).toBeGreaterThanOrEqual(0);
          expect(at - (peaks[0] ?? NaN)).toBeLessThan(step);
        }
      }));

    test('nothing there: no points, no samples, no fault', () =>
      withStore(async (store) => {
        await store.commit([ramp(0)]);
        const ask = (input: string, from: number) =>
          store.envelope({
            series: { node: 'n1', input, over: null },
            ...{ from: epochSeconds(from), to: epochSeconds(from + 60), points: 100 },
          });
        expect((await ask('a', T0 + 100)).t).toHaveLength(0);
        expect((await ask('nowhere', T0)).t).toHaveLength(0);
      }));
  });
