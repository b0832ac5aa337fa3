import { expect, onTestFinished, test } from 'vitest';
import { firstRevision } from '../../../server/core/first-revision.ts';
import { siteFormat } from '../../../server/site/format.ts';
import { openSqliteStores } from '../../../server/store/sqlite/open.ts';
import { epochSeconds } from '../../../shared/model/units.ts';
import { fakeClock } from '../../helpers/fakes.ts';
import { temporaryFolder } from '../../helpers/process.ts';
import { demo, demoWith, placeOf } from '../../site/edit.ts';

const scene = async () => {
  const { samples, records } = await openSqliteStores(temporaryFolder(), {});
  onTestFinished(async () => {
    await samples.close();
    await records.close();
  });
  const said: string[] = [];
  const parts = { records, format: siteFormat, clock: fakeClock(), say: said.push.bind(said) };
  const start = (json: unknown) => firstRevision(JSON.stringify(json), 'yard.json', parts);
  return { records, said, start };
};

const renamed = demoWith({ '/name': 'Saltmarsh' });

test('a file is taken in once, and again when it has changed', async () => {
  const { start } = await scene();
  expect((await start(demo)).revision).toMatchObject({ revision: 1, origin: 'file' });
  expect((await start(demo)).revision.revision).toBe(1);
  const { site, revision } = await start(renamed);
  expect([site.name, revision.revision]).toEqual(['Saltmarsh', 2]);
});

test('what was changed on screen stands over the file, and that is said', async () => {
  const { start, records, said } = await scene();
  await start(demo);
  const screen = { revision: 2, at: epochSeconds(5), author: 'A. Tester', reason: 'a name' };
  const text = JSON.stringify(renamed);
  await records.addSiteRevision({ ...screen, origin: 'screen', text }, []);
  expect((await start(demo)).site.name).toBe('Saltmarsh');
  expect(said.join()).toMatch(/revision 2, changed on screen by A\. Tester, stands/);
});

test('a file whose records were edited does not start', async () => {
  const { start } = await scene();
  await start(demo);
  const place = `${placeOf('B1-mid-top-left')}/calibration/0`;
  const edited = demoWith({ [`${place}/response/gauge_factor`]: 1.9 });
  await expect(start(edited)).rejects.toThrow(`${place}: expected record`);
});

test('a file with faults does not start, and every one is listed', async () => {
  const { start } = await scene();
  await expect(start({ format: 1, id: 'x' })).rejects.toThrow(/yard\.json: \d+ faults\n/);
});
