import { accept, refuse, type Result } from '../../model/frame.ts';
import { isMap } from './frame.ts';
import { NAME, show, TOPIC_ROOT } from './topics.ts';

/** What a node is told, and what it answers. */
export interface CommandMessage {
  readonly id: string;
  readonly kind: 'shunt';
  readonly input: string;
  readonly on: boolean;
  readonly seconds: number;
}

export interface CommandAnswer {
  readonly id: string;
  readonly ok: boolean;
  /** Why not; null if it says nothing. */
  readonly why: string | null;
}

const LONGEST_SECONDS = 600;
const LONGEST_WORD = 200;
const WORD_IN_WORDS = `at most ${LONGEST_WORD} characters of text`;

export const commandTopic = (node: string): string => `${TOPIC_ROOT}/${node}/command`;
export const answerTopic = (node: string): string => `${commandTopic(node)}/answer`;

/** The node whose answer comes on this topic; null: another topic. */
export const answeringNode = (topic: string): string | null => {
  const node = topic.slice(TOPIC_ROOT.length + 1).split('/')[0] ?? '';
  return NAME.test(node) && topic === answerTopic(node) ? node : null;
};

const isId = (value: unknown): value is string =>
  typeof value === 'string' && value !== '' && value.length <= LONGEST_WORD;

/** As a node reads it; `inputs` are its own. Fields that are not known are passed over. */
export const decodeCommand = (
  parsed: unknown,
  inputs: readonly string[],
): Result<CommandMessage> => {
  if (!isMap(parsed)) return refuse('type', '(command)', 'a map', show(parsed));
  const { id, kind, input, on, seconds } = parsed;
  if (!isId(id)) return refuse('type', 'id', WORD_IN_WORDS, show(id));
  if (kind !== 'shunt') return refuse('name', 'kind', 'shunt', show(kind));
  if (typeof input !== 'string' || !inputs.includes(input)) {
    return refuse('name', 'input', `one of ${inputs.join(' ')}`, show(input));
  }
  if (typeof on !== 'boolean') return refuse('type', 'on', 'true or false', show(on));
  return typeof seconds === 'number' && seconds > 0 && seconds <= LONGEST_SECONDS
    ? accept({ id, kind, input, on, seconds })
    : refuse('range', 'seconds', `above 0, at most ${LONGEST_SECONDS}`, show(seconds));
};

export const decodeAnswer = (parsed: unknown): Result<CommandAnswer> => {
  if (!isMap(parsed)) return refuse('type', '(answer)', 'a map', show(parsed));
  const { id, ok, why = null } = parsed;
  if (!isId(id)) return refuse('type', 'id', WORD_IN_WORDS, show(id));
  if (typeof ok !== 'boolean') return refuse('type', 'ok', 'true or false', show(ok));
  return why === null || (typeof why === 'string' && why.length <= LONGEST_WORD)
    ? accept({ id, ok, why })
    : refuse('type', 'why', WORD_IN_WORDS, show(why));
};
