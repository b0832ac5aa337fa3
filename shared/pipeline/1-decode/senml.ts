import { accept, refuse, type Frame, type Refusal, type Result } from '../../model/frame.ts';
import type { InputUnit } from '../../model/site.ts';
import { epochSeconds, seconds, type EpochSeconds } from '../../model/units.ts';
import { CLOCK_TIME, isClockTime, isMap, plainNumber } from './frame.ts';
import { labelOf, SENML_LABELS, type SenmlForm, type SenmlLabel } from './senml-labels.ts';
import { NAME, NAME_IN_WORDS, show } from './topics.ts';

/** A SenML pack resolved: one frame a reading, in order of time, and what could not be taken. */
export interface SenmlReadings {
  readonly frames: readonly Frame[];
  readonly refusals: readonly Refusal[];
}

export interface SenmlContext {
  readonly form: SenmlForm;
  /** The node that the topic names. */
  readonly node: string;
  /** Relative times count from here. */
  readonly arrived: EpochSeconds;
  /** The unit that the site file declares for an input, null for an input it does not have. */
  readonly declared: (input: string) => InputUnit | null;
}

const VERSION = 10;
/** RFC 8428 §4.5.3: below it a time is relative to now. */
const ABSOLUTE_FROM = 2 ** 28;
const MOST_RECORDS = 10_000;
const VALUES = ['v', 'vs', 'vb', 'vd'] as const;

type Fields = Partial<Record<SenmlLabel, unknown>>;

interface Bases {
  /** Of the records before; null ahead of the first. */
  bver: number | null;
  bn: string;
  bt: number;
  bu: string | undefined;
  bv: number;
}

type Checked<T> = { readonly value: T } | { readonly refusal: Refusal };

const fault = (
  code: string,
  field: string,
  expected: string,
  came: string,
): { refusal: Refusal } => ({
  refusal: { code, field, expected, came },
});

const fieldsOf = (record: unknown, at: string, form: SenmlForm): Checked<Fields> => {
  if (!isMap(record)) return fault('type', at, 'a SenML record', show(record));
  const fields: Fields = {};
  for (const [key, value] of Object.entries(record)) {
    const label = labelOf(key, form);
    if (label) fields[label] = plainNumber(value);
    else if (key.endsWith('_')) {
      return fault(
        'label',
        `${at}.${key.slice(0, 40)}`,
        'no label that must be understood',
        show(key),
      );
    } else if (form === 'cbor' && /^-?\d+$/.test(key)) {
      return fault('label', `${at}.${key.slice(0, 40)}`, 'an integer label of RFC 8428', show(key));
    }
  }
  return { value: fields };
};

/** Base fields hold until the next record that has them. */
const applyBases = (fields: Fields, at: string, bases: Bases): Refusal | null => {
  const { bver = bases.bver ?? VERSION, bn, bt, bu, bv } = fields;
  if (typeof bver !== 'number' || !Number.isInteger(bver) || bver < 1 || bver > VERSION) {
    return fault('version', `${at}.bver`, `1 to ${VERSION}`, show(bver)).refusal;
  }
  if (bases.bver !== null && bver !== bases.bver) {
    const expected = `${bases.bver}, as in the records before`;
    return fault('version', `${at}.bver`, expected, show(bver)).refusal;
  }
  bases.bver = bver;
  if (bn !== undefined && typeof bn !== 'string') {
    return fault('type', `${at}.bn`, 'text', show(bn)).refusal;
  }
  if (bu !== undefined && typeof bu !== 'string') {
    return fault('type', `${at}.bu`, 'text', show(bu)).refusal;
  }
  for (const [label, value] of [
    ['bt', bt],
    ['bv', bv],
  ] as const) {
    if (value === undefined) continue;
    if (typeof value !== 'number' || !Number.isFinite(value)) {
      return fault('type', `${at}.${label}`, 'a number', show(value)).refusal;
    }
    bases[label] = value;
  }
  if (bn !== undefined) bases.bn = bn;
  if (bu !== undefined) bases.bu = bu;
  return null;
};

const nameOf = (fields: Fields, at: string, bases: Bases, node: string): Checked<string> => {
  const { n = '' } = fields;
  if (typeof n !== 'string') return fault('type', `${at}.n`, 'text', show(n));
  const name = bases.bn + n;
  const input = name.startsWith(`${node}/`) ? name.slice(node.length + 1) : name;
  if (NAME.test(input)) return { value: input };
  return fault(
    'name',
    `${at}.n`,
    `an input (${NAME_IN_WORDS}), or ${node}/ and an input`,
    show(name),
  );
};

const numberOf = (fields: Fields, at: string, bases: Bases): Checked<number> => {
  const came = VALUES.filter((label) => fields[label] !== undefined);
  if (came.length !== 1 || came[0] !== 'v') {
    return fault('value', at, 'one numeric value, v', came.join(', ') || 'none');
  }
  if (typeof fields.v !== 'number' || !Number.isFinite(fields.v)) {
    return fault('type', `${at}.v`, 'a number', show(fields.v));
  }
  const value = bases.bv + fields.v;
  if (Number.isFinite(value)) return { value };
  return fault('type', `${at}.v`, 'a sum with bv that a double can hold', show(value));
};

const timeOf = (fields: Fields, at: string, bases: Bases, arrived: number): Checked<number> => {
  const { t = 0 } = fields;
  if (typeof t !== 'number') return fault('type', `${at}.t`, 'a number', show(t));
  const stated = bases.bt + t;
  const time = stated < ABSOLUTE_FROM ? arrived + stated : stated;
  if (isClockTime(time)) return { value: time };
  return fault('time', `${at}.t`, CLOCK_TIME, show(time));
};

const readingOf = (
  fields: Fields,
  at: string,
  bases: Bases,
  context: SenmlContext,
): Checked<Frame> => {
  const name = nameOf(fields, at, bases, context.node);
  if ('refusal' in name) return name;
  const unit = fields.u ?? bases.bu;
  if (unit !== undefined && typeof unit !== 'string') {
    return fault('type', `${at}.u`, 'text', show(unit));
  }
  const declared = context.declared(name.value);
  if (unit !== undefined && declared !== null && unit !== declared) {
    return fault('unit', `${at}.u`, `${declared}, as declared for ${name.value}`, show(unit));
  }
  const value = numberOf(fields, at, bases);
  if ('refusal' in value) return value;
  const time = timeOf(fields, at, bases, context.arrived);
  if ('refusal' in time) return time;
  return {
    value: {
      node: context.node,
      boot: `senml/${name.value}`,
      seq: Math.round(time.value * 1e6),
      sequenced: false,
      t0: epochSeconds(time.value),
      dt: seconds(0),
      inputs: [{ input: name.value, samples: Float64Array.of(value.value) }],
    },
  };
};

const hasOwnFields = (fields: Fields): boolean =>
  Object.keys(fields).some((label) => !label.startsWith('b'));

/**
 * A SenML pack (RFC 8428) as read from JSON or CBOR. What is wrong with the pack
 * as such refuses it whole; a reading that cannot be taken (another node's, text,
 * a unit that is not the declared one) is refused alone.
 */
export const decodeSenml = (parsed: unknown, context: SenmlContext): Result<SenmlReadings> => {
  if (!Array.isArray(parsed)) return refuse('type', '(pack)', 'an array of records', show(parsed));
  if (parsed.length === 0 || parsed.length > MOST_RECORDS) {
    return refuse('size', '(pack)', `1 to ${MOST_RECORDS} records`, String(parsed.length));
  }
  const bases: Bases = { bver: null, bn: '', bt: 0, bu: undefined, bv: 0 };
  const frames: Frame[] = [];
  const refusals: Refusal[] = [];
  for (const [i, record] of parsed.entries()) {
    const at = `[${i}]`;
    const fields = fieldsOf(record, at, context.form);
    if ('refusal' in fields) return { ok: false, refusal: fields.refusal };
    const refusal = applyBases(fields.value, at, bases);
    if (refusal) return { ok: false, refusal };
    if (!hasOwnFields(fields.value)) continue;
    const reading = readingOf(fields.value, at, bases, context);
    if ('refusal' in reading) refusals.push(reading.refusal);
    else frames.push(reading.value);
  }
  frames.sort((a, b) => a.t0 - b.t0);
  return accept({ frames, refusals });
};

export interface SenmlReading {
  readonly name: string;
  readonly unit: InputUnit;
  readonly time: EpochSeconds;
  readonly value: number;
}

/** The records that a JSON or CBOR writer turns into a pack; resolved, without base fields. */
export const encodeSenml = (readings: readonly SenmlReading[], form: SenmlForm): unknown[] =>
  readings.map(({ name, unit, time, value }) => {
    if (form === 'json') return { n: name, u: unit, t: time, v: value };
    const { n, u, t, v } = SENML_LABELS;
    return new Map<number, string | number>([
      [n, name],
      [u, unit],
      [t, time],
      [v, value],
    ]);
  });
