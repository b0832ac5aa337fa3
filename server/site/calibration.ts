import type { CalibrationRecord } from '../../shared/model/calibration.ts';
import type { InputUnit, Material, Measurand } from '../../shared/model/site.ts';
import { dateToEpochSeconds, type EpochSeconds } from '../../shared/model/units.ts';
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

const readRecord = (
  reading: Reading,
  at: string,
  validFrom: EpochSeconds | undefined,
  { measurand, input, node, material, ids }: CalibrationContext,
): CalibrationRecord[] => {
  ids.add(`${at}/id`, true);
  const id = reading.value<string>(`${at}/id`);
  const author = reading.value<string>(`${at}/author`);
  const reason = reading.value<string>(`${at}/reason`);
  const signal = readSignal(reading, `${at}/signal`, input, node);
  const response =
    measurand === undefined
      ? null
      : readResponse(reading, `${at}/response`, {
          ...{ measurand, signal, material },
          inputUnit: input.unit,
        });
  if (id === undefined || author === undefined || reason === undefined) return [];
  if (validFrom === undefined || !signal || !response) return [];
  return [{ id, validFrom, author, reason, signal, response }];
};

/** A channel's calibration records; each later than the one before it. */
export const readCalibration = (
  reading: Reading,
  at: string,
  context: CalibrationContext,
): readonly CalibrationRecord[] => {
  let before: EpochSeconds | undefined;
  return reading.items(at).flatMap((pointer) => {
    const validFrom = readTime(reading, `${pointer}/valid_from`);
    if (validFrom !== undefined && before !== undefined && validFrom <= before) {
      reading.faultAt(`${pointer}/valid_from`, 'later than the record before it');
    }
    before = validFrom ?? before;
    return readRecord(reading, pointer, validFrom, context);
  });
};
