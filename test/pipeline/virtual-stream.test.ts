import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { siteFormat } from '../../server/site/format.ts';
import { compileExpression } from '../../server/site/expression.ts';
import type { ChannelBlock, Quality } from '../../shared/model/block.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { planSite, VirtualStream } from '../../shared/pipeline/index.ts';
import { demoWith, placeOf } from '../site/edit.ts';

const T0 = 1_800_000_000;
const MID = placeOf('B1-mid');

/** The demo with virtual channels at midspan of B1. */
const planWith = (...virtual: object[]) => {
  const read = siteFormat.read(JSON.stringify(demoWith({ [`${MID}/virtual`]: virtual })));
  if (!read.ok) throw new Error(JSON.stringify(read.faults, null, 1));
  return planSite(read.site, compileExpression);
};

const TIPS = ['top-left', 'top-right', 'bottom-left', 'bottom-right'].map((at) => `B1-mid-${at}`);
const SIDES: Readonly<Record<string, readonly [y: number, z: number]>> = {
  'B1-mid-top-left': [150, 150],
  'B1-mid-top-right': [-150, 150],
  'B1-mid-bottom-left': [150, -150],
  'B1-mid-bottom-right': [-150, -150],
};
const section = (id: string, quantity: string) => ({
  ...{ id, name: id },
  definition: {
    ...{ kind: 'section', quantity },
    gauges: TIPS.map((channel) => {
      const [y_mm, z_mm] = SIDES[channel] ?? [NaN, NaN];
      return { channel, y_mm, z_mm };
    }),
  },
});
const difference = { kind: 'difference', of: [TIPS[0], TIPS[2]] };

const block = (
  channel: number,
  t0: number,
  dt: number,
  values: readonly number[],
  quality: Quality = 'good',
): ChannelBlock => ({
  ...{ channel, t0: epochSeconds(t0), dt: seconds(dt), values: Float64Array.from(values) },
  ...{ min: Math.min(...values), max: Math.max(...values), last: values.at(-1) ?? NaN, quality },
});

const scene = (...virtual: object[]) => {
  const plan = planWith(...virtual);
  const indexOf = (id: string) => plan.channels.findIndex(({ channel }) => channel.id === id);
  return { plan, indexOf, stream: new VirtualStream(plan.virtual) };
};

describe('gauges of one frame', () => {
  test('N, My, Mz of a known state of the section come back; plane sections, Gere', () => {
    const { plan, indexOf, stream } = scene(
      ...['axial', 'about-y', 'about-z', 'residual', 'highest-stress'].map((q) => section(q, q)),
    );
    const member = plan.channels[indexOf('axial')]?.member;
    if (!member) throw new Error('no member');
    const { area, inertiaY, inertiaZ, modulusY, modulusZ } = member.section;
    const { youngsModulus: e } = member.material;
    const [n, my, mz] = [100e3, 40e3, 2e3];
    const strains = TIPS.map((id) => {
      const [y = NaN, z = NaN] = (SIDES[id] ?? []).map((mm) => mm / 1e3);
      return n / (e * area) + (my * z) / (e * inertiaY) - (mz * y) / (e * inertiaZ);
    });
    const made = stream.accept(strains.map((x, i) => block(indexOf(TIPS[i] ?? ''), T0, 0.01, [x])));
    const valueOf = (id: string) =>
      made.find(({ channel }) => channel === indexOf(id))?.last ?? NaN;
    expect(valueOf('axial') / n).toBeCloseTo(1, 9);
    expect(valueOf('about-y') / my).toBeCloseTo(1, 9);
    expect(valueOf('about-z') / mz).toBeCloseTo(1, 9);
    expect(Math.abs(valueOf('residual'))).toBeLessThan(1e-15);
    const extreme = n / area + my / modulusY + mz / modulusZ;
    expect(valueOf('highest-stress') / extreme).toBeCloseTo(1, 9);
  });

  test('a gauge that is not believed makes what comes from it not believed', () => {
    const { indexOf, stream } = scene(section('axial', 'axial'));
    const made = stream.accept(
      TIPS.map((id, i) =>
        block(indexOf(id), T0, 0.01, [i === 2 ? NaN : 1e-4], i === 2 ? 'over-range' : 'good'),
      ),
    );
    expect(made).toMatchObject([{ last: NaN, quality: 'over-range' }]);
  });

  test('a virtual channel may come from one before it', () => {
    const { indexOf, stream } = scene(section('axial', 'axial'), {
      ...{ id: 'kilo', name: 'kilo' },
      definition: {
        ...{ kind: 'expression', text: '2 * n', names: { n: 'axial' }, measurand: 'force' },
      },
    });
    const made = stream.accept(TIPS.map((id) => block(indexOf(id), T0, 0.01, [1e-4, 2e-4])));
    const [axial, kilo] = ['axial', 'kilo'].map((id) =>
      made.find(({ channel }) => channel === indexOf(id)),
    );
    expect([...(kilo?.values ?? [])]).toEqual([...(axial?.values ?? [])].map((x) => 2 * x));
  });
});

describe('channels of different times', () => {
  const two = () => scene({ id: 'd', name: 'd', definition: difference });

  test('are brought to the time of the first, along the straight line', () => {
    const { indexOf, stream } = two();
    const [a, b] = [indexOf(TIPS[0] ?? ''), indexOf(TIPS[2] ?? '')];
    expect(stream.accept([block(a, T0 + 0.25, 0.5, [10, 20])])).toEqual([]);
    expect(stream.accept([block(b, T0, 0.5, [0, 1])])).toEqual([]);
    const [made] = stream.accept([block(b, T0 + 1, 0.5, [2, 3])]);
    expect([...(made?.values ?? [])]).toEqual([10 - 0.5, 20 - 1.5]);
  });

  test('whatever the frames are cut into, the values are the same', () => {
    const cuts = fc.array(fc.integer({ min: 1, max: 9 }), { minLength: 5, maxLength: 12 });
    fc.assert(
      fc.property(cuts, cuts, (mine, others) => {
        const { indexOf, stream } = two();
        const [a, b] = [indexOf(TIPS[0] ?? ''), indexOf(TIPS[2] ?? '')];
        const blocksOf = (channel: number, sizes: readonly number[], at: (t: number) => number) => {
          let n = 0;
          return sizes.map((size) => {
            const from = n;
            n += size;
            const values = Array.from({ length: size }, (_, i) => at((from + i) / 8));
            return block(channel, T0 + from / 8, 1 / 8, values);
          });
        };
        const all = [...blocksOf(a, mine, (t) => 5 * t), ...blocksOf(b, others, (t) => 2 * t)];
        all.sort((x, y) => x.t0 - y.t0);
        const made = all.flatMap((one) => stream.accept([one])).concat(stream.accept([], true));
        const end = others.reduce((sum, n) => sum + n, 0) - 1;
        for (const { t0, dt, values } of made) {
          values.forEach((value, i) => {
            const t = t0 - T0 + i * dt;
            if (t <= end / 8) expect(value).toBeCloseTo(3 * t, 9);
            else expect(value).toBeNaN();
          });
        }
        const count = made.reduce((sum, { values }) => sum + values.length, 0);
        expect(count).toBe(mine.reduce((sum, n) => sum + n, 0));
      }),
    );
  });

  test('one that stays away is not waited for longer than two seconds', () => {
    const { indexOf, stream } = two();
    const a = indexOf(TIPS[0] ?? '');
    const made = Array.from({ length: 4 }, (_, i) =>
      stream.accept([block(a, T0 + i, 0.5, [1, 1])]),
    );
    expect(made.map((blocks) => blocks.length)).toEqual([0, 0, 0, 1]);
    expect(made[3]).toMatchObject([{ last: NaN, quality: 'missing' }]);
  });

  test('a single reading holds until the next', () => {
    const { indexOf, stream } = two();
    const [a, b] = [indexOf(TIPS[0] ?? ''), indexOf(TIPS[2] ?? '')];
    stream.accept([block(b, T0, 0, [4])]);
    const [made] = stream.accept([block(a, T0 + 10, 0.1, [10, 11])]);
    expect([...(made?.values ?? [])]).toEqual([6, 7]);
  });
});
