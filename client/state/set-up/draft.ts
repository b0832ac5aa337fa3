/** A set-up under change: kept in the browser's tab, so that neither a reload nor a conflict loses it. */
import type { Memory } from '../preferences.ts';
import { channelPlaces, recordIdsOf } from './site-walk.ts';
import { isMapOf, isSame, listAt, textAt, withValue, type Json, type JsonMap } from './tree.ts';

export interface Draft {
  /** The revision that it was made from, and what that was. */
  readonly basedOn: number;
  readonly base: Json;
  readonly document: Json;
  readonly author: string;
  readonly reason: string;
  /** Questions answered, see `slipKey`. */
  readonly answered: readonly string[];
}

const KEY = 'yieldward.set-up-draft';

const isDraft = (value: unknown): value is Draft =>
  typeof value === 'object' &&
  value !== null &&
  ['basedOn', 'base', 'document', 'author', 'reason', 'answered'].every((key) => key in value);

/** null where there is none, or the browser keeps none. */
export const readDraft = (memory: () => Memory): Draft | null => {
  try {
    const kept: unknown = JSON.parse(memory().getItem(KEY) ?? 'null');
    return isDraft(kept) ? kept : null;
  } catch (error) {
    // SyntaxError: not ours. SecurityError: the browser keeps nothing for this page.
    if (error instanceof Error) return null;
    throw error;
  }
};

/** False if the browser does not keep it: it is lost with the page. null takes it away. */
export const keepDraft = (memory: () => Memory, draft: Draft | null): boolean => {
  try {
    memory().setItem(KEY, draft === null ? 'null' : JSON.stringify(draft));
    return true;
  } catch (error) {
    if (error instanceof Error) return false;
    throw error;
  }
};

const SAVED = 'yieldward.set-up-saved';

/** The revision that was put in force from this tab last; null: none, or the browser keeps none. */
export const readSaved = (memory: () => Memory): number | null => {
  try {
    const kept: unknown = JSON.parse(memory().getItem(SAVED) ?? 'null');
    return typeof kept === 'number' ? kept : null;
  } catch (error) {
    if (error instanceof Error) return null;
    throw error;
  }
};

export const keepSaved = (memory: () => Memory, revision: number | null): void => {
  try {
    memory().setItem(SAVED, JSON.stringify(revision));
  } catch (error) {
    // The browser keeps nothing for this page: it is said once less that a change is in force.
    if (!(error instanceof Error)) throw error;
  }
};

/** When a record was added is written by the server. */
const withoutStamps = (value: Json | undefined): Json => {
  if (Array.isArray(value)) return value.map((element: Json) => withoutStamps(element));
  if (!isMapOf(value)) return value ?? null;
  return Object.fromEntries(
    Object.entries(value)
      .filter(([key]) => key !== 'recorded_at')
      .map(([key, inner]) => [key, withoutStamps(inner)]),
  );
};

/** Does what the server has say all that the draft says? */
export const isTaken = (draft: Json, stands: Json): boolean =>
  isSame(withoutStamps(draft), withoutStamps(stands));

/** One step back undoes all that was typed into one field in a row. */
export interface Step {
  readonly document: Json;
  /** Of the field; null: a step of its own. */
  readonly at: string | null;
}

const MOST_STEPS = 100;

export const withStep = (steps: readonly Step[], document: Json, at: string | null): Step[] =>
  at !== null && steps.at(-1)?.at === at
    ? [...steps]
    : [...steps, { document, at }].slice(-MOST_STEPS);

/** The first id of this form that is free. */
export const freeId = (stem: string, taken: ReadonlySet<string>): string => {
  for (let n = 1; ; n++) {
    const id = `${stem}${n}`;
    if (!taken.has(id)) return id;
  }
};

export type RecordKind = 'calibration' | 'zeros';

/** `2026-05-06T07:30:00Z`, of UTC seconds. */
export const rfc3339 = (t: number): string =>
  new Date(Math.floor(t) * 1e3).toISOString().replace('.000Z', 'Z');

const withoutTimes = (record: Json): JsonMap => {
  if (!isMapOf(record)) return {};
  const left = ['id', 'valid_from', 'author', 'reason', 'recorded_at', 'corrects'];
  return Object.fromEntries(Object.entries(record).filter(([key]) => !left.includes(key)));
};

/**
 * A record that begins at `at`, UTC s, with the figures of `like`; of a channel without records
 * from the ground up.
 */
export const newRecord = (
  channel: Json,
  like: Json | undefined,
  at: number,
  author: string,
  taken: ReadonlySet<string>,
): Json => ({
  id: freeId(`${textAt(channel, 'id') ?? 'channel'}-cal`, taken),
  valid_from: rfc3339(at),
  author,
  reason: '',
  ...(like === undefined
    ? { signal: { kind: 'ratio' }, response: { kind: 'bridge' } }
    : withoutTimes(like)),
});

/** A copy of a record that takes its place over all of its time. */
export const correctionOf = (
  channel: Json,
  record: Json,
  author: string,
  taken: ReadonlySet<string>,
): Json => ({
  id: freeId(`${textAt(channel, 'id') ?? 'channel'}-cal`, taken),
  valid_from: textAt(record, 'valid_from') ?? '',
  author,
  reason: '',
  corrects: textAt(record, 'id') ?? '',
  ...withoutTimes(record),
});

/** With the new records that say nothing of it by `author`, for `reason`. */
export const signed = ({ base, document, author, reason }: Draft): Json => {
  const standing = recordIdsOf(base);
  let whole = document;
  for (const { path, channel } of channelPlaces(document)) {
    for (const kind of ['calibration', 'zeros'] as const) {
      listAt(channel, kind).forEach((record, i) => {
        if (standing.has(textAt(record, 'id') ?? '')) return;
        for (const [key, said] of Object.entries({ author, reason })) {
          if ((textAt(record, key) ?? '').trim() !== '' || said.trim() === '') continue;
          whole = withValue(whole, [...path, kind, String(i), key], said);
        }
      });
    }
  }
  return whole;
};
