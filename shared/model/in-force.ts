import type { CalibrationRecord, ZeroRecord } from './calibration.ts';
import type { EpochSeconds } from './units.ts';

/** The records that govern a channel from a time on, until the next stretch begins. */
export interface InForce {
  readonly from: EpochSeconds;
  readonly record: CalibrationRecord;
  /** null: the zero that the calibration record states. */
  readonly zero: ZeroRecord | null;
}

interface Dated {
  readonly id: string;
  readonly validFrom: EpochSeconds;
  readonly corrects: string | null;
}

/** Without those that another corrects, oldest validity first. */
export const standing = <T extends Dated>(records: readonly T[]): T[] => {
  const corrected = new Set(records.map(({ corrects }) => corrects));
  return records.filter(({ id }) => !corrected.has(id)).sort((a, b) => a.validFrom - b.validFrom);
};

/**
 * Who governs when. A calibration record governs from its `validFrom` to that of the next; one
 * that corrects another takes that one's place over all of its time. A zero governs from its
 * `validFrom` until the next zero or the next calibration record, whose own zero then stands:
 * the wiring is another one. A correction that begins where the corrected record began leaves the
 * zeros read since then in force. Ascending, no two from the same time.
 */
export const inForce = (
  records: readonly CalibrationRecord[],
  zeros: readonly ZeroRecord[],
): readonly InForce[] => {
  const calibrations = standing(records);
  const zeroed = standing(zeros);
  return calibrations.flatMap((record, i): InForce[] => {
    const end = calibrations[i + 1]?.validFrom ?? Infinity;
    const during = zeroed.filter(
      ({ validFrom }) => validFrom >= record.validFrom && validFrom < end,
    );
    const own: InForce[] =
      during[0]?.validFrom === record.validFrom
        ? []
        : [{ from: record.validFrom, record, zero: null }];
    return [...own, ...during.map((zero) => ({ from: zero.validFrom, record, zero }))];
  });
};
