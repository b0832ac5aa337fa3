import { parseArgs } from 'node:util';
import { epochSeconds, type EpochSeconds } from '../../shared/model/units.ts';

/** What one simulated node is told on its command line. */
export interface NodeArguments {
  readonly node: string;
  readonly broker: string;
  readonly siteFile: string;
  readonly seed: number;
  /** When the load programme began: nodes that are told the same agree on the load. */
  readonly begin: EpochSeconds;
  /** Frames a second. */
  readonly rate: number;
  /** Samples a frame. */
  readonly samples: number;
}

export const NODE_USAGE = `--node ID --broker mqtt://HOST:PORT --site FILE
  [--seed N]     of the noise (1)
  [--begin T]    UTC seconds at which the load programme began (0)
  [--rate N]     frames a second (10)
  [--samples N]  samples a frame (10)`;

const HIGHEST = { rate: 100, samples: 10_000 };

/** Throws an Error that says what is wrong. */
export const readNodeArguments = (args: readonly string[]): NodeArguments => {
  const { values } = parseArgs({
    args: [...args],
    options: {
      node: { type: 'string' },
      broker: { type: 'string' },
      site: { type: 'string' },
      seed: { type: 'string', default: '1' },
      begin: { type: 'string', default: '0' },
      rate: { type: 'string', default: '10' },
      samples: { type: 'string', default: '10' },
    },
  });
  const text = (name: 'node' | 'broker' | 'site'): string => {
    const value = values[name];
    if (value === undefined) throw new Error(`--${name}: expected a value, came none`);
    return value;
  };
  const figure = (name: 'seed' | 'begin' | 'rate' | 'samples', low: number, high: number) => {
    const value = Number(values[name]);
    if (value >= low && value <= high) return value;
    throw new Error(`--${name}: expected ${low} to ${high}, came ${values[name]}`);
  };
  const samples = figure('samples', 1, HIGHEST.samples);
  if (!Number.isInteger(samples)) throw new Error('--samples: expected a whole number');
  return {
    node: text('node'),
    broker: text('broker'),
    siteFile: text('site'),
    seed: figure('seed', 0, 2 ** 32 - 1),
    begin: epochSeconds(figure('begin', 0, Number.MAX_SAFE_INTEGER)),
    rate: figure('rate', 0.01, HIGHEST.rate),
    samples,
  };
};
