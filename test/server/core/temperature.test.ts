import { expect, test } from 'vitest';
import { channelEnvelope } from '../../../server/core/history.ts';
import { TemperatureLog } from '../../../server/core/temperature-log.ts';
import { siteFormat } from '../../../server/site/format.ts';
import type { Frame } from '../../../shared/model/frame.ts';
import { celsius, epochSeconds, seconds } from '../../../shared/model/units.ts';
import { channelBlocks, planSite, type TemperatureAt } from '../../../shared/pipeline/index.ts';
import { openStore } from '../../helpers/open-store.ts';
import { demoWith, inDemo, placeOf } from '../../site/edit.ts';
import { compileExpression } from '../../../server/site/expression.ts';

const TIP = 'B1-mid-top-left';
const PLACE = placeOf(TIP);
const T0 = 1_800_000_000;
const RESPONSE = {
  ...{ kind: 'bridge', circuit: 'quarter', gauge_factor: 2.1, gauge_resistance_ohm: 120 },
  ...{ leads: { kind: 'none' }, zero_mV_per_V: 0 },
};
/** a = (−30, 2.5, −0.06, 3e-4) µε, quoted at GF 2.0; GF 2.10 at 24 °C, +1 %/100 K; zero at 24 °C. */
const TEMPERATURE = {
  ...{ channel: 'steel', zero_Cel: 24, reference_Cel: 24, factor_percent_per_100_K: 1 },
  thermal_output: { coefficients_microstrain: [-30, 2.5, -0.06, 3e-4], quoted_gauge_factor: 2 },
};

const siteWith = (response: object) => {
  const read = siteFormat.read(
    JSON.stringify(demoWith({ [`${PLACE}/calibration/0/response`]: response })),
  );
  if (!read.ok) throw new Error(JSON.stringify(read.faults));
  return read.site;
};

const plan = planSite(siteWith({ ...RESPONSE, temperature: TEMPERATURE }), compileExpression);
const tip = plan.measured.find(({ channel }) => channel.id === TIP);
if (!tip) throw new Error('no such channel');

/** Quarter bridge, r = d/(4 + 2d): the output at which GF 2.1 indicates so many µε. */
const outputOf = (microstrain: number) => {
  const d = 2.1 * microstrain * 1e-6;
  return d / (4 + 2 * d);
};

const frameAt = (t0: number, microstrain: number): Frame => ({
  ...{ node: tip.channel.node, boot: 'b', seq: t0 - T0, sequenced: true },
  ...{ t0: epochSeconds(t0), dt: seconds(0.1) },
  inputs: [{ input: tip.channel.input, samples: new Float64Array(10).fill(outputOf(microstrain)) }],
});

const blockAt = (temperatureAt: TemperatureAt) =>
  channelBlocks(frameAt(T0, 809.52381), plan, temperatureAt)[0];

// Thermal chain: OIML R 62 and ASTM E251 terms, order value from memory; figures computed apart.
test('809.523810 µε indicated at GF 2.10 and 60 °C are 835.835943 µε', () => {
  const block = blockAt(() => celsius(60));
  expect((block?.last ?? NaN) * 1e6).toBeCloseTo(835.835943, 5);
  expect(block?.quality).toBe('good');
});

test('at the temperature of the zero the indicated strain stands', () => {
  expect((blockAt(() => celsius(24))?.last ?? NaN) * 1e6).toBeCloseTo(809.52381, 9);
});

test('without a temperature the value stands uncorrected, and says so', () => {
  const block = blockAt(() => null);
  expect((block?.last ?? NaN) * 1e6).toBeCloseTo(809.52381, 9);
  expect(block?.quality).toBe('uncorrected');
});

test('the log knows the temperature at a time, for as long as a reading holds', () => {
  const log = new TemperatureLog(plan.measured);
  expect(log.followed).toEqual(['steel']);
  const index = plan.channels.findIndex(({ channel }) => channel.id === 'steel');
  const note = (t: number, value: number) =>
    log.accept([
      {
        ...{ channel: index, t0: epochSeconds(t), dt: seconds(0), values: Float64Array.of(value) },
        ...{ min: value, max: value, last: value, quality: 'good' },
      },
    ]);
  expect(log.at('steel', T0)).toBeNull();
  note(T0, 20);
  note(T0 + 1, 21);
  note(T0 + 600, 30);
  expect(log.at('steel', T0 + 300)).toBe(20);
  expect(log.at('steel', T0 + 600)).toBe(30);
  expect(log.at('steel', T0 - 60)).toBe(20);
  expect(log.at('steel', T0 + 600 + 901)).toBeNull();
  expect(log.at('air', T0)).toBeNull();
});

test('the past is put right by the temperature of its own time', async () => {
  const samples = await openStore();
  const steel = plan.measured.find(({ channel }) => channel.id === 'steel');
  if (!steel) throw new Error('no steel channel');
  const frames = Array.from({ length: 20 }, (_, i) => frameAt(T0 + i, 809.52381));
  // 24 °C for ten seconds, then 60 °C; the demo's steel input gives °C as they are.
  const warmth = (i: number): Frame => ({
    ...{ node: steel.channel.node, boot: 's', seq: i, sequenced: true },
    ...{ t0: epochSeconds(T0 + i), dt: seconds(0) },
    inputs: [{ input: steel.channel.input, samples: Float64Array.of(i < 10 ? 24 : 60) }],
  });
  await samples.commit(
    [...frames, ...frames.map((_, i) => warmth(i))].map((frame) => ({
      frame,
      arrived: epochSeconds(T0 + 30),
    })),
  );
  const past = {
    store: samples,
    planOf: (id: string) => plan.measured.find(({ channel }) => channel.id === id),
  };
  const [from, to] = [epochSeconds(T0), epochSeconds(T0 + 20)];
  const { mean } = await channelEnvelope(past, tip, from, to, 20);
  const microstrain = mean.map((value) => (value ?? NaN) * 1e6);
  expect(microstrain).toHaveLength(20);
  for (const value of microstrain.slice(0, 10)) expect(value).toBeCloseTo(809.52381, 5);
  for (const value of microstrain.slice(10)) expect(value).toBeCloseTo(835.835943, 5);
});

test('a thermal output that the bridge takes off by itself may not be taken off again', () => {
  const response = { ...RESPONSE, circuit: 'half-bending', temperature: TEMPERATURE };
  const json = demoWith({ [`${PLACE}/calibration/0/response`]: response });
  const read = siteFormat.read(JSON.stringify(json));
  expect(read.ok ? [] : read.faults).toEqual([
    {
      path: `${PLACE}/calibration/0/response/temperature/thermal_output`,
      expected: 'none with a half-bending bridge: its adjacent gauges take it off',
      came: 'a polynomial',
    },
  ]);
});

test.each([
  ['another', 'nobody', 'a known channel'],
  ['a strain', 'B1-mid-top-right', 'a temperature channel'],
])('%s channel for the temperature is refused', (_, channel, expected) => {
  const response = { ...RESPONSE, temperature: { ...TEMPERATURE, channel } };
  const json = demoWith({ [`${PLACE}/calibration/0/response`]: response });
  const read = siteFormat.read(JSON.stringify(json));
  const [fault] = read.ok ? [] : read.faults;
  expect(fault?.path).toBe(`${PLACE}/calibration/0/response/temperature/channel`);
  expect(fault?.expected).toContain(expected);
  expect(inDemo(`${PLACE}/id`)).toBe(TIP);
});
