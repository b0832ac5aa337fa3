import { share } from '../../shared/model/units.ts';
import type { SiteReading } from '../ports.ts';
import { readDefaultLimits } from './limits.ts';
import { Names } from './names.ts';
import { readNodes } from './nodes.ts';
import { Reading } from './reading.ts';
import { shapeFaults } from './shape.ts';
import { readStructures } from './structures.ts';

/**
 * A site file's content to a checked site in SI units, or everything that is
 * wrong with it at once: where it departs from docs/site.schema.json, and every
 * name, figure and combination that the schema cannot judge. Throws for nothing
 * that comes in.
 */
export const readSite = (json: unknown): SiteReading => {
  const reading = new Reading(json, shapeFaults(json));
  const { nodes, names } = readNodes(reading);
  const highest = reading.value<number>('/highest_limit_share_of_yield');
  const structures = readStructures(reading, {
    nodes: names,
    channels: new Names(reading, 'channel'),
    members: new Names(reading, 'member'),
    stations: new Names(reading, 'station'),
    records: new Names(reading, 'calibration record'),
    defaultLimits: highest === undefined ? [] : readDefaultLimits(reading, highest),
    highestLimit: highest === undefined ? null : share(highest),
  });
  const id = reading.value<string>('/id');
  const name = reading.value<string>('/name');
  const simulated = reading.value<boolean>('/simulated');
  const { faults } = reading;
  const isWhole = id !== undefined && name !== undefined && simulated !== undefined;
  if (faults.length > 0 || !isWhole || highest === undefined) return { ok: false, faults };
  const site = { id, name, simulated, highestLimit: share(highest), structures, nodes };
  return { ok: true, site };
};
