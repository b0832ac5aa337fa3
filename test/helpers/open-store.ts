import { onTestFinished } from 'vitest';
import type { SampleStore } from '../../server/ports.ts';
import { openSqliteStores } from '../../server/store/sqlite/open.ts';
import { temporaryFolder } from './process.ts';

/** An embedded sample store that goes when the test does. */
export const openStore = async (): Promise<SampleStore> => {
  const { samples, records } = await openSqliteStores(temporaryFolder(), {});
  onTestFinished(async () => {
    await samples.close();
    await records.close();
  });
  return samples;
};
