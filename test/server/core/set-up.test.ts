import { describe, expect, test } from 'vitest';
import { channelEnvelope } from '../../../server/core/history.ts';
import type { SampleStore } from '../../../server/ports.ts';
import { epochSeconds, seconds } from '../../../shared/model/units.ts';
import type { PreviewLine } from '../../../shared/protocol/http.ts';
import { demo, demoWith, inDemo, placeOf } from '../../site/edit.ts';
import { NOW, setUpScene } from './set-up-scene.ts';

const TIP = 'B1-mid-top-left';
const PLACE = placeOf(TIP);
const RECORD = inDemo(`${PLACE}/calibration/0`) as {
  readonly id: string;
  readonly response: { readonly gauge_factor: number };
};
const BY = { author: 'Test engineer', reason: 'Gauge factor off the packet was typed wrongly' };

/** The demo with the tip's gauge factor put right by a correction. */
const corrected = (gaugeFactor: number) =>
  demoWith({
    [`${PLACE}/calibration`]: [
      RECORD,
      {
        ...RECORD,
        ...{ id: `${RECORD.id}b`, corrects: RECORD.id, author: BY.author, reason: BY.reason },
        response: { ...RECORD.response, gauge_factor: gaugeFactor },
      },
    ],
  });

const INPUT = inDemo(`${PLACE}/input`) as string;
const NODE = inDemo(`${PLACE}/node`) as string;

/** An hour of the tip at 1/s, half an hour before now: 0.5 mV/V up and down. */
const fill = async (samples: SampleStore) => {
  const frames = Array.from({ length: 60 }, (_, seq) => ({
    frame: {
      ...{ node: NODE, boot: 'b1', seq, sequenced: true },
      ...{ t0: epochSeconds(NOW - 5400 + seq * 60), dt: seconds(1) },
      inputs: [
        {
          input: INPUT,
          samples: Float32Array.from({ length: 60 }, (__, i) => 5e-4 * Math.sin(seq + i / 60)),
        },
      ],
    },
    arrived: epochSeconds(NOW),
  }));
  await samples.commit(frames);
};

const all = async (lines: AsyncGenerator<PreviewLine>) => {
  const got: PreviewLine[] = [];
  for await (const line of lines) got.push(line);
  return got;
};

test('a correction re-derives what is past, on read; the raw figures stay', async () => {
  const { samples, current, setUp } = await setUpScene();
  await fill(samples);
  const past = async () => {
    const plan = current.measured.find(({ channel }) => channel.id === TIP);
    if (!plan) throw new Error('no such channel');
    const [from, to] = [epochSeconds(NOW - 5400), epochSeconds(NOW - 1800)];
    return channelEnvelope({ store: samples, planOf: () => undefined }, plan, from, to, 60);
  };
  const raw = () =>
    samples.samples({
      ...{ node: NODE, input: INPUT, atMost: 1e4 },
      ...{ from: epochSeconds(NOW - 5400), to: epochSeconds(NOW) },
    });
  const [before, rawBefore] = [await past(), await raw()];
  const factor = RECORD.response.gauge_factor;
  const outcome = await setUp.change({ ...BY, document: corrected(2 * factor), basedOn: 1 });
  expect(outcome).toEqual({ kind: 'changed', revision: 2 });
  const after = await past();
  expect(before.t.length).toBeGreaterThan(50);
  // ε is inversely proportional to the gauge factor: ε = (ΔR/R)/GF, ASTM E251.
  after.mean.forEach((value, i) => {
    expect((value ?? NaN) / (before.mean[i] ?? NaN)).toBeCloseTo(0.5, 12);
  });
  expect(await raw()).toEqual(rawBefore);
});

test('what would change is said beforehand, with its progress, and nothing is changed', async () => {
  const { samples, setUp, adopted } = await setUpScene();
  await fill(samples);
  const factor = RECORD.response.gauge_factor;
  const preview = setUp.preview(corrected(factor * 1.05));
  if (!preview.ok) throw new Error(JSON.stringify(preview.faults));
  const lines = await all(preview.lines);
  const progress = lines.filter((line) => line.kind === 'progress');
  expect(progress.at(-1)).toMatchObject({ done: progress.length, of: progress.length });
  const result = lines.at(-1);
  if (result?.kind !== 'result') throw new Error('no result');
  expect(result.channels).toHaveLength(1);
  const [change] = result.channels;
  expect(change).toMatchObject({ channel: TIP, to: NOW });
  expect((change?.before?.max ?? NaN) / (change?.after?.max ?? NaN)).toBeCloseTo(1.05, 9);
  expect((change?.before?.min ?? NaN) / (change?.after?.min ?? NaN)).toBeCloseTo(1.05, 9);
  const { largest } = change ?? {};
  expect((largest?.before ?? NaN) / (largest?.after ?? NaN)).toBeCloseTo(1.05, 9);
  expect(adopted).toEqual([]);
  expect(setUp.revision).toBe(1);
});

test('a change of nothing that is measured changes no past', async () => {
  const { setUp } = await setUpScene();
  const preview = setUp.preview(demoWith({ '/name': 'Saltmarsh' }));
  expect(preview.ok && (await all(preview.lines))).toEqual([{ kind: 'result', channels: [] }]);
});

test('of two who change the same revision the second is told, and nothing of his is taken', async () => {
  const { setUp, records } = await setUpScene();
  const one = setUp.change({ ...BY, document: demoWith({ '/name': 'One' }), basedOn: 1 });
  const two = setUp.change({
    ...{ document: demoWith({ '/name': 'Two' }), basedOn: 1 },
    ...{ author: 'Technician', reason: 'another name' },
  });
  expect(await one).toEqual({ kind: 'changed', revision: 2 });
  expect(await two).toEqual({ kind: 'conflict', revision: 2, at: NOW, ...BY });
  expect(JSON.parse((await records.siteRevision())?.text ?? '')).toMatchObject({ name: 'One' });
});

test('new records are stamped with the time, those there were not', async () => {
  const { setUp, clock } = await setUpScene();
  clock.advance(60);
  await setUp.change({ ...BY, document: corrected(2.1), basedOn: 1 });
  const text = JSON.stringify(setUp.answer().document);
  expect(text.match(/"recorded_at":"[^"]*"/g)).toEqual([
    '"recorded_at":"2026-11-30T08:01:00.000Z"',
  ]);
});

test('export and import round-trip: what stands may be put in its own place', async () => {
  const { setUp } = await setUpScene();
  const { document } = setUp.answer();
  expect(document).toEqual(demo);
  expect(await setUp.change({ ...BY, document, basedOn: 1 })).toMatchObject({ kind: 'changed' });
  expect(setUp.answer().document).toEqual(demo);
});

test('limits in force are in the document, and limits of a document come in force', async () => {
  const { setUp, limits, adopted } = await setUpScene();
  limits.set(TIP, [
    { level: 'stop', basis: 'stress', value: 150e6, deadband: 5e6, onDelay: seconds(0.5) },
  ]);
  const { document } = setUp.answer();
  const stated = { level: 'stop', basis: 'stress_MPa', value: 150, deadband: 5, on_delay_s: 0.5 };
  expect(document).toEqual(demoWith({ [`${PLACE}/limits`]: [stated] }));
  const other = demoWith({ [`${PLACE}/limits`]: [{ ...stated, value: 140 }] });
  await setUp.change({ ...BY, document: other, basedOn: 1 });
  expect(adopted).toEqual([
    [
      {
        ...{ ...BY, channel: TIP, at: NOW },
        limits: [
          { level: 'stop', basis: 'stress', value: 140e6, deadband: 5e6, onDelay: seconds(0.5) },
        ],
      },
    ],
  ]);
});

describe('refused, with field, expected and came', () => {
  const refusal = async (document: unknown, by = BY) => {
    const { setUp } = await setUpScene();
    const outcome = await setUp.change({ ...by, document, basedOn: 1 });
    expect(setUp.revision).toBe(1);
    return outcome.kind === 'refused' ? outcome.faults : [];
  };

  test('a record that is edited instead of corrected', async () => {
    const edited = demoWith({ [`${PLACE}/calibration/0/response/gauge_factor`]: 2.2 });
    expect(await refusal(edited)).toEqual([
      {
        path: `${PLACE}/calibration/0`,
        expected: `record ${RECORD.id} as it was: records are added, or corrected by another`,
        came: 'changed',
      },
    ]);
  });

  test('a record that is gone', async () => {
    const place = placeOf('hook-load');
    const [first] = inDemo(`${place}/calibration`) as unknown[];
    const faults = await refusal(demoWith({ [`${place}/calibration`]: [first] }));
    expect(faults).toMatchObject([{ path: `${place}/calibration/1`, came: 'nothing' }]);
  });

  test('simulated figures made real', async () => {
    expect(await refusal(demoWith({ '/simulated': false }))).toMatchObject([
      { path: '/simulated', came: 'false' },
    ]);
  });

  test('a site file with faults, and nobody who answers for it', async () => {
    const faults = await refusal(demoWith({ [`${placeOf('B1')}/section`]: 'HE 301 B' }), {
      ...{ author: ' ', reason: '' },
    });
    const paths = faults.map(({ path }) => path);
    expect(paths).toEqual(['/author', '/reason', `${placeOf('B1')}/section`]);
  });
});
