/** What is where in a draft. */
import { isList, isMapOf, listAt, textAt, valueAt, type Json, type Path } from './tree.ts';

export interface ChannelPlace {
  readonly path: Path;
  readonly channel: Json;
  readonly station: Json;
  readonly member: Json;
  readonly structure: Json;
}

const numbered = (root: Json | undefined, key: string): (readonly [string, Json])[] =>
  listAt(root, key).map((value, i) => [String(i), value] as const);

/** Channels that are read from inputs, in site order. */
export const channelPlaces = (site: Json | undefined): ChannelPlace[] =>
  numbered(site, 'structures').flatMap(([s, structure]) =>
    numbered(structure, 'members').flatMap(([m, member]) =>
      numbered(member, 'stations').flatMap(([t, station]) =>
        numbered(station, 'channels').map(([c, channel]) => ({
          ...{ channel, station, member, structure },
          path: ['structures', s, 'members', m, 'stations', t, 'channels', c],
        })),
      ),
    ),
  );

/** Paths of all maps of a kind above or at a place: where in the site somebody is. */
export const memberPathOf = (path: Path): Path | null =>
  path[0] === 'structures' && path[2] === 'members' ? path.slice(0, 4) : null;

export const channelPathOf = (path: Path): Path | null =>
  path[6] === 'channels' && path.length >= 8 ? path.slice(0, 8) : null;

export const inputOf = (site: Json, channel: Json): Json | undefined => {
  const node = listAt(site, 'nodes').find((one) => textAt(one, 'id') === textAt(channel, 'node'));
  return listAt(node, 'inputs').find((one) => textAt(one, 'name') === textAt(channel, 'input'));
};

/** Calibration records and zeros of the whole site. */
export const recordsOf = (site: Json | undefined): Json[] =>
  channelPlaces(site).flatMap(({ channel }) => [
    ...listAt(channel, 'calibration'),
    ...listAt(channel, 'zeros'),
  ]);

export const recordIdsOf = (site: Json | undefined): ReadonlySet<string> =>
  new Set(recordsOf(site).flatMap((record) => textAt(record, 'id') ?? []));

/** Ids of the elements of every list of that name, wherever it is. */
export const idsUnder = (part: Json | undefined, list: string): ReadonlySet<string> => {
  const found = new Set<string>();
  const search = (value: Json | undefined, key: string): void => {
    if (isList(value) && key === list) {
      for (const element of value) found.add(textAt(element, 'id') ?? '');
    }
    if (isList(value)) value.forEach((element) => search(element, ''));
    else if (isMapOf(value)) {
      for (const [name, below] of Object.entries(value)) search(below, name);
    }
  };
  search(part, '');
  return found;
};

export interface Choice {
  readonly value: string;
  readonly text: string;
}

const choicesOf = (elements: readonly Json[], name: 'id' | 'name' = 'id'): Choice[] =>
  elements.flatMap((element) => {
    const value = textAt(element, name);
    if (value === null) return [];
    const called = textAt(element, 'name');
    return { value, text: called === null || called === value ? value : `${value}: ${called}` };
  });

const virtualOf = (site: Json): Json[] =>
  listAt(site, 'structures').flatMap((structure) =>
    listAt(structure, 'members').flatMap((member) =>
      listAt(member, 'stations').flatMap((station) => listAt(station, 'virtual')),
    ),
  );

const measuring = (site: Json, ...measurands: string[]): Choice[] =>
  choicesOf(
    channelPlaces(site)
      .map(({ channel }) => channel)
      .filter((channel) => measurands.includes(textAt(channel, 'measurand') ?? '')),
  );

const inputsOf = (site: Json, node: string | null): readonly Json[] =>
  listAt(
    listAt(site, 'nodes').find((one) => textAt(one, 'id') === node),
    'inputs',
  );

/** What a reference at `path` may name; null: the place is no reference. */
export const choicesAt = (site: Json, path: Path): Choice[] | null => {
  const key = path.at(-1) ?? '';
  const parent = path.at(-2) ?? '';
  const channelPath = channelPathOf(path);
  const channel = channelPath ? valueAt(site, channelPath) : undefined;
  if (key === 'node') return choicesOf(listAt(site, 'nodes'));
  if (key === 'input') return choicesOf(inputsOf(site, textAt(channel, 'node')), 'name');
  if (key === 'measured_by_input') {
    const inputs = inputsOf(site, textAt(channel, 'node'));
    return choicesOf(
      inputs.filter((one) => textAt(one, 'unit') === 'V'),
      'name',
    );
  }
  if (key === 'load_channel') return measuring(site, 'force');
  if (key === 'channel' && parent === 'temperature') return measuring(site, 'temperature');
  if (key === 'channel') return measuring(site, 'strain');
  if (parent === 'gauges') return measuring(site, 'strain');
  if (parent === 'members' && path[2] === 'elevations') {
    return choicesOf(listAt(site, 'structures', path[1] ?? '', 'members'));
  }
  if (parent === 'of' || parent === 'names') {
    const all = channelPlaces(site).map((place) => place.channel);
    return choicesOf([...all, ...virtualOf(site)]);
  }
  return null;
};
