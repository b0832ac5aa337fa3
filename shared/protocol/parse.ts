/** Queries and bodies of the REST API, read from what came: a value, or every fault at once. */
import type { Fault } from '../model/fault.ts';
import type { Limit, LimitBasis, LimitLevel } from '../model/limit.ts';
import { epochSeconds, seconds, type EpochSeconds } from '../model/units.ts';
import { isMap } from '../pipeline/1-decode/frame.ts';
import { show } from '../pipeline/1-decode/topics.ts';
import type { LimitsRequest } from './http.ts';

export type Parsed<T> =
  | { readonly ok: true; readonly value: T }
  | { readonly ok: false; readonly faults: readonly Fault[] };

export const MOST_POINTS = 20_000;
export const DEFAULT_POINTS = 2000;
export const HISTORY_FORMATS = ['json', 'csv'] as const;
export const LIMIT_LEVELS: readonly LimitLevel[] = ['caution', 'stop'];
export const LIMIT_BASES: readonly LimitBasis[] = ['strain', 'stress', 'share', 'value'];

/** The last second of the year 9999, where ISO 8601 with four digits of year ends. */
const LATEST = 253_402_300_799;
const DATE_TIME = /^(\d{4}-\d\d-\d\dT)(\d\d:\d\d:\d\d)(\.\d+)?(Z|[+-]\d\d:\d\d)$/;
const TIME_IN_WORDS =
  'UTC seconds since 1970, or ISO 8601 with Z or offset, such as 2026-03-01T08:00:00Z';

/** UTC seconds or an ISO 8601 date and time with offset (RFC 3339 §5.6); null where it is neither. */
export const parseTime = (text: string): EpochSeconds | null => {
  if (/^\d+(\.\d+)?$/.test(text)) {
    return Number(text) <= LATEST ? epochSeconds(Number(text)) : null;
  }
  // A plus sign in a query means a space (application/x-www-form-urlencoded).
  const match = DATE_TIME.exec(text.toUpperCase().replace(/ (?=\d\d:\d\d$)/, '+'));
  if (!match) return null;
  const [, date = '', time = '', fraction = '', offset = ''] = match;
  const local = Date.parse(`${date}${time}Z`);
  // A day that its month has not is carried over into the next: no such date.
  if (!Number.isFinite(local) || !new Date(local).toISOString().startsWith(date)) return null;
  const whole = Date.parse(`${date}${time}${offset}`) / 1e3;
  const at = whole + Number(`0${fraction}`);
  return at >= 0 && at <= LATEST ? epochSeconds(at) : null;
};

export interface HistoryQuery {
  readonly channel: string;
  readonly from: EpochSeconds;
  /** Not included. */
  readonly to: EpochSeconds;
  readonly points: number;
  readonly format: (typeof HISTORY_FORMATS)[number];
}

const HISTORY_PARAMETERS = ['channel', 'from', 'to', 'points', 'format'] as const;
type HistoryParameter = (typeof HISTORY_PARAMETERS)[number];

const pointsOf = (text: string): number | null =>
  /^\d{1,6}$/.test(text) && Number(text) >= 1 && Number(text) <= MOST_POINTS ? Number(text) : null;

/** `query`: parameters as text, or a list of texts where one was given more than once. */
export const parseHistoryQuery = (
  query: Readonly<Record<string, unknown>>,
): Parsed<HistoryQuery> => {
  const known: readonly string[] = HISTORY_PARAMETERS;
  const faults: Fault[] = Object.keys(query)
    .filter((name) => !known.includes(name))
    .map((path) => ({ path, expected: `one of ${known.join(', ')}`, came: show(query[path]) }));
  const read = <T>(
    path: HistoryParameter,
    expected: string,
    parse: (text: string) => T | null,
    fallback?: T,
  ): T | null => {
    const text = query[path];
    if (text === undefined && fallback !== undefined) return fallback;
    const value = typeof text === 'string' ? parse(text) : null;
    if (value !== null) return value;
    faults.push({ path, expected, came: Array.isArray(text) ? 'more than one' : show(text) });
    return null;
  };
  const channel = read('channel', 'the id of a channel', (text) => text || null);
  const from = read('from', TIME_IN_WORDS, parseTime);
  const to = read('to', TIME_IN_WORDS, parseTime);
  const wholeNumber = `a whole number, 1 to ${MOST_POINTS}`;
  const points = read('points', wholeNumber, pointsOf, DEFAULT_POINTS);
  const format = read<HistoryQuery['format']>(
    'format',
    HISTORY_FORMATS.join(' or '),
    (text) => HISTORY_FORMATS.find((known) => known === text) ?? null,
    'json',
  );
  if (from !== null && to !== null && !(from < to)) {
    faults.push({ path: 'to', expected: `after from (${from})`, came: String(to) });
  }
  const whole = channel !== null && from !== null && to !== null && points !== null;
  return whole && format !== null && faults.length === 0
    ? { ok: true, value: { channel, from, to, points, format } }
    : { ok: false, faults };
};

export type Report = (path: string, expected: string, came: unknown) => void;

const LIMIT_FIELDS = ['level', 'basis', 'value', 'deadband', 'onDelay'];
const REQUEST_FIELDS = ['limits', 'author', 'reason'];
/** Each level once. */
const MOST_LIMITS = LIMIT_LEVELS.length;

export const reportStrangers = (
  map: Readonly<Record<string, unknown>>,
  fields: readonly string[],
  at: string,
  report: Report,
) => {
  for (const name of Object.keys(map).filter((key) => !fields.includes(key))) {
    const step = name.replace(/~/g, '~0').replace(/\//g, '~1');
    report(`${at}/${step}`, `no such field; fields are ${fields.join(', ')}`, map[name]);
  }
};

const limitOf = (item: unknown, at: string, report: Report): Limit | null => {
  if (!isMap(item)) {
    report(at, `a limit: a map of ${LIMIT_FIELDS.join(', ')}`, item);
    return null;
  }
  const word = <T extends string>(name: string, words: readonly T[]): T | null => {
    const found = words.find((candidate) => candidate === item[name]) ?? null;
    if (found === null) report(`${at}/${name}`, words.join(' or '), item[name]);
    return found;
  };
  const figure = (name: string): number | null => {
    const value = item[name];
    if (typeof value === 'number' && Number.isFinite(value)) return value;
    report(`${at}/${name}`, 'a number', value);
    return null;
  };
  const [level, basis] = [word('level', LIMIT_LEVELS), word('basis', LIMIT_BASES)];
  const [value, deadband, onDelay] = [figure('value'), figure('deadband'), figure('onDelay')];
  reportStrangers(item, LIMIT_FIELDS, at, report);
  if (level === null || basis === null) return null;
  if (value === null || deadband === null || onDelay === null) return null;
  return { level, basis, value, deadband, onDelay: seconds(onDelay) };
};

/** Shapes only; whether the limits may stand is the alarm stage's to say. */
export const parseLimitsRequest = (body: unknown): Parsed<LimitsRequest> => {
  const faults: Fault[] = [];
  const report: Report = (path, expected, came) =>
    faults.push({ path, expected, came: show(came) });
  if (!isMap(body)) {
    report('/', `a map of ${REQUEST_FIELDS.join(', ')}`, body);
    return { ok: false, faults };
  }
  const { limits, author, reason } = body;
  const list = Array.isArray(limits) && limits.length <= MOST_LIMITS ? limits : null;
  if (list === null) report('/limits', `an array of at most ${MOST_LIMITS} limits`, limits);
  const read = (list ?? []).flatMap((item, i) => limitOf(item, `/limits/${i}`, report) ?? []);
  if (typeof author !== 'string') report('/author', 'text: who changes the limits', author);
  if (typeof reason !== 'string') report('/reason', 'text: why', reason);
  reportStrangers(body, REQUEST_FIELDS, '', report);
  return faults.length === 0 && typeof author === 'string' && typeof reason === 'string'
    ? { ok: true, value: { limits: read, author, reason } }
    : { ok: false, faults };
};
