import type { ZeroRecord } from '../../shared/model/calibration.ts';
import { channelsOf, type InputUnit, type Site } from '../../shared/model/site.ts';
import { newtonToKilonewton, epochSecondsToDate } from '../../shared/model/units.ts';
import type { SiteFormat } from '../ports.ts';
import { channelObjects, recordObjects } from './channel-objects.ts';
import { writeLimit } from './limits.ts';
import { readSiteText } from './load.ts';

const changed = (text: string, change: (json: unknown) => void): string => {
  const json: unknown = JSON.parse(text);
  change(json);
  return JSON.stringify(json, null, 2);
};

const zeroOfFile = (zero: ZeroRecord, unit: unknown) => {
  const { id, validFrom, author, reason, recordedAt, corrects } = zero;
  const { raw, noise, samples, temperature, state } = zero;
  return {
    ...{ id, valid_from: epochSecondsToDate(validFrom).toISOString(), author, reason },
    ...(recordedAt === null ? {} : { recorded_at: epochSecondsToDate(recordedAt).toISOString() }),
    ...(corrects === null ? {} : { corrects }),
    ...{ unit, raw, noise, samples },
    ...(temperature === null ? {} : { temperature_Cel: temperature }),
    state:
      state.kind === 'unloaded'
        ? { kind: 'unloaded' }
        : { kind: 'loaded', load_kN: newtonToKilonewton(state.load) },
  };
};

const inputUnitOf = (site: Site, id: string): InputUnit | undefined => {
  const found = channelsOf(site).find(({ channel }) => channel.id === id)?.channel;
  if (found?.kind !== 'measured') return undefined;
  const node = site.nodes.find((one) => one.id === found.node);
  return node?.inputs.find(({ name }) => name === found.input)?.unit;
};

/** The site file as docs/site.schema.json describes it. The texts to change are of checked sites. */
export const siteFormat: SiteFormat = {
  read: (text) => readSiteText(text),

  withLimits: (text, limits) => {
    const read = readSiteText(text);
    const channels = read.ok ? channelsOf(read.site).map(({ channel }) => channel) : [];
    const others = channels.filter(({ id, limits: stated }) => {
      const own = limits.get(id);
      return own !== undefined && JSON.stringify(own) !== JSON.stringify(stated);
    });
    return changed(text, (json) => {
      const objects = channelObjects(json);
      for (const { id, measurand } of others) {
        const object = objects.get(id);
        const own = limits.get(id) ?? [];
        if (object) object.limits = own.map((limit) => writeLimit(limit, measurand));
      }
    });
  },

  stamped: (text, before, at) => {
    const known = new Set(
      [...channelObjects(JSON.parse(before)).values()]
        .flatMap(recordObjects)
        .map(({ id }) => String(id)),
    );
    const stamp = epochSecondsToDate(at).toISOString();
    return changed(text, (json) => {
      for (const record of [...channelObjects(json).values()].flatMap(recordObjects)) {
        if (!known.has(String(record.id))) record.recorded_at ??= stamp;
      }
    });
  },

  withZero: (text, channel, zero) => {
    const read = readSiteText(text);
    const unit = read.ok ? inputUnitOf(read.site, channel) : undefined;
    return changed(text, (json) => {
      const object = channelObjects(json).get(channel);
      if (!object) return;
      const zeros: unknown[] = Array.isArray(object.zeros) ? object.zeros : [];
      object.zeros = [...zeros, zeroOfFile(zero, unit)];
    });
  },
};
