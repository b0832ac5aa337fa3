/** All that is judged of a channel before anybody loads anything, in the order of a first look. */
import type { CalibrationRecord } from '../model/calibration.ts';
import type { Ohm } from '../model/units.ts';
import type { Range } from '../pipeline/convert.ts';
import { aliveCheck, frozenCheck } from './alive.ts';
import { driftCheck } from './drift.ts';
import { heatingCheck, insulationCheck, type Heating } from './electrical.ts';
import { humCheck } from './hum.ts';
import type { CheckLimits } from './limits.ts';
import { MAINS } from './mains.ts';
import { noiseCheck } from './noise.ts';
import { signCheck, type Push } from './push.ts';
import { seriesOf, type Watched } from './series.ts';
import { gravest, notJudged, type Check, type ValueUnit, type Verdict } from './verdict.ts';
import { offsetCheck, rangeCheck } from './wiring.ts';

/** What is known of a channel beside its samples. */
export interface ChannelFacts {
  readonly unit: ValueUnit;
  /** In force while the samples were taken. */
  readonly record: Pick<CalibrationRecord, 'signal' | 'response'>;
  readonly range: Range;
  /** Of the gauge to ground; null: not measured. */
  readonly insulation: Ohm | null;
  /** null: excitation or grid area not stated. */
  readonly heating: Heating | null;
  /** null: nobody has pushed yet. */
  readonly push: Push | null;
}

/** Every check once, in a fixed order; those that lack what they need are `not-judged`. */
export const checkChannel = (
  watched: Watched,
  facts: ChannelFacts,
  limits: CheckLimits,
): readonly Check[] => {
  const series = seriesOf(watched);
  const { unit, record, range, insulation, heating, push } = facts;
  return [
    aliveCheck(series, limits.alive),
    frozenCheck(series, limits.frozen),
    rangeCheck(watched, range, limits.range),
    offsetCheck(watched, record, limits.offset),
    noiseCheck(series, unit, limits.noise),
    ...MAINS.map((hertz) => humCheck(series, unit, hertz, limits.mains, limits.noise)),
    driftCheck(series, unit, limits.drift, limits.driftAfter),
    push ? signCheck(push, unit) : notJudged('sign', unit, 'Nobody has pushed yet.'),
    insulationCheck(record.response, insulation, limits.insulation),
    heatingCheck(record.response, heating),
  ];
};

export const channelVerdict = (checks: readonly Check[]): Verdict =>
  gravest(checks.map(({ verdict }) => verdict));
