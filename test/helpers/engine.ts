/** All that a message meets on its way, over an embedded store, without a broker and a page. */
import { AlarmKeeper } from '../../server/core/alarms.ts';
import { Committer } from '../../server/core/committer.ts';
import { CurrentSite } from '../../server/core/current-site.ts';
import { PresentValues } from '../../server/core/present.ts';
import { Tally } from '../../server/core/tally.ts';
import { TemperatureLog } from '../../server/core/temperature-log.ts';
import { createFlow } from '../../server/flow.ts';
import { createDecode } from '../../server/ingest/decode.ts';
import type { SampleStore } from '../../server/ports.ts';
import { compileExpression } from '../../server/site/expression.ts';
import { channelsOf, type Site } from '../../shared/model/site.ts';
import { epochSeconds } from '../../shared/model/units.ts';
import { VirtualStream } from '../../shared/pipeline/index.ts';
import type { LiveValue } from '../../shared/protocol/socket.ts';
import { fakeClock } from './fakes.ts';
import { memoryRecords } from './memory-records.ts';

export const createEngine = (site: Site, samples: SampleStore) => {
  const clock = fakeClock();
  const records = memoryRecords();
  const current = new CurrentSite(site, compileExpression);
  const limits = Object.fromEntries(
    channelsOf(site).map(({ channel }) => [channel.id, channel.limits]),
  );
  const tally = new Tally(site, []);
  const alarms = new AlarmKeeper(current.channels, limits, [], []);
  const present = new PresentValues(current.channels);
  const troubles: (string | null)[] = [];
  const committer = new Committer({
    ...{ samples, records, clock },
    health: (trouble) => troubles.push(trouble),
  });
  const live: LiveValue[] = [];
  const receive = createFlow({
    ...{ plan: current, tally, alarms, present, committer },
    temperatures: new TemperatureLog(current.measured),
    virtual: { stream: new VirtualStream(current.virtual) },
    knows: (node) => site.nodes.some(({ id }) => id === node),
    decode: createDecode(site),
    feed: {
      live: (values) => live.push(...values),
      alarms: () => undefined,
      nodes: () => undefined,
      limits: () => undefined,
      health: () => undefined,
      revision: () => undefined,
    },
  });
  /** Resolves when the message is acknowledged. */
  const deliver = (topic: string, payload: Uint8Array): Promise<void> =>
    new Promise((acknowledge) => {
      const arrived = epochSeconds(clock.now());
      receive({ topic, payload, retained: false, arrived, acknowledge });
    });
  return {
    clock,
    current,
    tally,
    alarms,
    present,
    records,
    committer,
    live,
    troubles,
    receive,
    deliver,
  };
};
