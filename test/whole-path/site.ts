import { writeFileSync } from 'node:fs';
import { join } from 'node:path';

const head = (id: string) => ({
  ...{ id: `${id}-cal1`, valid_from: '2024-01-01T00:00:00Z' },
  ...{ author: 'Technician', reason: 'Gauge data off the packet' },
});

/** One gauge and one thermometer; `simulated` as the test wants it. */
export const writeSite = (folder: string, simulated: boolean): string => {
  const file = join(folder, 'site.json');
  const site = {
    ...{ format: 1, id: 'yard', name: 'Yard', simulated, highest_limit_share_of_yield: 0.8 },
    nodes: [
      {
        ...{ id: 'n1', name: 'Node 1', stale_after_s: 3 },
        inputs: [
          { name: 's1', unit: '/', range: [-0.004, 0.004] },
          { name: 'steel', unit: 'Cel' },
        ],
      },
    ],
    structures: [
      {
        ...{ id: 'lift', name: 'Lift' },
        elevations: [{ name: 'Side', right: 'x', members: ['B1'] }],
        members: [
          {
            ...{ id: 'B1', name: 'Main beam 1', section: 'HE 300 B', material: 'S275' },
            ...{ from_m: [0, 0, 4.5], to_m: [6, 0, 4.5] },
            stations: [
              {
                ...{ id: 'B1-mid', at_m: 3 },
                channels: [
                  {
                    ...{ id: 'tip', name: 'Tip', measurand: 'strain', node: 'n1', input: 's1' },
                    calibration: [
                      {
                        ...{ ...head('tip'), signal: { kind: 'ratio' } },
                        response: {
                          ...{ kind: 'bridge', circuit: 'full-bending', gauge_factor: 2 },
                          ...{ gauge_resistance_ohm: 350, leads: { kind: 'none' } },
                          zero_mV_per_V: 0,
                        },
                      },
                    ],
                    limits: [
                      {
                        ...{ level: 'stop', basis: 'strain_microstrain', value: 900 },
                        ...{ deadband: 10, on_delay_s: 0 },
                      },
                    ],
                  },
                  {
                    ...{ id: 'steel', name: 'Steel', measurand: 'temperature' },
                    ...{ node: 'n1', input: 'steel', limits: [] },
                    calibration: [
                      {
                        ...{ ...head('steel'), signal: { kind: 'direct' } },
                        response: { kind: 'as-is' },
                      },
                    ],
                  },
                ],
              },
            ],
          },
        ],
      },
    ],
  };
  writeFileSync(file, JSON.stringify(site));
  return file;
};
