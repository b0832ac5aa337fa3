import { describe, expect, test } from 'vitest';
import { PresentValues } from '../../../server/core/present.ts';
import { compileExpression } from '../../../server/site/expression.ts';
import type { ChannelBlock, Quality } from '../../../shared/model/block.ts';
import { epochSeconds, seconds } from '../../../shared/model/units.ts';
import { planSite, type PlannedChannel } from '../../../shared/pipeline/index.ts';
import { SITE, START } from '../../helpers/core.ts';
import { quarter, record, siteWith } from '../one-channel.ts';

const { channels } = planSite(SITE, compileExpression);

const block = (quality: Quality, ...values: number[]): ChannelBlock => ({
  ...{ channel: 0, t0: epochSeconds(START), dt: seconds(0.5), quality },
  ...{ values: Float64Array.from(values), last: values.at(-1) ?? NaN },
  ...{ min: Math.min(...values), max: Math.max(...values) },
});

const fresh = () => false;
const first = (present: PresentValues, isStale: (node: string) => boolean = fresh) =>
  present.values(isStale)[0];

test('nothing yet is no value and no time, however silent the node is', () => {
  const present = new PresentValues(channels);
  const nothing = { channel: 'ratio', value: null, at: null, quality: 'none' };
  expect(first(present)).toEqual(nothing);
  expect(first(present, () => true)).toEqual(nothing);
  expect(present.values(fresh).map(({ channel }) => channel)).toEqual(
    channels.map(({ channel }) => channel.id),
  );
});

test('the value is the last sample of the newest block, at its own time', () => {
  const present = new PresentValues(channels);
  present.accept([block('good', 1e-4, 3e-4, 2e-4)]);
  expect(first(present)).toEqual({
    ...{ channel: 'ratio', value: 2e-4, at: START + 1, quality: 'good' },
  });
});

test('displays get last, minimum and maximum, so that no peak is lost', () => {
  const live = new PresentValues(channels).accept([block('good', 1e-4, 9e-4, -5e-4, 2e-4)]);
  expect(live).toEqual([
    { channel: 0, at: START + 1.5, last: 2e-4, min: -5e-4, max: 9e-4, quality: 'good' },
  ]);
});

describe('a figure that is not to be believed', () => {
  test.each(['over-range', 'missing', 'excitation', 'uncalibrated'] as const)(
    '%s is said; the value stays what was believed last, at its time',
    (quality) => {
      const present = new PresentValues(channels);
      present.accept([block('good', 1e-4)]);
      present.accept([{ ...block(quality, NaN), t0: epochSeconds(START + 60) }]);
      expect(first(present)).toEqual({ channel: 'ratio', value: 1e-4, at: START, quality });
    },
  );

  test('uncorrected for temperature is believed all the same', () => {
    const present = new PresentValues(channels);
    present.accept([block('uncorrected', 1e-4)]);
    expect(first(present)).toMatchObject({ value: 1e-4, quality: 'uncorrected' });
  });
});

test('stale as soon as one of its nodes is, with the value that came last', () => {
  const [channel] = channels;
  if (!channel) throw new Error('no channel');
  const present = new PresentValues([{ ...channel, nodes: ['n1', 'n2'] }]);
  present.accept([block('good', 1e-4)]);
  expect(first(present, (node) => node === 'n3')).toMatchObject({ quality: 'good' });
  expect(first(present, (node) => node === 'n2')).toMatchObject({ value: 1e-4, quality: 'stale' });
});

describe('with another set-up', () => {
  const planOf = (gaugeFactor: number): PlannedChannel => {
    const site = siteWith({ calibration: [record('c1', START, quarter(gaugeFactor))] });
    const [plan] = planSite(site, compileExpression).channels;
    if (!plan) throw new Error('no channel');
    return plan;
  };
  const other = channels[1];
  if (!other) throw new Error('no channel');

  test('a channel that is derived as before keeps its value, wherever it stands now', () => {
    const present = new PresentValues([planOf(2)]);
    present.accept([block('good', 1e-4)]);
    present.replan([other, planOf(2)]);
    expect(present.values(fresh).map(({ value }) => value)).toEqual([null, 1e-4]);
  });

  test('one that is derived otherwise shows nothing until it has been', () => {
    const present = new PresentValues([planOf(2)]);
    present.accept([block('good', 1e-4)]);
    present.replan([planOf(2.1)]);
    expect(first(present)).toMatchObject({ value: null, at: null, quality: 'none' });
  });
});
