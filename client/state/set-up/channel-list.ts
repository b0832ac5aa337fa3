/** The channels of a site as a table: to read all of them, to bring back names and inputs. */
import type { Fault } from '../../../shared/model/fault.ts';
import { parseCsv, csvText } from './csv.ts';
import { channelPlaces, inputOf } from './site-walk.ts';
import { listAt, textAt, valueAt, withValue, type Json } from './tree.ts';

/** Columns in order; a unit stands in brackets, in the words of the site file's keys. */
export const COLUMNS = [
  'structure',
  'member',
  'station',
  'at [m]',
  'channel',
  'name',
  'measurand',
  'node',
  'input',
  'input unit',
  'record',
  'valid from [UTC]',
  'circuit',
  'gauge factor',
  'gauge resistance [Ohm]',
  'leads',
  'lead resistance [Ohm]',
  'zero [mV/V]',
  'excitation [V]',
] as const;

/** Those that an import reads; channels are told by `channel`, all else is left as it is. */
export const IMPORTED = ['channel', 'name', 'node', 'input'] as const;

const plain = (value: Json | undefined): string =>
  typeof value === 'string' ? value : typeof value === 'number' ? String(value) : '';

const rowOf = (site: Json, place: ReturnType<typeof channelPlaces>[number]): string[] => {
  const { channel, station, member, structure } = place;
  const records = listAt(channel, 'calibration');
  const corrected = new Set(records.map((record) => textAt(record, 'corrects')));
  const record = records.filter((one) => !corrected.has(textAt(one, 'id'))).at(-1);
  const of = (root: Json | undefined, ...path: string[]) => plain(valueAt(root, path));
  return [
    of(structure, 'id'),
    of(member, 'id'),
    of(station, 'id'),
    of(station, 'at_m'),
    of(channel, 'id'),
    of(channel, 'name'),
    of(channel, 'measurand'),
    of(channel, 'node'),
    of(channel, 'input'),
    of(inputOf(site, channel), 'unit'),
    of(record, 'id'),
    of(record, 'valid_from'),
    of(record, 'response', 'circuit'),
    of(record, 'response', 'gauge_factor'),
    of(record, 'response', 'gauge_resistance_ohm'),
    of(record, 'response', 'leads', 'kind'),
    of(record, 'response', 'leads', 'resistance_ohm'),
    of(record, 'response', 'zero_mV_per_V'),
    of(record, 'signal', 'excitation', 'stated_V'),
  ];
};

/** One line a channel that is read from an input, in site order, with its last record. */
export const channelListCsv = (site: Json): string =>
  csvText([[...COLUMNS], ...channelPlaces(site).map((place) => rowOf(site, place))]);

export type ChannelList =
  | { readonly ok: true; readonly document: Json; readonly changed: number }
  | { readonly ok: false; readonly faults: readonly Fault[] };

const lineFault = (line: number, expected: string, came: string): Fault => ({
  path: `line ${line}`,
  expected,
  came,
});

interface Line {
  readonly line: number;
  readonly cells: Readonly<Record<string, string>>;
}

const nameFaults = (site: Json, { line, cells }: Line): Fault[] => {
  const { name = '', node = '', input = '' } = cells;
  const nodes = listAt(site, 'nodes');
  const known = nodes.find((one) => textAt(one, 'id') === node);
  const inputs = listAt(known, 'inputs').map((one) => textAt(one, 'name'));
  const faults: Fault[] = [];
  if (name.trim() === '' || name.length > 200) {
    faults.push(lineFault(line, 'a name of 1 to 200 characters', name === '' ? 'nothing' : name));
  }
  if (!known) {
    const ids = nodes.map((one) => textAt(one, 'id')).join(', ');
    faults.push(lineFault(line, `a node of the site: ${ids}`, node === '' ? 'nothing' : node));
  } else if (!inputs.includes(input)) {
    const expected = `an input of node ${node}: ${inputs.join(', ')}`;
    faults.push(lineFault(line, expected, input === '' ? 'nothing' : input));
  }
  return faults;
};

const linesOf = (site: Json, text: string): { lines: Line[]; faults: Fault[] } => {
  const parsed = parseCsv(text);
  if (!parsed.ok) {
    const fault = lineFault(parsed.line, parsed.expected, 'something else');
    return { lines: [], faults: [fault] };
  }
  const [head, ...rows] = parsed.rows;
  const columns = head?.fields.map((field) => field.trim()) ?? [];
  const missing = IMPORTED.filter((name) => !columns.includes(name));
  if (!head || missing.length > 0) {
    const expected = `a first line with the columns ${IMPORTED.join(', ')}`;
    const came = head ? `none named ${missing.join(', ')}` : 'nothing';
    return { lines: [], faults: [lineFault(head?.line ?? 1, expected, came)] };
  }
  const known = new Set(channelPlaces(site).map(({ channel }) => textAt(channel, 'id')));
  const seen = new Set<string>();
  const faults: Fault[] = [];
  const lines = rows.flatMap(({ line, fields }): Line[] => {
    if (fields.length !== columns.length) {
      faults.push(lineFault(line, `${columns.length} fields`, `${fields.length}`));
      return [];
    }
    const cells = Object.fromEntries(columns.map((name, i) => [name, fields[i] ?? '']));
    const id = cells['channel'] ?? '';
    if (!known.has(id)) faults.push(lineFault(line, 'a channel of the site', id || 'nothing'));
    else if (seen.has(id)) faults.push(lineFault(line, 'each channel once', id));
    else {
      seen.add(id);
      faults.push(...nameFaults(site, { line, cells }));
      return [{ line, cells }];
    }
    return [];
  });
  return { lines, faults };
};

/** Names and inputs of a table brought into a site; all of what is wrong with it by its line. */
export const withChannelList = (site: Json, text: string): ChannelList => {
  const { lines, faults } = linesOf(site, text);
  if (faults.length > 0) return { ok: false, faults };
  const byId = new Map(lines.map(({ cells }) => [cells['channel'] ?? '', cells]));
  let [document, changed] = [site, 0];
  for (const { path, channel } of channelPlaces(site)) {
    const cells = byId.get(textAt(channel, 'id') ?? '');
    if (!cells) continue;
    const keys = ['name', 'node', 'input'].filter((key) => cells[key] !== textAt(channel, key));
    if (keys.length > 0) changed++;
    for (const key of keys) document = withValue(document, [...path, key], cells[key]);
  }
  return { ok: true, document, changed };
};
