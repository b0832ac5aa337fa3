import { describe, expect, test } from 'vitest';
import { AlarmKeeper } from '../../../server/core/alarms.ts';
import { createCore } from '../../../server/core/core.ts';
import { PresentValues } from '../../../server/core/present.ts';
import { Tally } from '../../../server/core/tally.ts';
import { compileExpression } from '../../../server/site/expression.ts';
import type { Limit } from '../../../shared/model/limit.ts';
import { epochSeconds, seconds } from '../../../shared/model/units.ts';
import { planSite } from '../../../shared/pipeline/index.ts';
import { MOST_POINTS } from '../../../shared/protocol/parse.ts';
import { plainCore, SITE, START } from '../../helpers/core.ts';
import { fakeClock } from '../../helpers/fakes.ts';
import { memoryRecords } from '../../helpers/memory-records.ts';
import { memorySamples } from '../../helpers/memory-samples.ts';

const scene = () => {
  const [samples, records] = [memorySamples(), memoryRecords()];
  const plan = planSite(SITE, compileExpression);
  const clock = fakeClock(START);
  const limits = new Map<string, readonly Limit[]>();
  const told: string[] = [];
  const core = createCore({
    ...{ plan, samples, records, clock, limits },
    ...{ site: () => SITE, revision: () => 1, health: () => plainCore().health() },
    tally: new Tally(SITE, []),
    alarms: new AlarmKeeper(plan.channels, {}, [], []),
    present: new PresentValues(plan.channels),
    feed: {
      live: () => undefined,
      alarms: () => told.push('alarms'),
      nodes: () => undefined,
      limits: (channel) => told.push(`limits ${channel}`),
      health: () => undefined,
      revision: () => undefined,
    },
  });
  return { core, samples, records, told };
};

const limit = (level: Limit['level'], value: number, basis: Limit['basis'] = 'share'): Limit => ({
  ...{ level, basis, value, deadband: 0, onDelay: seconds(0) },
});
const BY = { author: 'Engineer', reason: 'for the proof load' };

test('limits that may stand are durable, in force, and browsers hear of them', async () => {
  const { core, records, told } = scene();
  const limits = [limit('caution', 0.5), limit('stop', 0.7)];
  expect(await core.setLimits('ratio', { limits, ...BY })).toEqual([]);
  expect(core.limits().ratio).toEqual(limits);
  expect(await records.limitsInForce()).toEqual([{ channel: 'ratio', limits, at: START, ...BY }]);
  expect(told).toEqual(['limits ratio', 'alarms']);
});

describe('refused, nothing changed', () => {
  // SITE: S275 at 19 mm has a yield of 265 MPa (EN 10025-2); the site allows 80 % of it.
  test.each([
    ['at yield', [limit('stop', 1)], '/limits/0/value', 'below yield'],
    ['at yield in MPa', [limit('stop', 265e6, 'stress')], '/limits/0/value', 'below yield'],
    ['above the site’s share', [limit('stop', 0.81)], '/limits/0/value', 'at most 80 % of yield'],
    ['caution past stop', [limit('caution', 0.7), limit('stop', 0.6)], '/limits/0/value', 'below'],
    ['another basis', [limit('stop', 5, 'value')], '/limits/0/basis', 'strain, stress, share'],
  ])('%s', async (_, limits, path, expected) => {
    const { core, records, told } = scene();
    const [fault] = await core.setLimits('ratio', { limits, ...BY });
    expect(fault?.path).toBe(path);
    expect(fault?.expected).toContain(expected);
    expect(core.limits().ratio).toBeUndefined();
    expect(await records.limitsInForce()).toEqual([]);
    expect(told).toEqual([]);
  });

  test('without a name, without a reason, for no channel', async () => {
    const { core } = scene();
    const faults = await core.setLimits('ratio', { limits: [], author: ' ', reason: '' });
    expect(faults.map(({ path }) => path)).toEqual(['/author', '/reason']);
    expect(await core.setLimits('nobody', { limits: [], ...BY })).toMatchObject([
      { path: 'channel', came: 'nobody' },
    ]);
  });
});

describe('history', () => {
  test.each([
    ['nobody', START, START + 1, 10, 'channel'],
    ['ratio', START, START, 10, 'to'],
    ['ratio', START, START + 1, 0, 'points'],
    ['ratio', START, START + 1, MOST_POINTS + 1, 'points'],
    ['ratio', START, START + 1, 1.5, 'points'],
  ])('of %s from %d to %d in %d points is refused', async (id, from, to, points, field) => {
    const { core } = scene();
    const answer = await core.history(id, epochSeconds(from), epochSeconds(to), points);
    expect(answer).toMatchObject({ ok: false, refusal: { field } });
  });

  test('has the step of its points, and gaps where an input was at its rail as float32', async () => {
    const { core, samples } = scene();
    // 0.004, the rail of SITE, is 0.004000000189989805 as float32.
    const values = Float32Array.of(1e-4, 0.004, 2e-4, 3e-4);
    await samples.commit([
      {
        frame: {
          ...{ node: 'n1', boot: 'b', seq: 0, sequenced: true },
          ...{ t0: epochSeconds(START), dt: seconds(1) },
          inputs: [{ input: 'ratio', samples: values }],
        },
        arrived: epochSeconds(START + 4),
      },
    ]);
    const answer = await core.history('ratio', epochSeconds(START), epochSeconds(START + 4), 4);
    if (!answer.ok) throw new Error(answer.refusal.expected);
    const { step, t, mean, simulated, derived } = answer.value;
    expect({ step, simulated, derived }).toEqual({ step: 1, simulated: true, derived: 'samples' });
    expect(t).toEqual([START, START + 1, START + 2, START + 3]);
    expect(mean.map((value) => value === null)).toEqual([false, true, false, false]);
  });
});
