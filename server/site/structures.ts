import type { Elevation, Structure } from '../../shared/model/site.ts';
import { kilonewtonToNewton } from '../../shared/model/units.ts';
import type { SiteContext } from './channels.ts';
import { readMember } from './members.ts';
import { Names } from './names.ts';
import type { Reading } from './reading.ts';

const readElevation = (
  reading: Reading,
  at: string,
  structure: string,
  names: Names,
  { members }: SiteContext,
): Elevation[] => {
  names.add(`${at}/name`, true);
  const shown = new Names(reading, 'member of the elevation');
  for (const pointer of reading.items(`${at}/members`)) {
    shown.add(pointer, true);
    const member = members.refer(pointer);
    if (member && member.structure !== structure) {
      reading.faultAt(pointer, 'a member of the same structure');
    }
  }
  const elevation = reading.value<Elevation>(at);
  return elevation ? [elevation] : [];
};

const checkLoadChannel = (reading: Reading, structure: string, { channels }: SiteContext) => {
  const at = `${structure}/load_channel`;
  const channel = channels.refer(at);
  if (!channel) return;
  if (channel.measurand !== undefined && channel.measurand !== 'force') {
    reading.fault(at, 'a force channel', `one of ${channel.measurand}`);
  }
  if (channel.structure !== structure) reading.faultAt(at, 'a channel of the same structure');
};

/** Channels that gauges are put right by; read when every channel is known. */
const checkTemperatureChannels = (reading: Reading, members: string, { channels }: SiteContext) => {
  for (const response of responsesIn(reading, members)) {
    const at = `${response}/temperature/channel`;
    if (!reading.has(at)) continue;
    const measurand = channels.refer(at)?.measurand;
    if (measurand !== undefined && measurand !== 'temperature') {
      reading.fault(at, 'a temperature channel', `one of ${measurand}`);
    }
  }
};

const responsesIn = (reading: Reading, members: string): string[] =>
  reading
    .items(members)
    .flatMap((member) => reading.items(`${member}/stations`))
    .flatMap((station) => reading.items(`${station}/channels`))
    .flatMap((channel) => reading.items(`${channel}/calibration`))
    .map((record) => `${record}/response`);

const readStructure = (
  reading: Reading,
  at: string,
  ids: Names,
  site: SiteContext,
): (() => Structure[]) => {
  ids.add(`${at}/id`, true);
  if (!reading.isList(`${at}/members`)) {
    site.members.incomplete();
    site.channels.incomplete();
  }
  const finishing = reading
    .items(`${at}/members`)
    .map((pointer) => readMember(reading, pointer, at, site));
  return () => {
    const members = finishing.flatMap((finish) => finish());
    const names = new Names(reading, 'elevation of the structure');
    const elevations = reading
      .items(`${at}/elevations`)
      .flatMap((pointer) => readElevation(reading, pointer, at, names, site));
    checkLoadChannel(reading, at, site);
    checkTemperatureChannels(reading, `${at}/members`, site);
    const id = reading.value<string>(`${at}/id`);
    const name = reading.value<string>(`${at}/name`);
    const load = reading.value<number>(`${at}/safe_working_load_kN`);
    if (id === undefined || name === undefined) return [];
    return [
      {
        ...{ id, name, members, elevations },
        loadChannel: reading.value<string>(`${at}/load_channel`) ?? null,
        safeWorkingLoad: load === undefined ? null : kilonewtonToNewton(load),
      },
    ];
  };
};

/** The site's structures; what refers to members and channels is read when all of them are known. */
export const readStructures = (reading: Reading, site: SiteContext): readonly Structure[] => {
  const ids = new Names(reading, 'structure');
  return reading
    .items('/structures')
    .map((at) => readStructure(reading, at, ids, site))
    .flatMap((finish) => finish());
};
