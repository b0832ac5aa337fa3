import { accept, refuse, type Result } from '../../model/frame.ts';
import { isMap } from './frame.ts';
import { show } from './topics.ts';

/** What a node says of itself, retained; its will says the same with `online` false. */
export interface NodeStatus {
  readonly online: boolean;
  readonly boot: string | null;
  readonly software: string | null;
}

const LONGEST = 200;

const isWord = (value: unknown): value is string | null =>
  value === null || (typeof value === 'string' && value.length <= LONGEST);

export const decodeStatus = (parsed: unknown): Result<NodeStatus> => {
  if (!isMap(parsed)) return refuse('type', '(status)', 'a map', show(parsed));
  const { v, online, boot = null, software = null } = parsed;
  if (v !== 1) return refuse('version', 'v', '1', show(v));
  if (typeof online !== 'boolean') return refuse('type', 'online', 'true or false', show(online));
  const expected = `at most ${LONGEST} characters of text`;
  if (!isWord(boot)) return refuse('type', 'boot', expected, show(boot));
  if (!isWord(software)) return refuse('type', 'software', expected, show(software));
  return accept({ online, boot, software });
};

export const encodeStatus = (status: NodeStatus): object => ({ v: 1, ...status });
