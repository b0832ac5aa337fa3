import type { Fault } from '../../shared/model/fault.ts';
import type { Limit, LimitBasis, LimitContext, LimitLevel } from '../../shared/model/limit.ts';
import { seconds } from '../../shared/model/units.ts';
import { basesFor as basesOf } from '../../shared/pipeline/5-alarm/check-limits.ts';
import { thresholdOf } from '../../shared/pipeline/5-alarm/threshold.ts';
import { fieldText, typedNumber } from './number-text.ts';
import { kindOfBasis, scaleFor, type Scale, type UnitSystem } from './quantity.ts';

/** A limit as it stands in the form: text, in the units on the screen. */
export interface LimitDraft {
  readonly level: LimitLevel;
  /** Whether the channel shall have a limit of this level at all. */
  readonly wanted: boolean;
  readonly basis: LimitBasis;
  readonly value: string;
  readonly deadband: string;
  /** s */
  readonly onDelay: string;
}

const ORDER: readonly LimitBasis[] = ['share', 'stress', 'strain', 'value'];

/** In the order in which the form offers them. */
export const basesFor = (context: LimitContext): readonly LimitBasis[] =>
  ORDER.filter((basis) => basesOf(context).includes(basis));

export const draftScale = (
  basis: LimitBasis,
  { measurand }: LimitContext,
  units: UnitSystem,
): Scale => scaleFor(kindOfBasis(basis, measurand), units);

/** A band is the difference of two shown figures, since a unit may have an offset (°F). */
const bandShown = (value: number, band: number, scale: Scale): number =>
  scale.fromSi(value) - scale.fromSi(value - band);

export const draftOf = (
  level: LimitLevel,
  limits: readonly Limit[],
  context: LimitContext,
  units: UnitSystem,
): LimitDraft => {
  const limit = limits.find((candidate) => candidate.level === level);
  const [basis = 'value'] = basesFor(context);
  if (!limit) return { level, wanted: false, basis, value: '', deadband: '0', onDelay: '0' };
  const scale = draftScale(limit.basis, context, units);
  return {
    ...{ level, wanted: true, basis: limit.basis },
    value: fieldText(scale.fromSi(limit.value)),
    deadband: fieldText(bandShown(limit.value, limit.deadband, scale)),
    onDelay: fieldText(limit.onDelay),
  };
};

/** Without what the difference of two rounded figures leaves at its end. */
const tidy = (value: number): number => Number(value.toPrecision(12));

/** SI; NaN where a field holds no number. */
export const limitOf = (draft: LimitDraft, context: LimitContext, units: UnitSystem): Limit => {
  const scale = draftScale(draft.basis, context, units);
  const [value, band] = [typedNumber(draft.value), typedNumber(draft.deadband)];
  return {
    ...{ level: draft.level, basis: draft.basis },
    value: scale.toSi(value),
    deadband: tidy(scale.toSi(value) - scale.toSi(value - band)),
    onDelay: seconds(typedNumber(draft.onDelay)),
  };
};

/** Fields that hold no number, named as the server names its faults. */
export const draftFaults = (drafts: readonly LimitDraft[]): Fault[] =>
  drafts
    .filter(({ wanted }) => wanted)
    .flatMap((draft, i) =>
      (['value', 'deadband', 'onDelay'] as const)
        .filter((field) => Number.isNaN(typedNumber(draft[field])))
        .map((field) => ({
          path: `/limits/${i}/${field}`,
          expected: 'a number',
          came: draft[field].trim() === '' ? 'nothing' : draft[field],
        })),
    );

/** The same limit stated in another basis: the threshold stays where it is. */
export const rebased = (
  draft: LimitDraft,
  basis: LimitBasis,
  context: LimitContext,
  units: UnitSystem,
): LimitDraft => {
  const { raise, clear } = thresholdOf(limitOf(draft, context, units), context);
  const one = thresholdOf({ ...limitOf(draft, context, units), basis, value: 1 }, context).raise;
  if (!Number.isFinite(raise / one)) return { ...draft, basis };
  const scale = draftScale(basis, context, units);
  const [value, band] = [raise / one, (raise - clear) / one];
  return {
    ...{ ...draft, basis },
    value: fieldText(scale.fromSi(value)),
    deadband: fieldText(Number.isFinite(band) ? bandShown(value, band, scale) : 0),
  };
};

/** Faults of one field; `place` is the draft's place among those sent. */
export const faultsAt = (faults: readonly Fault[], path: string): readonly Fault[] =>
  faults.filter((fault) => fault.path === path);
