/** The way of every message: decode → place → convert → alarm → commit → acknowledge → push. */
import type { Frame } from '../shared/model/frame.ts';
import { channelBlocks, VirtualStream, type SitePlan } from '../shared/pipeline/index.ts';
import type { AlarmKeeper } from './core/alarms.ts';
import type { Committer } from './core/committer.ts';
import type { PresentValues } from './core/present.ts';
import type { TemperatureLog } from './core/temperature-log.ts';
import type { Tally } from './core/tally.ts';
import type { Decode, Delivery, Feed } from './ports.ts';

export interface FlowParts {
  readonly plan: SitePlan;
  readonly knows: (node: string) => boolean;
  readonly decode: Decode;
  readonly tally: Tally;
  readonly alarms: AlarmKeeper;
  readonly present: PresentValues;
  readonly temperatures: TemperatureLog;
  readonly virtual: { readonly stream: VirtualStream };
  readonly committer: Committer;
  readonly feed: Feed;
}

export const createFlow = (parts: FlowParts): ((delivery: Delivery) => void) => {
  const { plan, knows, decode, tally, alarms, present, temperatures, virtual, committer, feed } =
    parts;

  const take = (frame: Frame, { arrived }: Delivery, settled: () => void) => {
    const placement = tally.place(frame, arrived);
    const measured = placement === 'again' ? [] : channelBlocks(frame, plan, temperatures.at);
    temperatures.accept(measured);
    // What came late meets what came with it, not what is under way at present.
    const stream = placement === 'late' ? new VirtualStream(plan.virtual) : virtual.stream;
    const blocks = [...measured, ...stream.accept(measured, placement === 'late')];
    const events = alarms.accept(blocks, placement === 'late');
    if (placement === 'next') feed.live(present.accept(blocks));
    committer.add({
      frame,
      arrived,
      events,
      settled: (outcome) => {
        tally.settled(frame, outcome);
        settled();
        if (events.length > 0) feed.alarms(alarms.list());
      },
    });
  };

  return (delivery) => {
    const message = decode(delivery);
    switch (message.kind) {
      case 'status':
        tally.status(message.node, message.online);
        return delivery.acknowledge();
      case 'refused':
        tally.refused(message.node, message.refusal, delivery.arrived);
        return delivery.acknowledge();
      case 'other':
        return delivery.acknowledge();
      case 'samples': {
        const { node, frames } = message;
        const stranger = {
          code: 'unknown-node',
          field: 'topic',
          expected: 'a node that the site file names',
          came: node,
        };
        const refusals = knows(node) ? message.refusals : [stranger];
        for (const refusal of refusals) tally.refused(node, refusal, delivery.arrived);
        if (!knows(node) || frames.length === 0) return delivery.acknowledge();
        let open = frames.length;
        for (const frame of frames)
          take(frame, delivery, () => --open === 0 && delivery.acknowledge());
      }
    }
  };
};
