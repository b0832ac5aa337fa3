import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';
import { openSqliteStores } from '../../server/store/sqlite/open.ts';
import { describeSampleStore, PAIRS } from './sample-store.ts';

const root = mkdtempSync(join(tmpdir(), 'yieldward-sqlite-'));
afterAll(() => rmSync(root, { recursive: true, force: true }));

let places = 0;

describeSampleStore('SQLite on its threads', {
  newPlace: async () => join(root, String(places++)),
  open: async (place) => {
    const { samples, records } = await openSqliteStores(place, PAIRS);
    return {
      ...samples,
      close: async () => {
        await records.close();
        await samples.close();
      },
    };
  },
  runs: 15,
});
