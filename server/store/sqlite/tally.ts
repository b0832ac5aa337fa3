import { epochSeconds } from '../../../shared/model/units.ts';
import type { Ranges } from '../../../shared/series/ranges.ts';
import type { BootTally } from '../../ports.ts';
import type { Database } from './schema.ts';

interface Row {
  readonly node: string;
  readonly boot: string;
  readonly sequenced: number;
  readonly ranges: string;
  readonly frames: number;
  readonly samples: number;
  readonly first_arrived: number;
  readonly last_arrived: number;
}

/** What each boot has in store, oldest boot first. */
export const readTally = (database: Database): BootTally[] => {
  const rows = database
    .prepare(
      'SELECT node.name AS node, boot.name AS boot, sequenced, ranges, frames, samples, ' +
        'first_arrived, last_arrived FROM boot JOIN node ON node.id = boot.node ORDER BY boot.id',
    )
    .all() as Row[];
  return rows.map(({ first_arrived, last_arrived, sequenced, ranges, ...row }) => ({
    ...row,
    sequenced: sequenced === 1,
    ranges: JSON.parse(ranges) as Ranges,
    firstArrived: epochSeconds(first_arrived),
    lastArrived: epochSeconds(last_arrived),
  }));
};

export const hasFrame = (database: Database, node: string, boot: string, seq: number): boolean =>
  database
    .prepare(
      'SELECT 1 FROM frame JOIN boot ON boot.id = frame.boot JOIN node ON node.id = boot.node ' +
        'WHERE node.name = ? AND boot.name = ? AND seq = ?',
    )
    .get(node, boot, seq) !== undefined;
