import type { FieldNode, InputUnit, NodeInput } from '../../shared/model/site.ts';
import { seconds } from '../../shared/model/units.ts';
import { Names } from './names.ts';
import type { Reading } from './reading.ts';

export interface InputEntry {
  /** undefined: the file's is at fault. */
  readonly unit: InputUnit | undefined;
  /** Pointer of the channel that reads it. */
  reader: string | null;
}

export interface NodeEntry {
  readonly inputs: Names<InputEntry>;
}

type Range = readonly [low: number, high: number];

const readInput = (reading: Reading, at: string, inputs: Names<InputEntry>): NodeInput[] => {
  const unit = reading.value<InputUnit>(`${at}/unit`);
  inputs.add(`${at}/name`, { unit, reader: null });
  const range = reading.value<Range>(`${at}/range`) ?? null;
  if (range && !(range[0] < range[1])) {
    reading.fault(`${at}/range`, '[low, high] with low below high', JSON.stringify(range));
  }
  const name = reading.value<string>(`${at}/name`);
  return name === undefined || unit === undefined ? [] : [{ name, unit, range }];
};

const readNode = (reading: Reading, at: string, names: Names<NodeEntry>): FieldNode[] => {
  const inputs = new Names<InputEntry>(reading, 'input of the node');
  names.add(`${at}/id`, { inputs });
  if (!reading.isList(`${at}/inputs`)) inputs.incomplete();
  const list = reading.items(`${at}/inputs`).flatMap((input) => readInput(reading, input, inputs));
  const id = reading.value<string>(`${at}/id`);
  const name = reading.value<string>(`${at}/name`);
  const staleAfter = reading.value<number>(`${at}/stale_after_s`);
  if (id === undefined || name === undefined || staleAfter === undefined) return [];
  return [{ id, name, inputs: list, staleAfter: seconds(staleAfter) }];
};

/** The site's nodes, and their names for channels to refer to. */
export const readNodes = (
  reading: Reading,
): { readonly nodes: readonly FieldNode[]; readonly names: Names<NodeEntry> } => {
  const names = new Names<NodeEntry>(reading, 'node');
  if (!reading.isList('/nodes')) names.incomplete();
  const nodes = reading.items('/nodes').flatMap((at) => readNode(reading, at, names));
  return { nodes, names };
};
