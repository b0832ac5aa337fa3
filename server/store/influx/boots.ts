import type { IPoint } from 'influx';
import { epochSeconds } from '../../../shared/model/units.ts';
import { sampleCount } from '../../../shared/model/frame.ts';
import { contains, include, type Ranges } from '../../../shared/series/ranges.ts';
import type { BootTally, StoredFrame } from '../../ports.ts';
import { entriesOf, type Database } from './database.ts';

/** A boot's tally, and what helps to find its frames. */
export interface Boot extends BootTally {
  /** Time between the first and the last sample of its longest frame, s. */
  readonly longest: number;
  /** Time of its newest sample, s. */
  readonly newest: number;
}

export const bootKey = (node: string, boot: string): string => `${node} ${boot}`;

export type Boots = ReadonlyMap<string, Boot>;

export const spanOf = ({ frame }: StoredFrame): number => (sampleCount(frame) - 1) * frame.dt;

/** All boots in store. Measurement `boot`: one point each, at time 0, written over and over. */
export const readBoots = async (database: Database): Promise<Boots> => {
  const rows = entriesOf(await database.select('SELECT * FROM "boot" GROUP BY "node", "boot"'));
  return new Map(
    rows.map((row) => {
      const [node, boot] = [String(row.node), String(row.boot)];
      const entry: Boot = {
        ...{ node, boot, sequenced: row.sequenced === true },
        ranges: JSON.parse(String(row.ranges)) as Ranges,
        ...{ frames: Number(row.frames), samples: Number(row.samples) },
        firstArrived: epochSeconds(Number(row.first_arrived)),
        lastArrived: epochSeconds(Number(row.last_arrived)),
        ...{ longest: Number(row.longest), newest: Number(row.newest) },
      };
      return [bootKey(node, boot), entry];
    }),
  );
};

export const bootPoint = (boot: Boot): IPoint => ({
  measurement: 'boot',
  timestamp: '0',
  tags: { node: boot.node, boot: boot.boot },
  fields: {
    ...{ sequenced: boot.sequenced, ranges: JSON.stringify(boot.ranges) },
    ...{ frames: boot.frames, samples: boot.samples },
    ...{ first_arrived: boot.firstArrived, last_arrived: boot.lastArrived },
    ...{ longest: boot.longest, newest: boot.newest },
  },
});

/** The boot with one frame more. Single readings have no ranges: nothing of them can be missing. */
export const withFrame = (boot: Boot | undefined, stored: StoredFrame): Boot => {
  const { frame, arrived } = stored;
  const { node, boot: name, sequenced, seq, t0, inputs } = frame;
  const ranges = boot?.ranges ?? [];
  return {
    ...{ node, boot: name, sequenced },
    ranges: sequenced ? include(ranges, seq) : ranges,
    frames: (boot?.frames ?? 0) + 1,
    samples: (boot?.samples ?? 0) + sampleCount(frame) * inputs.length,
    firstArrived: epochSeconds(Math.min(boot?.firstArrived ?? arrived, arrived)),
    lastArrived: epochSeconds(Math.max(boot?.lastArrived ?? arrived, arrived)),
    longest: Math.max(boot?.longest ?? 0, spanOf(stored)),
    newest: Math.max(boot?.newest ?? -Infinity, t0 + spanOf(stored)),
  };
};

/** Is a frame counted? Single readings are, once their frame is there. */
export const isCounted = (boots: Boots, node: string, boot: string, seq: number): boolean => {
  const entry = boots.get(bootKey(node, boot));
  return entry !== undefined && (!entry.sequenced || contains(entry.ranges, seq));
};
