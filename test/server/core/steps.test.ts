import { expect, test } from 'vitest';
import { runSteps, type Step } from '../../../server/core/steps.ts';

const scene = (failing: string | null, failingStop: string | null = null) => {
  const log: string[] = [];
  const step = (name: string): Step => ({
    name,
    start: () => {
      if (name === failing) throw new Error('port taken');
      log.push(`+${name}`);
    },
    stop: () => {
      log.push(`-${name}`);
      if (name === failingStop) throw new Error('stuck');
    },
  });
  return { log, steps: [step('store'), step('broker'), step('web')] };
};

test('begun in order, ended in reverse, and one that sticks does not keep the rest up', async () => {
  const { log, steps } = scene(null, 'broker');
  const said: string[] = [];
  const stop = await runSteps(steps, (line) => said.push(line));
  await stop();
  expect(log).toEqual(['+store', '+broker', '+web', '-web', '-broker', '-store']);
  expect(said).toEqual([expect.stringContaining('while stopping broker')]);
});

test('a failure names its step and ends those begun before it', async () => {
  const { log, steps } = scene('web');
  await expect(runSteps(steps, () => undefined)).rejects.toThrow('web: port taken');
  expect(log).toEqual(['+store', '+broker', '-broker', '-store']);
});
