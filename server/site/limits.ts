import type { Limit, LimitBasis, LimitContext } from '../../shared/model/limit.ts';
import type { Measurand } from '../../shared/model/site.ts';
import { pascal, seconds, share } from '../../shared/model/units.ts';
import { limitFaults } from '../../shared/pipeline/5-alarm/check-limits.ts';
import type { Reading } from './reading.ts';

interface LimitOfFile {
  readonly level: Limit['level'];
  readonly basis: keyof typeof BASES;
  readonly value: number;
  readonly deadband: number;
  readonly on_delay_s: number;
}

interface Basis {
  readonly basis: LimitBasis;
  readonly si: number;
  readonly measurands: readonly Measurand[];
}

const STRAINS: readonly Measurand[] = ['strain', 'shear'];
const STRESSES: readonly Measurand[] = [...STRAINS, 'stress'];

/** What each basis of the file is inside, its unit in SI, and what it can limit. */
const BASES = {
  share_of_yield: { basis: 'share', si: 1, measurands: STRESSES },
  stress_MPa: { basis: 'stress', si: 1e6, measurands: STRESSES },
  strain_microstrain: { basis: 'strain', si: 1e-6, measurands: STRAINS },
  force_kN: { basis: 'value', si: 1e3, measurands: ['force'] },
  moment_kN_m: { basis: 'value', si: 1e3, measurands: ['moment'] },
  angle_degree: { basis: 'value', si: Math.PI / 180, measurands: ['angle'] },
  number: { basis: 'value', si: 1, measurands: ['number'] },
  displacement_mm: { basis: 'value', si: 1e-3, measurands: ['displacement'] },
  temperature_Cel: { basis: 'value', si: 1, measurands: ['temperature'] },
} as const satisfies Record<string, Basis>;

const basisOf = (name: LimitOfFile['basis']): Basis => BASES[name];

const namesFor = (measurand: Measurand): string =>
  Object.entries<Basis>(BASES)
    .filter(([, { measurands }]) => measurands.includes(measurand))
    .map(([name]) => name)
    .join(', ');

/** More digits than anybody types; fewer than bring the last bit of a double to light. */
const DIGITS = 12;

/** A limit as the file has it, in its own basis and unit. */
export const writeLimit = (limit: Limit, measurand: Measurand): LimitOfFile => {
  const entry = Object.entries<Basis>(BASES).find(
    ([, { basis, measurands }]) => basis === limit.basis && measurands.includes(measurand),
  );
  if (!entry) throw new RangeError(`limit: expected a basis of ${measurand}, came ${limit.basis}`);
  const [name, { si }] = entry;
  const inFile = (figure: number) => Number((figure / si).toPrecision(DIGITS));
  return {
    ...{ level: limit.level, basis: name as LimitOfFile['basis'], value: inFile(limit.value) },
    ...{ deadband: inFile(limit.deadband), on_delay_s: limit.onDelay },
  };
};

const readLimit = (reading: Reading, at: string, measurand: Measurand): Limit | null => {
  const limit = reading.value<LimitOfFile>(at);
  if (!limit) return null;
  const { basis, si, measurands } = basisOf(limit.basis);
  if (!measurands.includes(measurand)) {
    reading.faultAt(`${at}/basis`, `${namesFor(measurand)} for ${measurand}`);
    return null;
  }
  if (!(limit.deadband < limit.value)) {
    reading.faultAt(`${at}/deadband`, `below the limit's value of ${limit.value}`);
    return null;
  }
  const { level, value, deadband, on_delay_s } = limit;
  return {
    ...{ level, basis, value: value * si, deadband: deadband * si },
    onDelay: seconds(on_delay_s),
  };
};

/**
 * A list of limits, each checked against what it is to guard; the order of
 * limits that stand is kept. `context` null: of a material that is at fault.
 */
export const readLimits = (
  reading: Reading,
  at: string,
  measurand: Measurand,
  context: LimitContext | null,
): readonly Limit[] => {
  const read = reading.items(at).flatMap((pointer) => {
    const limit = readLimit(reading, pointer, measurand);
    return limit ? [{ pointer, limit }] : [];
  });
  const limits = read.map(({ limit }) => limit);
  if (!context) return limits;
  for (const { path, expected, came } of limitFaults(limits, context)) {
    const [, , place = '', field = ''] = path.split('/');
    const pointer = read[Number(place)]?.pointer ?? at;
    const typed = reading.value<LimitOfFile>(pointer);
    // The stage's figures are SI: beside them, what stands in the file.
    const inFile = typed && field === 'value' ? `${typed.value} as ${typed.basis}, ` : '';
    reading.fault(`${pointer}/${field}`, expected, inFile + came);
  }
  return limits;
};

/** Limits of strain and shear channels without their own: shares of yield, whatever the yield. */
export const readDefaultLimits = (reading: Reading, highestLimit: number): readonly Limit[] =>
  readLimits(reading, '/default_limits', 'strain', {
    measurand: 'strain',
    stressPerStrain: pascal(1),
    yieldStrength: pascal(1),
    highestLimit: share(highestLimit),
  });
