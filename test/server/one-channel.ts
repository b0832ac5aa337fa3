/** A site of one channel of one node, for what a channel's records, limits and range do. */
import type { CalibrationRecord, Response, Signal } from '../../shared/model/calibration.ts';
import type { MeasuredChannel, NodeInput, Site } from '../../shared/model/site.ts';
import { epochSeconds, ohm, ratio } from '../../shared/model/units.ts';
import { SITE } from '../helpers/core.ts';
import { PLAIN_GAUGE } from '../helpers/plain-gauge.ts';

export const RATIO: Signal = { kind: 'ratio' };

export const quarter = (gaugeFactor: number): Response => ({
  ...{ kind: 'bridge', circuit: 'quarter', gaugeFactor, gaugeResistance: ohm(350), poisson: 0.3 },
  ...{ leads: { kind: 'none' }, zero: ratio(0), ...PLAIN_GAUGE },
});

export const record = (
  id: string,
  from: number,
  response: Response,
  signal: Signal = RATIO,
  corrects: string | null = null,
): CalibrationRecord => ({
  ...{ id, validFrom: epochSeconds(from), author: 'A', reason: 'R', recordedAt: null, corrects },
  ...{ signal, response },
});

export interface Given {
  readonly calibration: readonly CalibrationRecord[];
  readonly zeros?: MeasuredChannel['zeros'];
  readonly measurand?: MeasuredChannel['measurand'];
  readonly range?: NodeInput['range'];
  readonly limits?: MeasuredChannel['limits'];
}

export const siteWith = ({
  calibration,
  zeros = [],
  measurand = 'strain',
  range = null,
  limits = [],
}: Given): Site => {
  const channel: MeasuredChannel = {
    ...{ kind: 'measured', id: 'tip', name: 'Tip', measurand, node: 'n1', input: 'a' },
    ...{ calibration, zeros, limits },
  };
  return {
    ...SITE,
    structures: SITE.structures.map((structure) => ({
      ...structure,
      members: structure.members.map((member) => ({
        ...member,
        stations: member.stations.map((station) => ({ ...station, channels: [channel] })),
      })),
    })),
    nodes: SITE.nodes.map((node) => ({
      ...node,
      inputs: [
        { name: 'a', unit: '/' as const, range },
        { name: 'ex', unit: 'V' as const, range: [4, 6] as const },
      ],
    })),
  };
};
