import { describe, expect, onTestFinished, test } from 'vitest';
import { AlarmKeeper } from '../../../server/core/alarms.ts';
import { compileExpression } from '../../../server/site/expression.ts';
import { openSqliteStores } from '../../../server/store/sqlite/open.ts';
import type { ChannelBlock } from '../../../shared/model/block.ts';
import type { Limit } from '../../../shared/model/limit.ts';
import { epochSeconds, seconds } from '../../../shared/model/units.ts';
import { planSite, type PlannedChannel } from '../../../shared/pipeline/index.ts';
import { SITE, START } from '../../helpers/core.ts';
import { temporaryFolder } from '../../helpers/process.ts';

const { channels } = planSite(SITE, compileExpression);
const [channel] = channels;
if (!channel) throw new Error('no channel');
const ID = channel.channel.id;

const limit = (level: Limit['level'], value: number, onDelay = 0): Limit => ({
  ...{ level, basis: 'strain', value, deadband: value / 10, onDelay: seconds(onDelay) },
});
const LIMITS = { [ID]: [limit('caution', 500e-6), limit('stop', 800e-6)] };

const block = (t0: number, ...values: number[]): ChannelBlock => ({
  ...{ channel: channel.index, t0: epochSeconds(t0), dt: seconds(0.01), quality: 'good' },
  ...{ values: Float64Array.from(values), last: values.at(-1) ?? NaN },
  ...{ min: Math.min(...values), max: Math.max(...values) },
});

const kinds = (keeper: AlarmKeeper) =>
  keeper.list().active.map(({ level, raised }) => [level, raised.at]);

test('one sample among thousands raises: every sample is looked at, none is thinned out', () => {
  const keeper = new AlarmKeeper(channels, LIMITS, [], []);
  const values = new Array<number>(5000).fill(100e-6);
  values[3210] = -900e-6;
  const events = keeper.accept([block(START, ...values)], false);
  expect(events.map(({ level, kind, at }) => [level, kind, at])).toEqual([
    ['caution', 'raised', START + 32.1],
    ['caution', 'returned', START + 32.11],
    ['stop', 'raised', START + 32.1],
    ['stop', 'returned', START + 32.11],
  ]);
  expect(events[0]).toMatchObject({ value: -900e-6, threshold: -500e-6 });
});

test('what was raised before a restart is raised after it, and returns once', () => {
  const before = new AlarmKeeper(channels, LIMITS, [], []);
  const raised = before.accept([block(START, 900e-6)], false);
  const after = new AlarmKeeper(channels, LIMITS, raised, raised);
  expect(kinds(after)).toEqual([
    ['stop', START],
    ['caution', START],
  ]);
  expect(after.accept([block(START + 5, 900e-6)], false)).toEqual([]);
  const returned = after.accept([block(START + 6, 0)], false);
  expect(returned.map(({ kind }) => kind)).toEqual(['returned', 'returned']);
  expect(after.list().active).toEqual([]);
});

test('the same crossing has the same id, however often it is computed', () => {
  const once = new AlarmKeeper(channels, LIMITS, [], []).accept([block(START, 900e-6)], false);
  const again = new AlarmKeeper(channels, LIMITS, [], []).accept([block(START, 900e-6)], false);
  expect(again.map(({ id }) => id)).toEqual(once.map(({ id }) => id));
});

test('a late block alarms in the past and leaves the present', () => {
  const keeper = new AlarmKeeper(channels, LIMITS, [], []);
  keeper.accept([block(START + 10, 100e-6)], false);
  const events = keeper.accept([block(START, 900e-6)], true);
  expect(events).toHaveLength(2);
  expect(keeper.list().active).toEqual([]);
  expect(keeper.list().recent).toHaveLength(2);
});

describe('what came late', () => {
  const backlog = [block(START - 50, 900e-6), block(START - 40, 100e-6)];

  test('leaves a standing alarm as it is, after a restart too', async () => {
    const { samples, records } = await openSqliteStores(temporaryFolder());
    onTestFinished(async () => {
      await samples.close();
      await records.close();
    });
    const before = new AlarmKeeper(channels, LIMITS, [], []);
    const events = [
      ...before.accept([block(START, 900e-6)], false),
      ...backlog.flatMap((one) => before.accept([one], true)),
    ];
    expect(events).toHaveLength(6);
    await records.addAlarmEvents(events);
    const last = await records.lastAlarmEvents();
    const after = new AlarmKeeper(channels, LIMITS, last, await records.alarmEvents(200));
    expect(after.list()).toEqual(before.list());
    expect(kinds(after)).toEqual([
      ['stop', START],
      ['caution', START],
    ]);
  });

  test('stands in the list at its own time', () => {
    const keeper = new AlarmKeeper(channels, { [ID]: [limit('stop', 800e-6)] }, [], []);
    keeper.accept([block(START, 900e-6)], false);
    for (const one of backlog) keeper.accept([one], true);
    keeper.accept([block(START + 1, 100e-6)], false);
    expect(keeper.list().recent.map(({ at, kind, late }) => [at - START, kind, late])).toEqual([
      [1, 'returned', false],
      [0, 'raised', false],
      [-40, 'returned', true],
      [-50, 'raised', true],
    ]);
  });
});

test('a limit that is taken away ends its alarm; another level goes on', () => {
  const keeper = new AlarmKeeper(channels, LIMITS, [], []);
  keeper.accept([block(START, 900e-6)], false);
  const ended = keeper.setLimits(channel, [limit('caution', 500e-6)], epochSeconds(START + 1));
  expect(ended.map(({ level, kind }) => [level, kind])).toEqual([['stop', 'returned']]);
  expect(kinds(keeper)).toEqual([['caution', START]]);
});

test('a lowered limit holds from the next sample on', () => {
  const keeper = new AlarmKeeper(channels, LIMITS, [], []);
  expect(keeper.accept([block(START, 300e-6)], false)).toEqual([]);
  keeper.setLimits(channel, [limit('stop', 200e-6)], epochSeconds(START + 1));
  expect(keeper.accept([block(START + 2, 300e-6)], false)).toMatchObject([{ level: 'stop' }]);
});

test('another set-up: channels that stay keep their alarms, those that go end them', () => {
  const keeper = new AlarmKeeper(channels, LIMITS, [], []);
  keeper.accept([block(START, 900e-6)], false);
  const moved: PlannedChannel = { ...channel, index: 0 };
  expect(keeper.replan([moved], LIMITS, epochSeconds(START + 1))).toEqual([]);
  expect(kinds(keeper)).toHaveLength(2);
  const ended = keeper.replan([], {}, epochSeconds(START + 2));
  expect(ended.map(({ kind }) => kind)).toEqual(['returned', 'returned']);
  expect(keeper.list().active).toEqual([]);
});
