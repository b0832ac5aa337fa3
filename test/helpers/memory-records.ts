import type { LimitChange, RecordStore } from '../../server/ports.ts';
import type { AlarmEvent } from '../../shared/model/limit.ts';

type Kept = Pick<RecordStore, 'addAlarmEvents' | 'addLimitChange' | 'limitsInForce'>;

/** What alarms wrote, and changes of limits, in memory; of the rest nothing is kept. */
export const memoryRecords = (): Kept & { readonly events: AlarmEvent[] } => {
  const events: AlarmEvent[] = [];
  const changes = new Map<string, LimitChange>();
  return {
    events,
    addAlarmEvents: async (added) => {
      for (const event of added) {
        if (!events.some(({ id }) => id === event.id)) events.push(event);
      }
    },
    addLimitChange: async (change) => void changes.set(change.channel, change),
    limitsInForce: async () => [...changes.values()],
  };
};
