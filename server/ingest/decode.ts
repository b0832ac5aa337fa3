import { refuse, type Refusal, type Result } from '../../shared/model/frame.ts';
import type { Site } from '../../shared/model/site.ts';
import { decodeFrame, FRAME_TAGS } from '../../shared/pipeline/1-decode/frame.ts';
import { decodeSenml } from '../../shared/pipeline/1-decode/senml.ts';
import { decodeStatus } from '../../shared/pipeline/1-decode/status.ts';
import { SENML_TAGS } from '../../shared/pipeline/1-decode/tags.ts';
import { parseTopic, type NodeTopic } from '../../shared/pipeline/1-decode/topics.ts';
import type { Decode, Delivery, Message } from '../ports.ts';
import { readCbor } from './cbor.ts';
import { readJson } from './json.ts';

/** A message of ours may be this long, bytes; a longer one is refused, counted and done with. */
export const LONGEST_MESSAGE = 1_048_576;
/** Past so many bytes a message is not even read. */
export const LONGEST_READ = 16 * LONGEST_MESSAGE;

const EMPTY_NODE = '(no name)';

const chain = <A, B>(first: Result<A>, then: (value: A) => Result<B>): Result<B> =>
  first.ok ? then(first.value) : first;

/** Bytes on a topic to frames, a status, or the reason why not. Throws for nothing that comes in. */
export const createDecode = (site: Site): Decode => {
  const units = new Map(
    site.nodes.map(({ id, inputs }) => [id, new Map(inputs.map((i) => [i.name, i.unit]))]),
  );

  const decodeLeaf = ({ node, leaf }: NodeTopic, { payload, arrived }: Delivery): Message => {
    const refused = (refusal: Refusal): Message => ({ kind: 'refused', node, refusal });
    if (payload.length > LONGEST_MESSAGE) {
      const came = `${payload.length} bytes`;
      return refused(refuse('size', '(message)', `at most ${LONGEST_MESSAGE} bytes`, came).refusal);
    }
    switch (leaf) {
      case 'frame': {
        const frame = chain(readCbor(payload, FRAME_TAGS), (parsed) => decodeFrame(parsed, node));
        if (!frame.ok) return refused(frame.refusal);
        return { kind: 'samples', node, frames: [frame.value], refusals: [] };
      }
      case 'senml/json':
      case 'senml/cbor': {
        const form = leaf === 'senml/json' ? 'json' : 'cbor';
        const declared = (input: string) => units.get(node)?.get(input) ?? null;
        const parsed = form === 'json' ? readJson(payload) : readCbor(payload, SENML_TAGS);
        const pack = chain(parsed, (value) =>
          decodeSenml(value, { form, node, arrived, declared }),
        );
        return pack.ok ? { kind: 'samples', node, ...pack.value } : refused(pack.refusal);
      }
      case 'status': {
        // Clears what the broker retained [MQTT-3.3.1-10]; says nothing of the node.
        if (payload.length === 0) return { kind: 'other' };
        const status = chain(readJson(payload), decodeStatus);
        if (!status.ok) return refused(status.refusal);
        return { kind: 'status', node, online: status.value.online };
      }
    }
  };

  return (delivery) => {
    const topic = parseTopic(delivery.topic);
    if (!topic.ok) return { kind: 'refused', node: EMPTY_NODE, refusal: topic.refusal };
    return topic.value === null ? { kind: 'other' } : decodeLeaf(topic.value, delivery);
  };
};
