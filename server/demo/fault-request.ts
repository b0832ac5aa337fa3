import { accept, refuse, type Result } from '../../shared/model/frame.ts';
import { show, TOPIC_ROOT } from '../../shared/pipeline/1-decode/topics.ts';

/** What a simulated node can be asked to play. */
export type FaultRequest =
  | { readonly fault: 'overload-bump' | 'sun' | 'none' }
  | { readonly fault: 'debonding' | 'broken-wire'; readonly input: string }
  | { readonly fault: 'drop-out'; readonly seconds: number };

export const demoTopic = (node: string): string => `${TOPIC_ROOT}/${node}/demo`;
/** Load and sun are the whole structure's: every node hears of them. */
export const DEMO_FILTER = demoTopic('+');

const NAMES = 'overload-bump, sun, debonding, broken-wire, drop-out or none';
const DROP_OUT_SECONDS = 20;
const LONGEST_DROP_OUT = 3600;

/** A request as read from JSON; `inputs` are those of the node that it was sent to. */
export const readFaultRequest = (
  parsed: unknown,
  inputs: readonly string[],
): Result<FaultRequest> => {
  if (typeof parsed !== 'object' || parsed === null) {
    return refuse('type', '(request)', 'a map', show(parsed));
  }
  const { fault, input, seconds = DROP_OUT_SECONDS } = parsed as Record<string, unknown>;
  switch (fault) {
    case 'overload-bump':
    case 'sun':
    case 'none':
      return accept({ fault });
    case 'debonding':
    case 'broken-wire':
      return typeof input === 'string' && inputs.includes(input)
        ? accept({ fault, input })
        : refuse('name', 'input', `one of ${inputs.join(' ')}`, show(input));
    case 'drop-out':
      return typeof seconds === 'number' && seconds > 0 && seconds <= LONGEST_DROP_OUT
        ? accept({ fault, seconds })
        : refuse('range', 'seconds', `above 0, at most ${LONGEST_DROP_OUT}`, show(seconds));
    default:
      return refuse('name', 'fault', NAMES, show(fault));
  }
};
