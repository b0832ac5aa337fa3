import { expect, test } from 'vitest';
import { pastOf } from '../../../server/core/virtual-history.ts';
import { compileExpression } from '../../../server/site/expression.ts';
import { siteFormat } from '../../../server/site/format.ts';
import { sampleCount, type Frame } from '../../../shared/model/frame.ts';
import { measuredOf } from '../../../shared/model/site.ts';
import { epochSeconds, seconds, type EpochSeconds } from '../../../shared/model/units.ts';
import { channelBlocks, planSite, VirtualStream } from '../../../shared/pipeline/index.ts';
import { openStore } from '../../helpers/open-store.ts';
import { demoWith, placeOf } from '../../site/edit.ts';

const T0 = 1_800_000_000;
const [TOP, BOTTOM] = ['B1-mid-top-left', 'B1-mid-bottom-left'];

const siteOf = () => {
  const virtual = [
    { id: 'bend', name: 'Bending', definition: { kind: 'difference', of: [TOP, BOTTOM] } },
    {
      ...{ id: 'square', name: 'Square' },
      definition: {
        ...{ kind: 'expression', text: 'b^2', names: { b: 'bend' }, measurand: 'number' },
      },
    },
  ];
  const read = siteFormat.read(
    JSON.stringify(demoWith({ [`${placeOf('B1-mid')}/virtual`]: virtual })),
  );
  if (!read.ok) throw new Error(JSON.stringify(read.faults));
  return read.site;
};

const site = siteOf();
const plan = planSite(site, compileExpression);
const inputOf = (id: string) => {
  const found = measuredOf(site).find(({ channel }) => channel.id === id)?.channel;
  if (!found) throw new Error(id);
  return found;
};

/** Of both gauges, in one frame of the node if they share it, else in one each. */
const frames = (count: number, length: number): Frame[] =>
  [TOP, BOTTOM].flatMap((id, k) => {
    const { node, input } = inputOf(id);
    return Array.from({ length: count }, (_, seq) => ({
      ...{ node, boot: `b${k}`, seq, sequenced: true },
      ...{ t0: epochSeconds(T0 + (seq * length) / 64), dt: seconds(1 / 64) },
      inputs: [
        {
          input,
          samples: Float32Array.from(
            { length },
            (__, i) => 4e-4 * Math.sin((seq * length + i) / 37 + k),
          ),
        },
      ],
    }));
  });

const scene = async (all: readonly Frame[]) => {
  const store = await openStore();
  for (let i = 0; i < all.length; i += 200) {
    const part = all.slice(i, i + 200).map((frame) => ({ frame, arrived: epochSeconds(T0 + 1e4) }));
    await store.commit(part);
  }
  const ask = (id: string, from: EpochSeconds, to: EpochSeconds, points: number) => {
    const channel = plan.channels.find((one) => one.channel.id === id);
    if (!channel) throw new Error(id);
    return pastOf({ store, plan }, channel, from, to, points);
  };
  return { ask };
};

/** Every sample of a virtual channel as it came live. */
const live = (all: readonly Frame[], id: string) => {
  const index = plan.channels.findIndex(({ channel }) => channel.id === id);
  const stream = new VirtualStream(plan.virtual);
  const ordered = [...all].sort((a, b) => a.t0 - b.t0);
  return ordered
    .flatMap((frame, i) =>
      stream.accept(
        channelBlocks(frame, plan, () => null),
        i === ordered.length - 1,
      ),
    )
    .filter(({ channel }) => channel === index)
    .flatMap(({ t0, dt, values }) => [...values].map((value, i) => ({ t: t0 + i * dt, value })));
};

test.each(['bend', 'square'])(
  'the past of %s is what came live, every sample of it',
  async (id) => {
    const all = frames(40, 48);
    const { ask } = await scene(all);
    const [from, to] = [epochSeconds(T0 + 3.3), epochSeconds(T0 + 21.7)];
    const past = await ask(id, from, to, 30);
    expect(past.derived).toBe('samples');
    const samples = live(all, id).filter(({ t }) => t >= from && t < to);
    expect(samples.length).toBe(1177);
    let counted = 0;
    past.t.forEach((t, i) => {
      const place = Math.floor(t / past.step + 1e-9);
      const own = samples.filter((s) => Math.floor(s.t / past.step) === place).map((s) => s.value);
      counted += own.length;
      expect(past.min[i]).toBe(Math.min(...own));
      expect(past.max[i]).toBe(Math.max(...own));
      const mean = own.reduce((sum, x) => sum + x, 0) / own.length;
      expect((past.mean[i] ?? NaN) / mean).toBeCloseTo(1, 9);
    });
    expect(counted).toBe(samples.length);
  },
);

test('a window of more samples than are worked through says that it comes from means', async () => {
  const all = frames(200, 16_000);
  expect(all.reduce((sum, frame) => sum + sampleCount(frame), 0)).toBeGreaterThan(6e6);
  const { ask } = await scene(all);
  const past = await ask('bend', epochSeconds(T0), epochSeconds(T0 + 50_000), 100);
  expect(past.derived).toBe('means');
  const [top, bottom] = [
    await ask(TOP, epochSeconds(T0), epochSeconds(T0 + 50_000), 100),
    await ask(BOTTOM, epochSeconds(T0), epochSeconds(T0 + 50_000), 100),
  ];
  past.mean.forEach((value, i) => {
    expect(value).toBeCloseTo((top.mean[i] ?? NaN) - (bottom.mean[i] ?? NaN), 15);
  });
  expect(past.t.length).toBeGreaterThan(50);
}, 30_000);
