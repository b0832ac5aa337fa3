import type { Heating } from '../../shared/channel-check/electrical.ts';
import type { ValueUnit } from '../../shared/channel-check/verdict.ts';
import type { BridgeResponse, HeatSink } from '../../shared/model/calibration.ts';
import {
  MEASURAND_UNITS,
  type FieldNode,
  type Measurand,
  type Site,
  type Structure,
} from '../../shared/model/site.ts';
import { squareMetre, volt, type Seconds } from '../../shared/model/units.ts';
import type { ChannelWindow } from './watching.ts';

/** SI unit of what a measured channel reports; null for what only virtual ones do. */
export const valueUnitOf = (measurand: Measurand): ValueUnit | null => {
  const unit = MEASURAND_UNITS[measurand];
  switch (unit) {
    case 'm/m':
    case 'N':
    case 'm':
    case 'Cel':
      return unit;
    case 'Pa':
    case 'N m':
    case 'rad':
    case '1':
      return null;
  }
};

/** A node that is unknown may be silent for no time at all. */
export const staleAfterOf = (site: Site, node: string): Seconds | 0 =>
  site.nodes.find(({ id }: FieldNode) => id === node)?.staleAfter ?? 0;

export const structureOf = (site: Site, member: string): Structure | undefined =>
  site.structures.find(({ members }) => members.some(({ id }) => id === member));

/** Volts across the bridge as its record states or another input measures them. */
export const excitationOf = ({ conversion, excitation }: ChannelWindow): number | null => {
  const { signal } = conversion.record;
  if (excitation !== null) return excitation;
  return 'excitation' in signal && signal.excitation.kind === 'stated'
    ? signal.excitation.volts
    : null;
};

/** What somebody states goes before what the record has; null where one of them is not known. */
export const heatingOf = (
  { grid }: BridgeResponse,
  excitation: number | null,
  stated: { readonly area: number; readonly on: HeatSink } | null = null,
): Heating | null => {
  const area = stated?.area ?? (grid ? grid.length * grid.width : null);
  const on = stated?.on ?? grid?.on;
  return excitation === null || area === null || on === undefined
    ? null
    : { excitation: volt(excitation), gridArea: squareMetre(area), on };
};
