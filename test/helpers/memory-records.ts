import type { RecordStore } from '../../server/ports.ts';
import type { AlarmEvent } from '../../shared/model/limit.ts';

/** What alarms wrote, in memory; of the rest nothing is kept. */
export const memoryRecords = (): Pick<RecordStore, 'addAlarmEvents'> & {
  readonly events: AlarmEvent[];
} => {
  const events: AlarmEvent[] = [];
  return {
    events,
    addAlarmEvents: async (added) => {
      for (const event of added) {
        if (!events.some(({ id }) => id === event.id)) events.push(event);
      }
    },
  };
};
