import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';
import { openSqliteStores } from '../../server/store/sqlite/open.ts';
import { describeSampleStore, PAIRS } from './sample-store.ts';
import { testNames } from './store-names.ts';
import type { ExcitationPairs } from '../../server/ports.ts';

const root = mkdtempSync(join(tmpdir(), 'yieldward-sqlite-'));
afterAll(() => rmSync(root, { recursive: true, force: true }));

let places = 0;

const newPlace = () => join(root, String(places++));
const open = async (place: string, pairs: ExcitationPairs) => {
  const { samples, records } = await openSqliteStores(place, pairs);
  return {
    ...samples,
    close: async () => {
      await records.close();
      await samples.close();
    },
  };
};

describeSampleStore('SQLite on its threads', {
  newPlace: async () => newPlace(),
  open: (place) => open(place, PAIRS),
  runs: 15,
});

testNames('SQLite on its threads', open, newPlace);
