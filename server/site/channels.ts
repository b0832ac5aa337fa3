import type { Limit, LimitContext } from '../../shared/model/limit.ts';
import type { Channel, Material, Measurand } from '../../shared/model/site.ts';
import type { Share } from '../../shared/model/units.ts';
import { stressPerStrain, yieldFor } from '../../shared/pipeline/4-stress/stress.ts';
import { readCalibration, readZeros } from './calibration.ts';
import { readLimits } from './limits.ts';
import type { Names } from './names.ts';
import type { InputEntry, NodeEntry } from './nodes.ts';
import type { Reading } from './reading.ts';

export interface ChannelEntry {
  /** undefined: at fault. */
  readonly measurand: Measurand | undefined;
  /** A virtual channel that is not read yet, and nothing can come from. */
  pending?: boolean;
  /** Pointer of the structure it belongs to. */
  readonly structure: string;
}

/** What is known of the whole site when its members are read. */
export interface SiteContext {
  readonly nodes: Names<NodeEntry>;
  readonly channels: Names<ChannelEntry>;
  readonly members: Names<{ readonly structure: string }>;
  readonly stations: Names;
  readonly records: Names;
  readonly defaultLimits: readonly Limit[];
  /** null: at fault. */
  readonly highestLimit: Share | null;
}

const takeInput = (reading: Reading, at: string, entry: InputEntry | undefined) => {
  if (!entry) return;
  if (entry.reader === null) entry.reader = at;
  else {
    const name = reading.value<string>(`${at}/input`) ?? '';
    const came = `${name}, as at ${entry.reader}`;
    reading.fault(`${at}/input`, 'an input that no other channel reads', came);
  }
};

const limitsOf = (
  reading: Reading,
  at: string,
  measurand: Measurand | undefined,
  material: Material | null,
  { highestLimit, defaultLimits }: SiteContext,
): readonly Limit[] => {
  if (measurand === undefined) return [];
  const isStrain = measurand === 'strain' || measurand === 'shear';
  if (!reading.has(`${at}/limits`)) return isStrain ? defaultLimits : [];
  const context: LimitContext | null =
    highestLimit === null || (isStrain && !material)
      ? null
      : {
          measurand,
          stressPerStrain: material && stressPerStrain(measurand, material),
          yieldStrength: material && yieldFor(measurand, material),
          highestLimit,
        };
  return readLimits(reading, `${at}/limits`, measurand, context);
};

/** A channel of a member of this material; none where something is at fault. */
export const readChannel = (
  reading: Reading,
  at: string,
  structure: string,
  material: Material | null,
  site: SiteContext,
): Channel[] => {
  const measurand = reading.value<Measurand>(`${at}/measurand`);
  site.channels.add(`${at}/id`, { measurand, structure });
  const nodeEntry = site.nodes.refer(`${at}/node`);
  const inputEntry = nodeEntry?.inputs.refer(`${at}/input`);
  takeInput(reading, at, inputEntry);
  const input = reading.value<string>(`${at}/input`);
  const context = {
    ...{ measurand, material, node: nodeEntry, ids: site.records },
    input: { name: input, unit: inputEntry?.unit },
  };
  const calibration = readCalibration(reading, `${at}/calibration`, context);
  const zeros = readZeros(reading, `${at}/zeros`, context);
  const limits = limitsOf(reading, at, measurand, material, site);
  const id = reading.value<string>(`${at}/id`);
  const name = reading.value<string>(`${at}/name`);
  const node = reading.value<string>(`${at}/node`);
  if (id === undefined || name === undefined || node === undefined) return [];
  if (measurand === undefined || input === undefined) return [];
  return [{ kind: 'measured', id, name, measurand, node, input, calibration, zeros, limits }];
};
