import { Worker } from 'node:worker_threads';
import type {
  ExcitationPairs,
  RecordStore,
  SampleStore,
  Stored,
  StoredFrame,
} from '../../ports.ts';
import { layoutText, packBody } from '../layout.ts';
import { sampleCount } from '../../../shared/model/frame.ts';
import type { Answer, Call, ThreadData } from './thread.ts';
import type { PackedFrame } from './writer.ts';

interface Waiting {
  readonly resolve: (value: unknown) => void;
  readonly reject: (error: Error) => void;
}

const LIMITS = { maxOldGenerationSizeMb: 256, maxYoungGenerationSizeMb: 8 };

/** Runs what was built; from source (in tests) by way of a loader that reads TypeScript. */
const startThread = (workerData: ThreadData): Worker => {
  const options = { workerData, resourceLimits: LIMITS };
  if (!import.meta.url.endsWith('.ts')) {
    return new Worker(new URL('./thread.js', import.meta.url), options);
  }
  const entry = JSON.stringify(new URL('./thread.ts', import.meta.url).href);
  const loader = JSON.stringify(import.meta.resolve('tsx/esm/api'));
  const code = `import(${loader}).then(({ register }) => { register(); return import(${entry}); })`;
  return new Worker(code, { ...options, eval: true });
};

/** Calls on a thread; a thread that ends rejects all that waits and all that comes. */
class Thread {
  readonly #worker: Worker;
  readonly #waiting = new Map<number, Waiting>();
  readonly ready: Promise<void>;
  #next = 1;
  #dead: Error | null = null;

  constructor(data: ThreadData) {
    this.#worker = startThread(data);
    this.ready = new Promise((resolve, reject) => {
      this.#waiting.set(0, { resolve: () => resolve(), reject });
    });
    this.#worker.on('message', ({ id, value, error }: Answer) => {
      const waiting = this.#waiting.get(id);
      this.#waiting.delete(id);
      if (!error) waiting?.resolve(value);
      else if (error.name === 'RangeError') waiting?.reject(new RangeError(error.message));
      else waiting?.reject(new Error(error.message));
    });
    this.#worker.on('error', (error) => this.#end(error));
    this.#worker.on('exit', (code) => this.#end(new Error(`store thread ended (${code})`)));
  }

  call<T>(part: Call['part'], name: string, args: readonly unknown[], moved: ArrayBuffer[] = []) {
    return new Promise<T>((resolve, reject) => {
      if (this.#dead) return reject(this.#dead);
      const id = this.#next++;
      this.#waiting.set(id, { resolve: resolve as (value: unknown) => void, reject });
      this.#worker.postMessage({ id, part, name, args } satisfies Call, moved);
    });
  }

  async end(): Promise<void> {
    await this.#worker.terminate();
  }

  #end(error: unknown): void {
    this.#dead ??= error instanceof Error ? error : new Error(String(error));
    for (const { reject } of this.#waiting.values()) reject(this.#dead);
    this.#waiting.clear();
  }
}

const pack = ({ frame, arrived }: StoredFrame): PackedFrame => {
  const { node, boot, seq, sequenced, t0, dt, inputs } = frame;
  return {
    ...{ node, boot, seq, sequenced, t0, dt, arrived, count: sampleCount(frame) },
    ...{ layout: layoutText(inputs), body: packBody(frame) },
  };
};

export interface SqliteStores {
  readonly samples: SampleStore;
  readonly records: RecordStore;
}

/**
 * The embedded store: one file of samples, one of records, in `folder`. One thread
 * writes and one reads, so that neither a disk nor a long look back ever holds up
 * what comes in. Rejects if the folder cannot be used.
 */
export const openSqliteStores = async (
  folder: string,
  pairs: ExcitationPairs | null = null,
): Promise<SqliteStores> => {
  const writer = new Thread({ role: 'writer', folder, pairs });
  await writer.ready;
  const reader = new Thread({ role: 'reader', folder, pairs });
  await reader.ready.catch(async (error: unknown) => {
    await writer.end();
    throw error;
  });
  let open = 2;
  const closeOne = async (part: Call['part']) => {
    await writer.call(part, 'close', []);
    if (part === 'samples') await reader.end();
    if (--open === 0) await writer.end();
  };
  const samples: SampleStore = {
    commit: (frames) => {
      const packed = frames.map(pack);
      return writer.call<Stored[]>(
        'samples',
        'commit',
        [packed],
        packed.map(({ body }) => body),
      );
    },
    follow: (next) => writer.call('samples', 'follow', [next]),
    has: (...args) => writer.call('samples', 'has', args),
    tally: () => writer.call('samples', 'tally', []),
    envelope: async (query) => {
      await writer.call('samples', 'flush', []);
      return reader.call('samples', 'envelope', [query]);
    },
    samples: (query) => reader.call('samples', 'samples', [query]),
    close: () => closeOne('samples'),
  };
  const records: RecordStore = {
    addAlarmEvents: (events) => writer.call('records', 'addAlarmEvents', [events]),
    alarmEvents: (atMost) => writer.call('records', 'alarmEvents', [atMost]),
    lastAlarmEvents: () => writer.call('records', 'lastAlarmEvents', []),
    addLimitChange: (change) => writer.call('records', 'addLimitChange', [change]),
    limitsInForce: () => writer.call('records', 'limitsInForce', []),
    addSiteRevision: (...args) => writer.call('records', 'addSiteRevision', args),
    siteRevision: () => writer.call('records', 'siteRevision', []),
    siteRevisions: (atMost) => writer.call('records', 'siteRevisions', [atMost]),
    addCheckRecords: (checks) => writer.call('records', 'addCheckRecords', [checks]),
    lastCheckRecords: () => writer.call('records', 'lastCheckRecords', []),
    close: () => closeOne('records'),
  };
  return { samples, records };
};
