import { onTestFinished } from 'vitest';
import { CurrentSite } from '../../../server/core/current-site.ts';
import { firstRevision } from '../../../server/core/first-revision.ts';
import { SetUp } from '../../../server/core/set-up.ts';
import type { LimitChange } from '../../../server/ports.ts';
import { compileExpression } from '../../../server/site/expression.ts';
import { siteFormat } from '../../../server/site/format.ts';
import { openSqliteStores } from '../../../server/store/sqlite/open.ts';
import type { Limit } from '../../../shared/model/limit.ts';
import { channelsOf } from '../../../shared/model/site.ts';
import { fakeClock } from '../../helpers/fakes.ts';
import { temporaryFolder } from '../../helpers/process.ts';
import { demo } from '../../site/edit.ts';

/** 2026-11-30T08:00:00Z. */
export const NOW = Date.UTC(2026, 10, 30, 8) / 1e3;

/** The demo's set-up over an embedded store of its own. */
export const setUpScene = async () => {
  const { samples, records } = await openSqliteStores(temporaryFolder(), {});
  onTestFinished(async () => {
    await samples.close();
    await records.close();
  });
  const clock = fakeClock(NOW);
  const text = JSON.stringify(demo);
  const { site, revision } = await firstRevision(text, 'site.json', {
    ...{ records, clock, format: siteFormat, say: () => undefined },
  });
  const current = new CurrentSite(site, compileExpression);
  const limits = new Map<string, readonly Limit[]>(
    channelsOf(site).map(({ channel }) => [channel.id, channel.limits]),
  );
  const adopted: (readonly LimitChange[])[] = [];
  const setUp = new SetUp(
    {
      ...{ records, samples, clock, current, limits, format: siteFormat },
      adopt: async (next, changes) => {
        current.replace(next);
        for (const change of changes) limits.set(change.channel, change.limits);
        adopted.push(changes);
      },
    },
    revision,
  );
  return { samples, records, clock, current, limits, adopted, setUp };
};
