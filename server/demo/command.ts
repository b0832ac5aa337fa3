import { refuse, type Result } from '../../shared/model/frame.ts';
import type { FieldNode } from '../../shared/model/site.ts';
import type { EpochSeconds } from '../../shared/model/units.ts';
import { decodeCommand, type CommandAnswer } from '../../shared/pipeline/1-decode/command.ts';
import type { Sampler } from './sampler.ts';

/**
 * Obeys a command as read from JSON, and says how it went; a command that names no id cannot be
 * answered and is refused.
 */
export const obey = (
  parsed: unknown,
  node: FieldNode,
  sampler: Sampler,
  now: EpochSeconds,
): Result<CommandAnswer> => {
  const inputs = node.inputs.map(({ name }) => name);
  const command = decodeCommand(parsed, inputs);
  if (command.ok) {
    const { id, input, on, seconds } = command.value;
    const laid = sampler.shunt(input, now, on ? seconds : 0);
    const why = laid ? null : `${input} has no bridge to lay a shunt across`;
    return { ok: true, value: { id, ok: laid, why } };
  }
  const { field, expected, came } = command.refusal;
  const id = (parsed as { readonly id?: unknown } | null)?.id;
  if (field === 'id' || typeof id !== 'string') return refuse('type', field, expected, came);
  return {
    ok: true,
    value: { id, ok: false, why: `${field}: expected ${expected}, came ${came}` },
  };
};
