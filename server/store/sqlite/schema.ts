import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import Database from 'better-sqlite3';

export type { Database } from 'better-sqlite3';

/**
 * frame and body: what came, as measured, never rewritten. All else is derived.
 * level: buckets of 4^k whole seconds; `meta.levelled` is the last frame in them.
 */
const SAMPLES = `
  CREATE TABLE node (id INTEGER PRIMARY KEY, name TEXT NOT NULL UNIQUE, longest REAL NOT NULL);
  CREATE TABLE boot (
    id INTEGER PRIMARY KEY, node INTEGER NOT NULL, name TEXT NOT NULL, sequenced INTEGER NOT NULL,
    ranges TEXT NOT NULL, frames INTEGER NOT NULL, samples INTEGER NOT NULL,
    first_arrived REAL NOT NULL, last_arrived REAL NOT NULL, UNIQUE (node, name));
  CREATE TABLE layout (
    id INTEGER PRIMARY KEY, inputs TEXT NOT NULL, pairs TEXT NOT NULL, UNIQUE (inputs, pairs));
  CREATE TABLE frame (
    id INTEGER PRIMARY KEY, node INTEGER NOT NULL, boot INTEGER NOT NULL, seq INTEGER NOT NULL,
    t0 REAL NOT NULL, dt REAL NOT NULL, count INTEGER NOT NULL, arrived REAL NOT NULL,
    layout INTEGER NOT NULL, summary BLOB NOT NULL, UNIQUE (boot, seq));
  CREATE INDEX frame_time ON frame (node, t0);
  CREATE TABLE body (id INTEGER PRIMARY KEY, bytes BLOB NOT NULL);
  CREATE TABLE series (
    id INTEGER PRIMARY KEY, node INTEGER NOT NULL, input TEXT NOT NULL, over TEXT NOT NULL,
    first_frame INTEGER NOT NULL, UNIQUE (node, input, over));
  CREATE TABLE level (
    series INTEGER NOT NULL, k INTEGER NOT NULL, bucket INTEGER NOT NULL,
    min REAL NOT NULL, max REAL NOT NULL, sum REAL NOT NULL, count INTEGER NOT NULL,
    PRIMARY KEY (series, k, bucket)) WITHOUT ROWID;
  CREATE TABLE meta (name TEXT PRIMARY KEY, value INTEGER NOT NULL);
  INSERT INTO meta VALUES ('levelled', 0);
`;

const RECORDS = `
  CREATE TABLE alarm_event (
    id TEXT PRIMARY KEY, channel TEXT NOT NULL, level TEXT NOT NULL, kind TEXT NOT NULL,
    at REAL NOT NULL, value REAL NOT NULL, threshold REAL NOT NULL);
  CREATE INDEX alarm_event_time ON alarm_event (at);
  CREATE INDEX alarm_event_place ON alarm_event (channel, level, at);
  CREATE TABLE limit_change (
    id INTEGER PRIMARY KEY, channel TEXT NOT NULL, limits TEXT NOT NULL,
    at REAL NOT NULL, author TEXT NOT NULL, reason TEXT NOT NULL);
`;

const SITE_REVISIONS = `
  CREATE TABLE site_revision (
    revision INTEGER PRIMARY KEY, at REAL NOT NULL, author TEXT NOT NULL, reason TEXT NOT NULL,
    origin TEXT NOT NULL, text TEXT NOT NULL);
`;

/** body: the CheckRecord, JSON. */
const CHANNEL_CHECKS = `
  CREATE TABLE channel_check (
    id INTEGER PRIMARY KEY, channel TEXT NOT NULL, kind TEXT NOT NULL, verdict TEXT NOT NULL,
    at REAL NOT NULL, author TEXT NOT NULL, revision INTEGER NOT NULL, body TEXT NOT NULL);
  CREATE INDEX channel_check_place ON channel_check (channel, kind, id);
`;

const LATE_ALARMS = `
  ALTER TABLE alarm_event ADD COLUMN late INTEGER NOT NULL DEFAULT 0;
`;

/** What makes each version out of the one before; a file is at the version of as many as it has. */
const FILES: Readonly<Record<'samples' | 'records', readonly string[]>> = {
  samples: [SAMPLES],
  records: [RECORDS, SITE_REVISIONS, CHANNEL_CHECKS, LATE_ALARMS],
};

/** Opens or makes a file of the data folder; everything committed is on disk (WAL, full sync). */
export const openFile = (folder: string, which: keyof typeof FILES): Database.Database => {
  const versions = FILES[which];
  const file = `${which}.sqlite`;
  mkdirSync(folder, { recursive: true });
  const database = new Database(join(folder, file));
  database.pragma('page_size = 4096');
  database.pragma('journal_mode = WAL');
  database.pragma('synchronous = FULL');
  database.pragma('wal_autocheckpoint = 4000');
  database.pragma('cache_size = -16000');
  const found = Number(database.pragma('user_version', { simple: true }));
  if (found > versions.length) {
    database.close();
    throw new Error(
      `${file}: expected version ${versions.length} or older, came version ${found}; ` +
        'a newer Yieldward wrote it, start that one',
    );
  }
  if (found === versions.length) return database;
  database.transaction(() => {
    for (const change of versions.slice(found)) database.exec(change);
    database.pragma(`user_version = ${versions.length}`);
  })();
  return database;
};
