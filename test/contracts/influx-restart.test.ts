import { afterAll, beforeAll, expect, test } from 'vitest';
import { openInfluxStore } from '../../server/store/influx/open.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { startInfluxd, type Influxd } from '../helpers/influxd.ts';
import { frameOf, PAIRS } from './sample-store.ts';

const T0 = 1_800_000_000;
let influxd: Influxd;
beforeAll(async () => {
  influxd = await startInfluxd();
});
afterAll(() => influxd.close());

const open = (place: string) => openInfluxStore(`influx+http://${influxd.host}/${place}`, PAIRS);

const steady = (seq: number, at: number, value: number) =>
  frameOf({
    ...{ seq, t0: epochSeconds(T0 + at), dt: seconds(0.25) },
    inputs: [{ input: 'a', samples: new Float32Array(8).fill(value) }],
  });

const window = { from: epochSeconds(T0), to: epochSeconds(T0 + 100) };

test('frames of one boot at the very same times are all kept, whatever order they come in', async () => {
  const store = await open('overlap');
  await store.commit([steady(0, 0, 1), steady(1, 0, 2), steady(2, 1, 3)]);
  await store.commit([steady(4, 50, 5)]);
  await store.commit([steady(3, 0.5, 4)]);
  const again = await open('overlap');
  await again.commit([steady(5, 0, 6)]);
  const runs = await again.samples({ node: 'n1', input: 'a', ...window, atMost: 1000 });
  const values = runs.map(({ samples }) => [...new Set(samples)]);
  expect(values).toEqual([[1], [2], [6], [4], [3], [5]]);
  const series = { node: 'n1', input: 'a', over: null };
  const { count, max } = await again.envelope({ series, ...window, points: 1 });
  expect([[...count], [...max]]).toEqual([[48], [6]]);
});

test('a database that dies refuses the commit; the same frames go in once when it is back', async () => {
  const store = await open('dies');
  await store.commit([steady(0, 0, 1)]);
  await influxd.kill();
  await expect(store.commit([steady(1, 2, 2), steady(2, 2, 3)])).rejects.toThrow();
  expect(await store.tally()).toMatchObject([{ frames: 1, ranges: [[0, 0]] }]);
  await influxd.start();
  const again = await open('dies');
  expect(await again.commit([steady(0, 0, 1), steady(2, 2, 3), steady(1, 2, 2)])).toEqual([
    ...['duplicate', 'stored', 'stored'],
  ]);
  expect(await again.tally()).toMatchObject([{ frames: 3, samples: 24, ranges: [[0, 2]] }]);
  const series = { node: 'n1', input: 'a', over: null };
  const { count, max } = await again.envelope({ series, ...window, points: 1 });
  expect([[...count], [...max]]).toEqual([[24], [3]]);
});

test('an address without a database, and one where nobody listens, are refused', async () => {
  await expect(openInfluxStore(`influx+http://${influxd.host}`, {})).rejects.toThrow(
    /expected influx\+http/,
  );
  await expect(openInfluxStore('influx+http://127.0.0.1:1/d', {})).rejects.toThrow();
});
