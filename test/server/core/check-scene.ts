import { ChannelChecks } from '../../../server/core/channel-checks.ts';
import type { CheckLines, CommandOutcome, NodeCommand } from '../../../server/ports.ts';
import { siteFormat } from '../../../server/site/format.ts';
import { apply, inverse } from '../../../shared/model/fractional-linear.ts';
import { epochSeconds, seconds } from '../../../shared/model/units.ts';
import { conversionAt } from '../../../shared/pipeline/index.ts';
import type { CheckLine } from '../../../shared/protocol/checks.ts';
import { normal } from '../../channel-check/signals.ts';
import { setUpScene } from './set-up-scene.ts';

export const RATE = 50;

/** A channel's true value over time, SI; `noise` beside it. */
export interface Feed {
  readonly channel: string;
  readonly at: (t: number) => number;
  readonly noise?: number;
}

/** Checks over an embedded store that is fed by hand, with nodes that answer as they are told. */
export const checkScene = async (
  answer: (node: string, command: NodeCommand) => CommandOutcome = () => ({ ok: true }),
) => {
  const scene = await setUpScene();
  const { samples, current, clock } = scene;
  const told: (NodeCommand & { node: string })[] = [];
  const checks = new ChannelChecks({
    ...{ ...scene, format: siteFormat },
    commands: {
      command: async (node, command) => {
        told.push({ node, ...command });
        return answer(node, command);
      },
    },
  });
  let seq = 0;
  /** What the node's inputs show of these channels from one time to another. */
  const feed = async (from: number, to: number, ...feeds: readonly Feed[]) => {
    for (const { channel, at, noise = 0.5e-6 } of feeds) {
      const plan = current.measured.find((one) => one.channel.id === channel);
      const conversion = plan?.conversions[conversionAt(plan.conversions, from)];
      if (!plan || !conversion) throw new Error(channel);
      const scatter = normal(seq + 1);
      const forward = inverse(conversion.map);
      const count = Math.round((to - from) * RATE);
      const supply = conversion.excitation === null ? 1 : 5;
      const figures = Float64Array.from(
        { length: count },
        (_, i) => apply(forward, at(from + i / RATE) + noise * scatter()) * supply,
      );
      const inputs = [{ input: plan.channel.input, samples: figures }];
      if (conversion.excitation !== null) {
        const supplies = Float64Array.from({ length: count }, () => supply);
        inputs.push({ input: conversion.excitation, samples: supplies });
      }
      const frame = {
        ...{ node: plan.channel.node, boot: `b${channel}`, seq: seq++, sequenced: true },
        ...{ t0: epochSeconds(from), dt: seconds(1 / RATE), inputs },
      };
      await samples.commit([{ frame, arrived: epochSeconds(to) }]);
    }
  };
  /** All lines; `during` hears each as it comes, and lets time pass. */
  const lines = async (
    begun: CheckLines,
    during: (line: CheckLine) => Promise<void> | void = (line) => {
      if (line.kind === 'phase') setImmediate(() => clock.advance(line.seconds));
    },
  ): Promise<CheckLine[]> => {
    if (!begun.ok) throw new Error(JSON.stringify(begun.faults));
    const all: CheckLine[] = [];
    for await (const line of begun.lines) {
      all.push(line);
      await during(line);
    }
    return all;
  };
  /** The latest verdict of a kind of check of a channel. */
  const stands = async (channel: string, kind: string) => {
    const { channels } = await checks.answer();
    const found = channels.find((one) => one.channel === channel);
    return found?.checks.find(({ check }) => check.kind === kind);
  };
  return { ...scene, checks, told, feed, lines, stands };
};
