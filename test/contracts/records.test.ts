import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, onTestFinished, test } from 'vitest';
import type { SiteRevision } from '../../server/ports.ts';
import { openSqliteStores } from '../../server/store/sqlite/open.ts';
import type { CheckKind } from '../../shared/channel-check/verdict.ts';
import type { AlarmEvent, Limit } from '../../shared/model/limit.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import type { CheckRecord } from '../../shared/protocol/checks.ts';

const root = mkdtempSync(join(tmpdir(), 'yieldward-records-'));
afterAll(() => rmSync(root, { recursive: true, force: true }));

const event = (
  kind: AlarmEvent['kind'],
  at: number,
  level: AlarmEvent['level'] = 'stop',
  late = false,
): AlarmEvent => ({
  ...{ id: `c1/${level}/${kind}/${at}`, channel: 'c1', level, kind },
  ...{ at: epochSeconds(at), value: 1e-3, threshold: 0.9e-3, late },
});

const limits: Limit[] = [
  { level: 'stop', basis: 'share', value: 0.75, deadband: 0.01, onDelay: seconds(0.2) },
];

test('alarm events and limit changes stay, each once, across a restart', async () => {
  const folder = join(root, 'a');
  const first = await openSqliteStores(folder, {});
  await first.records.addAlarmEvents([event('raised', 10), event('returned', 12)]);
  await first.records.addAlarmEvents([event('raised', 10), event('raised', 20, 'caution')]);
  const change = { channel: 'c1', at: epochSeconds(5), author: 'A', reason: 'first' };
  await first.records.addLimitChange({ ...change, limits });
  await first.records.addLimitChange({ ...change, limits: [], reason: 'none for now' });
  await first.records.addLimitChange({ ...change, channel: 'c2', limits });
  await first.records.close();
  await first.samples.close();

  const again = await openSqliteStores(folder, {});
  expect((await again.records.alarmEvents(10)).map(({ kind, at }) => [kind, at])).toEqual([
    ...[
      ['raised', 20],
      ['returned', 12],
      ['raised', 10],
    ],
  ]);
  expect(await again.records.alarmEvents(1)).toEqual([event('raised', 20, 'caution')]);
  expect((await again.records.lastAlarmEvents()).map(({ level, kind }) => [level, kind])).toEqual([
    ...[
      ['stop', 'returned'],
      ['caution', 'raised'],
    ],
  ]);
  const inForce = await again.records.limitsInForce();
  expect(inForce.map(({ channel, reason, limits: set }) => [channel, reason, set.length])).toEqual([
    ...[
      ['c1', 'none for now', 0],
      ['c2', 'first', 1],
    ],
  ]);
  await again.samples.close();
  await again.records.close();
});

test('what came late is kept and told, and is not the last that happened', async () => {
  const folder = join(root, 'e');
  const first = await openSqliteStores(folder, {});
  const [stands, before, over] = [
    event('raised', 100),
    event('raised', 10, 'stop', true),
    event('returned', 20, 'stop', true),
  ];
  await first.records.addAlarmEvents([stands]);
  await first.records.addAlarmEvents([before, over]);
  await first.records.close();
  await first.samples.close();
  const again = await openSqliteStores(folder, {});
  expect(await again.records.lastAlarmEvents()).toEqual([stands]);
  expect(await again.records.alarmEvents(9)).toEqual([stands, over, before]);
  await again.records.close();
  await again.samples.close();
});

test('revisions of the site stay, each once, and a records file of version 1 is brought on', async () => {
  const folder = join(root, 'c');
  const { default: Database } = await import('better-sqlite3');
  const first = await openSqliteStores(folder, {});
  await first.records.close();
  await first.samples.close();
  const file = new Database(join(folder, 'records.sqlite'));
  file.exec('DROP TABLE site_revision; DROP TABLE channel_check');
  file.exec('ALTER TABLE alarm_event DROP COLUMN late');
  file.pragma('user_version = 1');
  file.close();

  const again = await openSqliteStores(folder, {});
  onTestFinished(async () => {
    await again.records.close();
    await again.samples.close();
  });
  expect(await again.records.siteRevision()).toBeNull();
  const revision: SiteRevision = {
    ...{ revision: 1, at: epochSeconds(5), author: 'A', reason: 'first' },
    ...{ origin: 'file', text: '{"format":1}' },
  };
  await again.records.addSiteRevision(revision, []);
  const limitChange = { channel: 'c1', limits, at: epochSeconds(5), author: 'A', reason: 'R' };
  await expect(again.records.addSiteRevision(revision, [limitChange])).rejects.toThrow();
  expect(await again.records.limitsInForce()).toEqual([]);
  const second: SiteRevision = { ...revision, revision: 2, origin: 'screen', text: '{}' };
  await again.records.addSiteRevision(second, [limitChange]);
  expect(await again.records.limitsInForce()).toEqual([limitChange]);
  expect(await again.records.siteRevision()).toEqual(second);
  const { text: _, ...head } = second;
  expect(await again.records.siteRevisions(1)).toEqual([head]);
  expect(await again.records.siteRevisions(9)).toHaveLength(2);
});

test('checks of channels stay; the last of each channel and kind is at hand, across a restart', async () => {
  const folder = join(root, 'd');
  const record = (channel: string, kind: CheckKind, figure: number, at: number): CheckRecord => ({
    ...{ channel, at, author: 'A', revision: 3, note: 'as wired' },
    check: {
      ...{ kind, verdict: 'pass', figure, unit: 'm/m', why: 'Quiet.' },
      ...{ limits: { good: 1, bad: 2 }, also: [{ name: 'robust', value: figure, unit: 'm/m' }] },
    },
    given: { kind: 'samples', from: at - 20, to: at },
  });
  const [first, other, second, elsewhere] = [
    record('c1', 'noise', 0.5, 10),
    record('c1', 'drift', 0.25, 10),
    record('c1', 'noise', 0.75, 5),
    record('c2', 'noise', 0.1, 7),
  ] as const;
  const before = await openSqliteStores(folder, {});
  await before.records.addCheckRecords([first, other]);
  await before.records.addCheckRecords([second, elsewhere]);
  await before.records.close();
  await before.samples.close();

  const again = await openSqliteStores(folder, {});
  onTestFinished(async () => {
    await again.records.close();
    await again.samples.close();
  });
  // The last that was added, whatever its clock said.
  expect(await again.records.lastCheckRecords()).toEqual([other, second, elsewhere]);
  const broken = { ...first, author: undefined } as unknown as CheckRecord;
  await expect(
    again.records.addCheckRecords([record('c3', 'noise', 1, 9), broken]),
  ).rejects.toThrow();
  expect(await again.records.lastCheckRecords()).toHaveLength(3);
});

test('a store that a newer version wrote is not touched, and says so', async () => {
  const folder = join(root, 'b');
  const store = await openSqliteStores(folder, {});
  await store.records.close();
  await store.samples.close();
  const { default: Database } = await import('better-sqlite3');
  const file = new Database(join(folder, 'samples.sqlite'));
  file.pragma('user_version = 99');
  file.close();
  await expect(openSqliteStores(folder, {})).rejects.toThrow(/version 99.*newer Yieldward/);
});
