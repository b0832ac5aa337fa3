import type { Frame } from '../../shared/model/frame.ts';
import type { AlarmEvent } from '../../shared/model/limit.ts';
import type { EpochSeconds } from '../../shared/model/units.ts';
import type { Clock, RecordStore, SampleStore, Stored } from '../ports.ts';

/** One frame on its way to being durable. */
export interface Entry {
  readonly frame: Frame;
  readonly arrived: EpochSeconds;
  readonly events: readonly AlarmEvent[];
  /** Called once, after the commit. */
  readonly settled: (outcome: Stored) => void;
}

export interface CommitterPorts {
  readonly samples: SampleStore;
  readonly records: Pick<RecordStore, 'addAlarmEvents'>;
  readonly clock: Clock;
  /** Told of every change: null when writing works, else why it does not. */
  readonly health: (trouble: string | null) => void;
}

/** Frames of one transaction at most; more wait for the next. */
const MOST_AT_ONCE = 256;
const RETRY_AFTER = 1;

/**
 * Group commit without waiting: whatever came while the last transaction was
 * under way goes into the next. Alarm events go down before the frames that
 * raised them: after a crash between the two the frames come again, and the
 * events, which have the same ids again, stay as they are. A failed transaction
 * is tried again, in order, until it succeeds; nothing is acknowledged meanwhile.
 */
export class Committer {
  readonly #ports: CommitterPorts;
  #waiting: Entry[] = [];
  #running: Promise<void> | null = null;
  #stopped = false;

  constructor(ports: CommitterPorts) {
    this.#ports = ports;
  }

  get waiting(): number {
    return this.#waiting.length;
  }

  add(entry: Entry): void {
    this.#waiting.push(entry);
    this.#start();
  }

  /** Resolves when nothing waits; gives up on a store that fails. */
  async stop(): Promise<void> {
    this.#stopped = true;
    await this.#running;
  }

  #start(): void {
    this.#running ??= this.#run().finally(() => {
      this.#running = null;
      if (this.#waiting.length > 0 && !this.#stopped) this.#start();
    });
  }

  async #run(): Promise<void> {
    let troubled = false;
    // One turn of the event loop, so that all of a socket's chunk goes together.
    await new Promise((resolve) => setImmediate(resolve));
    while (this.#waiting.length > 0) {
      const batch = this.#waiting.slice(0, MOST_AT_ONCE);
      const trouble = await this.#commit(batch);
      if (trouble === null) {
        this.#waiting.splice(0, batch.length);
        if (troubled) this.#ports.health(null);
        troubled = false;
      } else {
        troubled = true;
        this.#ports.health(trouble);
        if (this.#stopped) return;
        await new Promise<void>((resolve) => this.#ports.clock.after(RETRY_AFTER, resolve));
      }
    }
  }

  async #commit(batch: readonly Entry[]): Promise<string | null> {
    const { samples, records } = this.#ports;
    try {
      const events = batch.flatMap((entry) => entry.events);
      if (events.length > 0) await records.addAlarmEvents(events);
      const outcomes = await samples.commit(batch);
      batch.forEach((entry, i) => entry.settled(outcomes[i] ?? 'stored'));
      return null;
    } catch (error) {
      return error instanceof Error ? error.message : String(error);
    }
  }
}
