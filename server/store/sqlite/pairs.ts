import type { Database } from './schema.ts';
import type { SeriesInputs } from '../summary.ts';

/**
 * Retires the buckets of pairs that are named no more: should one be named again,
 * it begins anew, so that no bucket is taken for whole that lacks the frames in
 * between. A retired series has a blank in `over`, which no input's name has.
 */
export const retirePairs = (
  database: Database,
  pairsOf: (node: string) => readonly SeriesInputs[],
): void => {
  const retire = database.prepare(`UPDATE series SET over = over || ' ' || id WHERE id = ?`);
  const rows = database
    .prepare(
      'SELECT series.id, name, input, over FROM series JOIN node ON node.id = series.node ' +
        `WHERE over <> '' AND over NOT LIKE '% %'`,
    )
    .all() as { id: number; name: string; input: string; over: string }[];
  for (const { id, name, input, over } of rows) {
    const named = pairsOf(name).some((pair) => pair.input === input && pair.over === over);
    if (!named) retire.run(id);
  }
};
