import type { ChildProcess } from 'node:child_process';
import { end, message, startPart } from './processes.ts';
import type { PublisherDone, PublisherTask } from './publisher.ts';

export type Task = Omit<PublisherTask, 'broker' | 'node'>;

/** Publishes for each node from a process of its own, begun together; frames a second of all. */
export const publishAll = async (
  broker: string,
  nodes: readonly { readonly id: string }[],
  task: Task,
): Promise<number> => {
  const parts: ChildProcess[] = [];
  try {
    for (const { id } of nodes) {
      const part = startPart('publisher.ts', JSON.stringify({ ...task, broker, node: id }));
      parts.push(part);
      await message(part);
    }
    const done = parts.map((part) => message<PublisherDone>(part));
    for (const part of parts) part.send('go');
    const results = await Promise.all(done);
    const elapsed = Math.max(...results.map((result) => result.elapsed));
    return results.reduce((sum, { frames }) => sum + frames, 0) / elapsed;
  } finally {
    await Promise.all(parts.map(end));
  }
};
