import { expect, test } from 'vitest';
import { Committer, type Entry } from '../../../server/core/committer.ts';
import type { RecordStore, SampleStore, Stored } from '../../../server/ports.ts';
import type { AlarmEvent } from '../../../shared/model/limit.ts';
import { epochSeconds, seconds } from '../../../shared/model/units.ts';
import { fakeClock } from '../../helpers/fakes.ts';

/** Ports that write down the order of things, and fail or wait when told. */
const scene = () => {
  const log: string[] = [];
  const gates: (() => void)[] = [];
  let failures = 0;
  let held = false;
  const samples: Pick<SampleStore, 'commit'> = {
    commit: async (frames) => {
      if (held) await new Promise<void>((resolve) => gates.push(resolve));
      if (failures > 0) {
        failures--;
        log.push('failed');
        throw new Error('disk full');
      }
      log.push(`frames ${frames.map(({ frame }) => frame.seq).join(',')}`);
      return frames.map((): Stored => 'stored');
    },
  };
  const records: Pick<RecordStore, 'addAlarmEvents'> = {
    addAlarmEvents: async (events) => {
      log.push(`events ${events.map(({ id }) => id).join(',')}`);
    },
  };
  const clock = fakeClock();
  const committer = new Committer({
    samples: samples as SampleStore,
    records,
    clock,
    health: (trouble) => log.push(`health ${trouble ?? 'ok'}`),
  });
  const entry = (seq: number, ...events: string[]): Entry => ({
    frame: {
      node: 'n1',
      boot: 'b',
      seq,
      sequenced: true,
      t0: epochSeconds(0),
      dt: seconds(0.1),
      inputs: [],
    },
    arrived: epochSeconds(0),
    events: events.map((id) => ({ id }) as AlarmEvent),
    settled: () => log.push(`ack ${seq}`),
  });
  return {
    log,
    clock,
    committer,
    entry,
    fail: (times: number) => (failures = times),
    hold: () => (held = true),
    release: () => {
      held = false;
      gates.splice(0).forEach((open) => open());
    },
  };
};

test('acknowledged only after the commit; alarm events go down before their frames', async () => {
  const { committer, entry, log } = scene();
  committer.add(entry(0));
  committer.add(entry(1, 'e1'));
  expect(log).toEqual([]);
  await committer.stop();
  expect(log).toEqual(['events e1', 'frames 0,1', 'ack 0', 'ack 1']);
});

test('what comes while a transaction is under way goes into the next, as one', async () => {
  const { committer, entry, log, hold, release } = scene();
  hold();
  committer.add(entry(0));
  await new Promise((resolve) => setImmediate(resolve));
  for (const seq of [1, 2, 3]) committer.add(entry(seq));
  release();
  await committer.stop();
  expect(log.filter((line) => line.startsWith('frames'))).toEqual(['frames 0', 'frames 1,2,3']);
});

test('a store that fails loses nothing: tried again in order, nothing acknowledged meanwhile', async () => {
  const { committer, entry, log, fail, clock } = scene();
  fail(2);
  committer.add(entry(0));
  committer.add(entry(1));
  const turns = async () => {
    for (let i = 0; i < 5; i++) await new Promise((resolve) => setImmediate(resolve));
  };
  await turns();
  expect(log).toEqual(['failed', 'health disk full']);
  committer.add(entry(2));
  clock.advance(1);
  await turns();
  clock.advance(1);
  await turns();
  await committer.stop();
  expect(log).toEqual([
    ...['failed', 'health disk full', 'failed', 'health disk full'],
    ...['frames 0,1,2', 'ack 0', 'ack 1', 'ack 2', 'health ok'],
  ]);
});
