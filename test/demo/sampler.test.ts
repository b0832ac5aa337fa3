import { beforeAll, describe, expect, test } from 'vitest';
import { AlarmKeeper } from '../../server/core/alarms.ts';
import type { FaultRequest } from '../../server/demo/fault-request.ts';
import { influenceOf } from '../../server/demo/influence.ts';
import { PROGRAMME_SECONDS, programmeLoad } from '../../server/demo/programme.ts';
import { seededRandom } from '../../server/demo/random.ts';
import { createSampler, type Sampler } from '../../server/demo/sampler.ts';
import type { ChannelBlock } from '../../shared/model/block.ts';
import type { AlarmEvent } from '../../shared/model/limit.ts';
import type { Site } from '../../shared/model/site.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { channelBlocks, planSite, type SitePlan } from '../../shared/pipeline/index.ts';
import { demoSite } from './site.ts';
import { compileExpression } from '../../server/site/expression.ts';

/** After the last calibration of the demo's site; whole programmes and quiet steel from here. */
const BEGIN = epochSeconds(1_800_000_000);
const RATE = 100;

let site: Site;
let plan: SitePlan;
beforeAll(async () => {
  site = await demoSite();
  plan = planSite(site, compileExpression);
});

const samplers = (seed = 1): ReadonlyMap<string, Sampler> =>
  new Map(
    site.nodes.map((node, i) => [
      node.id,
      createSampler({ plan, node, begin: BEGIN, random: seededRandom(seed + i) }),
    ]),
  );

/** A node's samples from `since` on, through the pipeline: what the server makes of them. */
const measure = (node: string, sampler: Sampler, since: number, count: number): ChannelBlock[] => {
  const [t0, dt] = [epochSeconds(BEGIN + since), seconds(1 / RATE)];
  const inputs = sampler.block(t0, dt, count);
  const name = { node, boot: 'b', seq: 0, sequenced: true };
  return channelBlocks({ ...name, t0, dt, inputs }, plan, () => null);
};

const channelPlan = (id: string) => {
  const found = plan.channels.find(({ channel }) => channel.id === id);
  if (!found) throw new Error(id);
  return found;
};

const blockOf = (id: string, blocks: readonly ChannelBlock[]): ChannelBlock => {
  const found = blocks.find(({ channel }) => channel === channelPlan(id).index);
  if (!found) throw new Error(`${id} was not fed`);
  return found;
};

const meanOf = (values: Float64Array): number => values.reduce((a, b) => a + b, 0) / values.length;

/** Mean strain of a channel of node n1 over a second, some time after a fault began. */
const strainAfter = (sampler: Sampler, id: string, since: number) =>
  meanOf(blockOf(id, measure('n1', sampler, since, RATE)).values);

describe('from the lift through each calibration and back', () => {
  test.each([140, 239])(
    'after %d s every channel shows what is true, within its noise',
    (since) => {
      for (const [node, sampler] of samplers()) {
        const count = 400;
        for (const block of measure(node, sampler, since - 4, count)) {
          const { channel, member } = plan.channels[block.channel] ?? channelPlan('none');
          const station = member.stations.find(({ channels }) => channels.includes(channel));
          const influence = station && influenceOf(channel, member, station);
          if (!influence) throw new Error(channel.id);
          const load = programmeLoad(since - 2);
          const steel = 1.5 * Math.sin((2 * Math.PI * (BEGIN + since - 2)) / 3600);
          const expected =
            influence.atRest + influence.perNewton * load + influence.perSteelKelvin * steel;
          const mean = meanOf(block.values);
          const spread = Math.sqrt(meanOf(block.values.map((v) => (v - mean) ** 2)));
          // Five standard errors of the mean; the jack lets go some N within the four seconds.
          const within =
            (5 * influence.noise) / Math.sqrt(count) + Math.abs(influence.perNewton) * 20;
          expect(block.quality, channel.id).toBe('good');
          expect(Math.abs(mean - expected), channel.id).toBeLessThan(within);
          expect(spread / influence.noise, channel.id).toBeGreaterThan(0.8);
          expect(spread / influence.noise, channel.id).toBeLessThan(1.25);
        }
      }
    },
  );

  test('every measured channel is fed by one of the nodes', () => {
    const fed = [...samplers()].flatMap(([node, sampler]) => measure(node, sampler, 0, 1));
    expect(new Set(fed.map(({ channel }) => channel)).size).toBe(plan.measured.length);
  });

  test('counts are whole and the excitation is measured', () => {
    const inputs = samplers().get('n2')?.block(epochSeconds(BEGIN), 0.01, 50) ?? [];
    const samplesOf = (name: string) => inputs.find(({ input }) => input === name)?.samples;
    expect(samplesOf('s9')).toBeInstanceOf(Int32Array);
    expect(Math.abs(meanOf(Float64Array.from(samplesOf('ex') ?? [])) - 5)).toBeLessThan(0.003);
  });

  test('the same seed gives the same samples, another seed others', () => {
    const samples = (seed: number) => samplers(seed).get('n1')?.block(BEGIN, 0.01, 20);
    expect(samples(3)).toEqual(samples(3));
    expect(samples(3)).not.toEqual(samples(4));
  });
});

/** Alarm events of one whole programme, a request played at a time in it. */
const alarmsOf = (request: FaultRequest | null, at = 0): readonly AlarmEvent[] => {
  const limits = Object.fromEntries(
    plan.channels.map(({ channel }) => [channel.id, channel.limits]),
  );
  const keeper = new AlarmKeeper(plan.channels, limits, [], []);
  const events: AlarmEvent[] = [];
  for (const [node, sampler] of samplers()) {
    if (request) sampler.play(request, epochSeconds(BEGIN + at));
    for (let since = 0; since < PROGRAMME_SECONDS; since += 10) {
      events.push(...keeper.accept(measure(node, sampler, since, 10 * RATE), false));
    }
  }
  return events;
};

describe('alarms of the demo', () => {
  test('a whole programme raises none', () => {
    expect(alarmsOf(null)).toEqual([]);
  });

  test.each([0, 150])('an overload bump after %d s raises those of load and flange', (at) => {
    const events = alarmsOf({ fault: 'overload-bump' }, at);
    const raised = events.filter(({ kind }) => kind === 'raised');
    const names = raised.map(({ channel, level }) => `${channel} ${level}`);
    expect(names).toEqual(expect.arrayContaining(['hook-load stop', 'B1-mid-bottom-left caution']));
    expect(events.filter(({ kind }) => kind === 'returned')).toHaveLength(raised.length);
    for (const event of raised) expect(event.at).toBeGreaterThan(BEGIN + at);
    for (const event of raised) expect(event.at).toBeLessThan(BEGIN + at + 2);
  });
});

describe('faults', () => {
  const n1 = () => {
    const sampler = samplers().get('n1');
    if (!sampler) throw new Error('n1');
    return sampler;
  };

  test('a broken wire goes to the rail, is not believed, and comes back with none', () => {
    const sampler = n1();
    sampler.play({ fault: 'broken-wire', input: 's7' }, BEGIN);
    const broken = measure('n1', sampler, 0, 10);
    expect(blockOf('B1-mid-bottom-left', broken).quality).toBe('over-range');
    expect(blockOf('B1-mid-bottom-right', broken).quality).toBe('good');
    sampler.play({ fault: 'none' }, BEGIN);
    const mended = measure('n1', sampler, 1, 10);
    expect(blockOf('B1-mid-bottom-left', mended).quality).toBe('good');
  });

  test('a debonding gauge creeps under load and does not return', () => {
    const [sound, sampler] = [n1(), n1()];
    const id = 'B1-mid-bottom-left';
    sampler.play({ fault: 'debonding', input: 's7' }, BEGIN);
    const shares: number[] = [];
    for (let since = 112; since < 159; since++) {
      const [debonding, truth] = [strainAfter(sampler, id, since), strainAfter(sound, id, since)];
      shares.push(debonding / truth);
    }
    const hold = shares.slice(10);
    expect(hold.at(-1)).toBeLessThan((hold[0] ?? NaN) - 0.2);
    expect(hold.at(-1)).toBeGreaterThan(0.3);
    const unloaded = strainAfter(sampler, id, 235);
    expect(strainAfter(sound, id, 235)).toBeCloseTo(0, 5);
    expect(unloaded).toBeLessThan(-100e-6);
    expect(strainAfter(sampler, id, 238)).toBeCloseTo(unloaded, 6);
  });

  test('sun bends leg L1 alone, warms its steel by up to 15 K, and goes again', () => {
    const all = samplers();
    const [lift, yard] = [all.get('n1'), all.get('yard')];
    if (!lift || !yard) throw new Error('nodes');
    for (const sampler of [lift, yard]) sampler.play({ fault: 'sun' }, BEGIN);
    const unloaded = PROGRAMME_SECONDS - 10;
    const L1 = strainAfter(lift, 'L1-mid-bending', unloaded);
    // α 12e-6 /K (EN 1993-1-1 §3.2.6), half of the curvature held back: 0.5·α·ΔT/2.
    const expected = -0.5 * 12e-6 * (15 * (1 - Math.exp(-unloaded / 60))) * 0.5;
    expect(Math.abs(L1 - expected)).toBeLessThan(0.5e-6);
    expect(Math.abs(strainAfter(lift, 'L2-mid-bending', unloaded))).toBeLessThan(0.5e-6);
    const steel = (since: number) => blockOf('steel', measure('yard', yard, since, 1)).last;
    expect(steel(unloaded) - steel(-1)).toBeGreaterThan(13);
    expect(steel(300 + 10 * 60) - steel(-1)).toBeLessThan(2);
  });
});

describe('the shunt of a node', () => {
  // −Rg/(GF·(Rg + Rs)) of 350 Ω, GF 2.11 and 350 kΩ: parallel resistors, computed.
  const DUE = -473.46;

  test('adds the output of 350 kΩ across the gauge for as long as it is asked', () => {
    const sampler = samplers().get('n1');
    if (!sampler) throw new Error('n1');
    expect(sampler.shunt('s7', epochSeconds(BEGIN - 60), 10)).toBe(true);
    const [before, during, after] = [-61, -55, -49].map(
      (since) => strainAfter(sampler, 'B1-mid-bottom-left', since) * 1e6,
    );
    const step = (during ?? NaN) - (before ?? NaN);
    expect(step / DUE).toBeCloseTo(1, 2);
    expect(Math.abs((after ?? NaN) - (before ?? NaN))).toBeLessThan(0.5);
  });

  test('comes off early when it is told, and leaves inputs without a bridge alone', () => {
    const sampler = samplers().get('n1');
    if (!sampler) throw new Error('n1');
    sampler.shunt('s7', epochSeconds(BEGIN - 60), 10);
    sampler.shunt('s7', epochSeconds(BEGIN - 58), 0);
    const laid = strainAfter(sampler, 'B1-mid-bottom-left', -59.5) * 1e6;
    expect(laid / DUE).toBeCloseTo(1, 2);
    const left = strainAfter(sampler, 'B1-mid-bottom-left', -55) * 1e6;
    expect(Math.abs(left)).toBeLessThan(3);
    expect(sampler.shunt('s9', epochSeconds(BEGIN), 10)).toBe(false);
    expect(sampler.shunt('ex', epochSeconds(BEGIN), 10)).toBe(false);
  });
});
