import { channelsOf, MEASURAND_UNITS } from '../../shared/model/site.ts';
import type { ChannelReport } from '../../shared/protocol/http.ts';
import type { Core } from '../ports.ts';

/** Every channel in site order, with its limits in force and what it reads now. */
export const channelReports = (core: Core): ChannelReport[] => {
  const site = core.site();
  const limits = core.limits();
  const current = new Map(core.values().map((value) => [value.channel, value]));
  const structureOf = new Map(
    site.structures.flatMap(({ id, members }) => members.map((member) => [member, id] as const)),
  );
  return channelsOf(site).map(({ channel, member, station }) => ({
    id: channel.id,
    name: channel.name,
    structure: structureOf.get(member) ?? '',
    member: member.id,
    station: station.id,
    measurand: channel.measurand,
    unit: MEASURAND_UNITS[channel.measurand],
    node: channel.kind === 'measured' ? channel.node : null,
    input: channel.kind === 'measured' ? channel.input : null,
    limits: limits[channel.id] ?? [],
    current: current.get(channel.id) ?? {
      channel: channel.id,
      value: null,
      at: null,
      quality: 'none',
    },
  }));
};
