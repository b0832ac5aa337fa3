import { randomUUID } from 'node:crypto';
import {
  answeringNode,
  commandTopic,
  decodeAnswer,
  type CommandMessage,
} from '../../shared/pipeline/1-decode/command.ts';
import type { Clock, CommandOutcome, NodeCommands } from '../ports.ts';
import { readJson } from './json.ts';

/** A node has to acknowledge within, s. */
export const ANSWER_WITHIN = 5;

interface Waiting {
  readonly node: string;
  readonly settle: (outcome: CommandOutcome) => void;
}

/** Commands on their way, by a broker that can publish (QoS 1, not retained). */
export class CommandPost implements NodeCommands {
  readonly #clock: Clock;
  readonly #publish: (topic: string, payload: string) => Promise<void>;
  readonly #waiting = new Map<string, Waiting>();

  constructor(clock: Clock, publish: (topic: string, payload: string) => Promise<void>) {
    this.#clock = clock;
    this.#publish = publish;
  }

  command: NodeCommands['command'] = (node, command) =>
    new Promise((resolve) => {
      const id = randomUUID();
      const settle = (outcome: CommandOutcome) => {
        cancel();
        if (this.#waiting.delete(id)) resolve(outcome);
      };
      const unanswered = (why: string) => settle({ ok: false, answered: false, why });
      const cancel = this.#clock.after(ANSWER_WITHIN, () =>
        unanswered(`${node} did not acknowledge the command within ${ANSWER_WITHIN} s.`),
      );
      this.#waiting.set(id, { node, settle });
      const message: CommandMessage = { id, ...command };
      this.#publish(commandTopic(node), JSON.stringify(message)).catch((error: unknown) =>
        unanswered(`The command did not go out: ${error instanceof Error ? error.message : ''}.`),
      );
    });

  /** true: it was an answer to a command, and is dealt with. */
  takes(topic: string, payload: Uint8Array): boolean {
    const node = answeringNode(topic);
    if (node === null) return false;
    const parsed = readJson(payload);
    const answer = parsed.ok ? decodeAnswer(parsed.value) : parsed;
    if (!answer.ok) {
      const { field, expected, came } = answer.refusal;
      const why = `${node} answered what cannot be read: ${field}: expected ${expected}, came ${came}.`;
      for (const { node: asked, settle } of [...this.#waiting.values()]) {
        if (asked === node) settle({ ok: false, answered: true, why });
      }
      return true;
    }
    const { id, ok, why } = answer.value;
    const waiting = this.#waiting.get(id);
    // An answer that came too late, or of another node, meets nobody.
    if (waiting?.node !== node) return true;
    const reason = `${node} refuses: ${why ?? 'it does not say why'}.`;
    waiting.settle(ok ? { ok } : { ok, answered: true, why: reason });
    return true;
  }

  /** The broker is going: nothing will be answered any more. */
  close(): void {
    for (const { settle } of [...this.#waiting.values()]) {
      settle({ ok: false, answered: false, why: 'The server is stopping.' });
    }
  }
}
