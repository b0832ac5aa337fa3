import type { AlarmEvent, Limit } from '../../../shared/model/limit.ts';
import type { CheckRecord } from '../../../shared/protocol/checks.ts';
import type { LimitChange, SiteRevision } from '../../ports.ts';
import { openFile, type Database } from './schema.ts';

type AlarmRow = Omit<AlarmEvent, 'late'> & { readonly late: number };

const alarmOf = (row: AlarmRow): AlarmEvent => ({ ...row, late: row.late !== 0 });

/** What people and alarms wrote. Synchronous: lives on the writer's thread. */
export class SqliteRecords {
  readonly #database: Database;

  constructor(folder: string) {
    this.#database = openFile(folder, 'records');
  }

  addAlarmEvents(events: readonly AlarmEvent[]): void {
    const insert = this.#database.prepare(
      'INSERT OR IGNORE INTO alarm_event VALUES (@id, @channel, @level, @kind, @at, @value, @threshold, @late)',
    );
    this.#database.transaction(() =>
      events.forEach((event) => insert.run({ ...event, late: Number(event.late) })),
    )();
  }

  alarmEvents(atMost: number): AlarmEvent[] {
    const rows = this.#database
      .prepare('SELECT * FROM alarm_event ORDER BY at DESC, rowid DESC LIMIT ?')
      .all(atMost) as AlarmRow[];
    return rows.map(alarmOf);
  }

  lastAlarmEvents(): AlarmEvent[] {
    const rows = this.#database
      .prepare(
        'SELECT * FROM alarm_event WHERE rowid IN (SELECT max(rowid) FROM alarm_event AS newest ' +
          'WHERE late = 0 GROUP BY channel, level) ORDER BY at',
      )
      .all() as AlarmRow[];
    return rows.map(alarmOf);
  }

  addLimitChange({ channel, limits, at, author, reason }: LimitChange): void {
    this.#database
      .prepare('INSERT INTO limit_change VALUES (NULL, ?, ?, ?, ?, ?)')
      .run(channel, JSON.stringify(limits), at, author, reason);
  }

  limitsInForce(): LimitChange[] {
    const rows = this.#database
      .prepare(
        'SELECT channel, limits, at, author, reason FROM limit_change ' +
          'WHERE id IN (SELECT max(id) FROM limit_change GROUP BY channel)',
      )
      .all() as (Omit<LimitChange, 'limits'> & { limits: string })[];
    return rows.map((row) => ({ ...row, limits: JSON.parse(row.limits) as Limit[] }));
  }

  addSiteRevision(revision: SiteRevision, limits: readonly LimitChange[]): void {
    const insert = this.#database.prepare(
      'INSERT INTO site_revision VALUES (@revision, @at, @author, @reason, @origin, @text)',
    );
    this.#database.transaction(() => {
      insert.run(revision);
      for (const change of limits) this.addLimitChange(change);
    })();
  }

  siteRevision(): SiteRevision | null {
    const row = this.#database
      .prepare('SELECT * FROM site_revision ORDER BY revision DESC LIMIT 1')
      .get() as SiteRevision | undefined;
    return row ?? null;
  }

  siteRevisions(atMost: number): Omit<SiteRevision, 'text'>[] {
    return this.#database
      .prepare(
        'SELECT revision, at, author, reason, origin FROM site_revision ' +
          'ORDER BY revision DESC LIMIT ?',
      )
      .all(atMost) as Omit<SiteRevision, 'text'>[];
  }

  addCheckRecords(records: readonly CheckRecord[]): void {
    const insert = this.#database.prepare(
      'INSERT INTO channel_check (channel, kind, verdict, at, author, revision, body) ' +
        'VALUES (?, ?, ?, ?, ?, ?, ?)',
    );
    this.#database.transaction(() => {
      for (const record of records) {
        const { channel, check, at, author, revision } = record;
        const body = JSON.stringify(record);
        insert.run(channel, check.kind, check.verdict, at, author, revision, body);
      }
    })();
  }

  lastCheckRecords(): CheckRecord[] {
    const rows = this.#database
      .prepare(
        'SELECT body FROM channel_check ' +
          'WHERE id IN (SELECT max(id) FROM channel_check GROUP BY channel, kind) ORDER BY id',
      )
      .all() as { body: string }[];
    return rows.map(({ body }) => JSON.parse(body) as CheckRecord);
  }

  close(): void {
    this.#database.close();
  }
}
