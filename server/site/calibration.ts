import type {
  CalibrationRecord,
  StructureState,
  ZeroRecord,
} from '../../shared/model/calibration.ts';
import type { InputUnit, Material, Measurand } from '../../shared/model/site.ts';
import {
  celsius,
  dateToEpochSeconds,
  kilonewtonToNewton,
  type EpochSeconds,
} from '../../shared/model/units.ts';
import type { Names } from './names.ts';
import type { NodeEntry } from './nodes.ts';
import type { Reading } from './reading.ts';
import { readResponse } from './response.ts';
import { readSignal } from './signal.ts';

/** The channel whose records are read. What is undefined or null is at fault in the file. */
export interface CalibrationContext {
  readonly measurand: Measurand | undefined;
  readonly input: { readonly name: string | undefined; readonly unit: InputUnit | undefined };
  readonly node: NodeEntry | undefined;
  readonly material: Material | null;
  /** Ids of the whole site. */
  readonly ids: Names;
}

const readTime = (reading: Reading, at: string): EpochSeconds | undefined => {
  const text = reading.value<string>(at);
  if (text === undefined) return undefined;
  const time = dateToEpochSeconds(new Date(text));
  if (Number.isFinite(time)) return time;
  reading.faultAt(at, 'a time that a calendar has, leap seconds left out');
  return undefined;
};

/** What calibration and zero records have in common; null where something of it is at fault. */
interface Head {
  readonly id: string;
  readonly validFrom: EpochSeconds;
  readonly author: string;
  readonly reason: string;
  readonly recordedAt: EpochSeconds | null;
  readonly corrects: string | null;
}

const readHead = (reading: Reading, at: string, ids: Names): Head | null => {
  ids.add(`${at}/id`, true);
  const validFrom = readTime(reading, `${at}/valid_from`);
  const recordedAt = readTime(reading, `${at}/recorded_at`) ?? null;
  const id = reading.value<string>(`${at}/id`);
  const author = reading.value<string>(`${at}/author`);
  const reason = reading.value<string>(`${at}/reason`);
  const corrects = reading.value<string>(`${at}/corrects`) ?? null;
  if (id === undefined || author === undefined || reason === undefined) return null;
  return validFrom === undefined ? null : { id, validFrom, author, reason, recordedAt, corrects };
};

/** Each corrects an earlier one at most, none is corrected twice, those that stand begin apart. */
const checkSuccession = (reading: Reading, records: readonly (readonly [string, Head])[]): void => {
  const earlier = new Map<string, boolean>();
  for (const [at, { id, corrects }] of records) {
    if (corrects !== null) {
      const taken = earlier.get(corrects);
      if (taken === undefined) {
        const ids = [...earlier.keys()].join(', ') || 'there is none';
        reading.faultAt(`${at}/corrects`, `an earlier record of this channel: ${ids}`);
      } else if (taken) reading.faultAt(`${at}/corrects`, 'a record that none corrects yet');
      earlier.set(corrects, true);
    }
    earlier.set(id, false);
  }
  const corrected = new Set(records.map(([, { corrects }]) => corrects));
  const begins = new Map<number, string>();
  for (const [at, { id, validFrom }] of records) {
    if (corrected.has(id)) continue;
    const other = begins.get(validFrom);
    if (other === undefined) begins.set(validFrom, id);
    else {
      const expected = `another time than ${other} begins at, or corrects: "${other}"`;
      reading.faultAt(`${at}/valid_from`, expected);
    }
  }
};

const readRecord = (
  reading: Reading,
  at: string,
  { measurand, input, node, material, ids }: CalibrationContext,
): CalibrationRecord[] => {
  const head = readHead(reading, at, ids);
  const signal = readSignal(reading, `${at}/signal`, input, node);
  const response =
    measurand === undefined
      ? null
      : readResponse(reading, `${at}/response`, {
          ...{ measurand, signal, material },
          inputUnit: input.unit,
        });
  return head && signal && response ? [{ ...head, signal, response }] : [];
};

/** Reads each of a list, and how the records follow one another. */
const readAll = <T extends Head>(
  reading: Reading,
  at: string,
  readOne: (pointer: string) => T[],
): readonly T[] => {
  const read = reading
    .items(at)
    .flatMap((pointer) => readOne(pointer).map((record) => [pointer, record] as const));
  checkSuccession(reading, read);
  return read.map(([, record]) => record);
};

/** A channel's calibration records in the order in which they were added. */
export const readCalibration = (
  reading: Reading,
  at: string,
  context: CalibrationContext,
): readonly CalibrationRecord[] =>
  readAll(reading, at, (pointer) => readRecord(reading, pointer, context));

interface ZeroOfFile {
  readonly raw: number;
  readonly noise: number;
  readonly samples: number;
  readonly temperature_Cel?: number;
  readonly state: { readonly kind: 'unloaded' | 'loaded'; readonly load_kN?: number };
}

const stateOf = ({ kind, load_kN }: ZeroOfFile['state']): StructureState =>
  kind === 'unloaded' ? { kind } : { kind, load: kilonewtonToNewton(load_kN ?? NaN) };

/** A channel's zeros in the order in which they were added. */
export const readZeros = (
  reading: Reading,
  at: string,
  { input, ids }: Pick<CalibrationContext, 'input' | 'ids'>,
): readonly ZeroRecord[] =>
  readAll(reading, at, (pointer) => {
    const head = readHead(reading, pointer, ids);
    const unit = reading.value<InputUnit>(`${pointer}/unit`);
    if (unit !== undefined && input.unit !== undefined && unit !== input.unit) {
      reading.faultAt(`${pointer}/unit`, `"${input.unit}", the unit of the input`);
    }
    const file = reading.value<ZeroOfFile>(pointer);
    if (!head || !file) return [];
    const { raw, noise, samples, temperature_Cel, state } = file;
    const temperature = temperature_Cel === undefined ? null : celsius(temperature_Cel);
    return [{ ...head, raw, noise, samples, temperature, state: stateOf(state) }];
  });
