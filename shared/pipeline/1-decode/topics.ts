import { accept, refuse, type Result } from '../../model/frame.ts';

/** All topics begin so; the figure is the version of this tree and of what is sent on it. */
export const TOPIC_ROOT = 'yieldward/1';
/** Filter of everything that nodes publish. */
export const TOPIC_FILTER = `${TOPIC_ROOT}/#`;

const LEAVES = ['frame', 'senml/json', 'senml/cbor', 'status'] as const;
export type TopicLeaf = (typeof LEAVES)[number];

export interface NodeTopic {
  readonly node: string;
  readonly leaf: TopicLeaf;
}

/** Names of nodes and inputs: RFC 8428 §4.5.1 without the slash, 1 to 64 characters. */
export const NAME = /^[A-Za-z0-9][A-Za-z0-9\-:._]{0,63}$/;
export const NAME_IN_WORDS = '1 to 64 of A–Z a–z 0–9 - : . _, a letter or digit first';

export const topicOf = (node: string, leaf: TopicLeaf): string => `${TOPIC_ROOT}/${node}/${leaf}`;

/** null: a topic below our root that is none of the four and so not for us. */
export const parseTopic = (topic: string): Result<NodeTopic | null> => {
  if (!topic.startsWith(`${TOPIC_ROOT}/`)) return accept(null);
  const [node = '', ...rest] = topic.slice(TOPIC_ROOT.length + 1).split('/');
  const leaf = LEAVES.find((candidate) => candidate === rest.join('/'));
  if (!leaf) return accept(null);
  if (!NAME.test(node)) return refuse('name', 'topic', `a node of ${NAME_IN_WORDS}`, show(node));
  return accept({ node, leaf });
};

const SHOWN = 80;

const inWords = (value: unknown): string => {
  switch (typeof value) {
    case 'string':
      return JSON.stringify(value.slice(0, SHOWN));
    case 'number':
    case 'bigint':
    case 'boolean':
      return String(value);
    case 'undefined':
      return 'nothing';
    case 'object':
      if (value === null) return 'null';
      if (ArrayBuffer.isView(value)) return value.constructor.name;
      return Array.isArray(value) ? `an array of ${value.length}` : 'a map';
    default:
      return typeof value;
  }
};

/** What came, short enough to keep and to show. */
export const show = (value: unknown): string => {
  const text = inWords(value);
  return text.length > SHOWN ? `${text.slice(0, SHOWN - 1)}…` : text;
};
