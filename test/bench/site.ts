import { writeFileSync } from 'node:fs';
import { join } from 'node:path';

/** The nodes that a bench publishes for. */
export interface BenchSite {
  readonly file: string;
  readonly nodes: readonly { readonly id: string; readonly inputs: readonly string[] }[];
}

const VALID_FROM = '2020-01-01T00:00:00Z';

const channel = (node: string, input: string) => ({
  ...{ id: `${node}-${input}`, name: `Gauge ${input} of ${node}`, measurand: 'strain' },
  ...{ node, input },
  calibration: [
    {
      ...{ id: `${node}-${input}-cal1`, valid_from: VALID_FROM, author: 'Bench', reason: 'Bench' },
      signal: { kind: 'ratio' },
      response: {
        ...{ kind: 'bridge', circuit: 'quarter', gauge_factor: 2.08, gauge_resistance_ohm: 120 },
        leads: { kind: 'three-wire', resistance_ohm: 0.7 },
        zero_mV_per_V: 0.14,
        temperature: {
          ...{ channel: 'steel', zero_Cel: 20, factor_percent_per_100_K: 1 },
          thermal_output: {
            coefficients_microstrain: [-30, 2.5, -0.06, 3e-4],
            quoted_gauge_factor: 2,
          },
        },
      },
    },
  ],
});

const STEEL = {
  ...{ id: 'steel', name: 'Steel', measurand: 'temperature', node: 'yard', input: 'steel' },
  calibration: [
    {
      ...{ id: 'steel-cal1', valid_from: VALID_FROM, author: 'Bench', reason: 'Bench' },
      ...{ signal: { kind: 'direct' }, response: { kind: 'as-is' } },
    },
  ],
};

/** Writes a site of quarter bridges with a caution and a stop limit each, and gives its nodes. */
export const writeSite = (folder: string, nodeCount: number, inputCount: number): BenchSite => {
  const inputs = Array.from({ length: inputCount }, (_, i) => `s${i + 1}`);
  const nodes = Array.from({ length: nodeCount }, (_, i) => ({ id: `n${i + 1}`, inputs }));
  const file = join(folder, 'site.json');
  const limit = { basis: 'share_of_yield', deadband: 0.02, on_delay_s: 0.1 };
  const site = {
    ...{ format: 1, id: 'bench', name: 'Bench', simulated: true },
    highest_limit_share_of_yield: 0.8,
    default_limits: [
      { ...limit, level: 'caution', value: 0.6 },
      { ...limit, level: 'stop', value: 0.75 },
    ],
    nodes: [
      ...nodes.map(({ id }) => ({
        ...{ id, name: id, stale_after_s: 3 },
        inputs: inputs.map((name) => ({ name, unit: '/', range: [-0.004, 0.004] })),
      })),
      { id: 'yard', name: 'yard', stale_after_s: 60, inputs: [{ name: 'steel', unit: 'Cel' }] },
    ],
    structures: [
      {
        ...{
          id: 'beam',
          name: 'Beam',
          elevations: [{ name: 'Side', right: 'x', members: ['B1'] }],
        },
        members: [
          {
            ...{ id: 'B1', name: 'Beam 1', section: 'HE 300 B', material: 'S275' },
            ...{ from_m: [0, 0, 4.5], to_m: [6, 0, 4.5] },
            stations: [
              ...nodes.map(({ id }, i) => ({
                ...{ id: `B1-${id}`, at_m: 1 + i },
                channels: inputs.map((input) => channel(id, input)),
              })),
              { id: 'B1-end', at_m: 6, channels: [STEEL] },
            ],
          },
        ],
      },
    ],
  };
  writeFileSync(file, JSON.stringify(site));
  return { file, nodes };
};
