import type { Fault } from '../../shared/model/fault.ts';
import type { Channel, Site } from '../../shared/model/site.ts';

/** JSON pointer of each channel in the site file that `site` was read from, by id. */
const places = (site: Site): Map<string, { readonly channel: Channel; readonly at: string }> =>
  new Map(
    site.structures.flatMap(({ members }, i) =>
      members.flatMap(({ stations }, j) =>
        stations.flatMap(({ channels }, k) =>
          channels.map((channel, l) => {
            const at = `/structures/${i}/members/${j}/stations/${k}/channels/${l}`;
            return [channel.id, { channel, at }] as const;
          }),
        ),
      ),
    ),
  );

/** Records are added, never edited: those that were there come first, as they were. */
const keptFaults = (
  before: readonly { readonly id: string }[],
  after: readonly { readonly id: string }[],
  at: string,
): Fault[] =>
  before.flatMap((record, i) => {
    const now = after[i];
    if (now && JSON.stringify(now) === JSON.stringify(record)) return [];
    const expected = `record ${record.id} as it was: records are added, or corrected by another`;
    const came = now === undefined ? 'nothing' : now.id === record.id ? 'changed' : now.id;
    return [{ path: `${at}/${i}`, expected, came }];
  });

/** Why `after` may not follow `before`; paths are of the file that `after` was read from. */
export const successionFaults = (before: Site, after: Site): Fault[] => {
  const faults: Fault[] = [];
  if (after.id !== before.id) {
    faults.push({ path: '/id', expected: before.id, came: after.id });
  }
  if (after.simulated !== before.simulated) {
    const expected = `${before.simulated}: what is stored already is${before.simulated ? '' : ' not'} simulated`;
    faults.push({ path: '/simulated', expected, came: String(after.simulated) });
  }
  const stood = places(before);
  for (const [id, { channel, at }] of places(after)) {
    const was = stood.get(id)?.channel;
    if (was?.kind !== 'measured') continue;
    if (channel.kind !== 'measured') {
      faults.push({ path: at, expected: `${id} measured, as it was`, came: 'virtual' });
      continue;
    }
    faults.push(
      ...keptFaults(was.calibration, channel.calibration, `${at}/calibration`),
      ...keptFaults(was.zeros, channel.zeros, `${at}/zeros`),
    );
  }
  return faults;
};
