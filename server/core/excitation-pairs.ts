import type { ChannelPlan } from '../../shared/pipeline/index.ts';
import type { ExcitationPairs } from '../ports.ts';

/** Which inputs the channels read over another one. */
export const excitationPairs = (channels: readonly ChannelPlan[]): ExcitationPairs => {
  const pairs: Record<string, { input: string; over: string }[]> = {};
  for (const { channel, conversions } of channels) {
    for (const { excitation } of conversions) {
      const known = (pairs[channel.node] ??= []);
      const { input } = channel;
      if (excitation === null || known.some((p) => p.input === input && p.over === excitation)) {
        continue;
      }
      known.push({ input, over: excitation });
    }
  }
  return pairs;
};
