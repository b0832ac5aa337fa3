/** Entry of a store's threads: answers calls by name, one after the other. */
import { parentPort, workerData } from 'node:worker_threads';
import { SqliteReader } from './reader.ts';
import { SqliteRecords } from './records.ts';
import type { ExcitationPairs } from '../../ports.ts';
import { SqliteWriter } from './writer.ts';

export interface ThreadData {
  readonly role: 'writer' | 'reader';
  readonly folder: string;
  /** null: not said yet; see SampleStore.follow. */
  readonly pairs: ExcitationPairs | null;
}

export interface Call {
  readonly id: number;
  readonly part: 'samples' | 'records';
  readonly name: string;
  readonly args: readonly unknown[];
}

export interface Answer {
  readonly id: number;
  readonly value?: unknown;
  readonly error?: { readonly name: string; readonly message: string };
}

const { role, folder, pairs } = workerData as ThreadData;
const parts = {
  samples: role === 'writer' ? new SqliteWriter(folder, pairs) : new SqliteReader(folder),
  records: role === 'writer' ? new SqliteRecords(folder) : null,
};

const answer = ({ id, part, name, args }: Call): Answer => {
  try {
    const target = parts[part] as unknown as Record<string, (...args: unknown[]) => unknown>;
    return { id, value: target[name]?.(...args) };
  } catch (error) {
    const { name: kind, message } = error instanceof Error ? error : new Error(String(error));
    return { id, error: { name: kind, message } };
  }
};

parentPort?.on('message', (call: Call) => parentPort?.postMessage(answer(call)));
parentPort?.postMessage({ id: 0 } satisfies Answer);
