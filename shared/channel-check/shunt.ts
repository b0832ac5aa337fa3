import type { BridgeResponse, CalibrationRecord } from '../model/calibration.ts';
import { apply } from '../model/fractional-linear.ts';
import { ratio, type Ratio } from '../model/units.ts';
import {
  dummyArm,
  shuntedOutput,
  shuntFault,
  type Arm,
  type Shunt,
} from '../pipeline/2-ratio/shunt.ts';
import { signalMap } from '../pipeline/2-ratio/signal.ts';
import { shownChange } from '../pipeline/3-strain/shown-change.ts';
import { readingsOf, type Readings } from '../uncertainty/readings.ts';
import { coverageFactor } from '../uncertainty/student.ts';
import { judge, notJudged, type Band, type Check } from './verdict.ts';
import { inWords } from './words.ts';

/**
 * Where people lay a shunt: at the gauge, at the instrument's terminals on a wire of its own or by
 * the third wire, or inside the instrument on the fixed resistor beside the gauge.
 */
export const SHUNT_PLACES = ['gauge', 'instrument', 'third-wire', 'internal-dummy'] as const;
export type ShuntPlace = (typeof SHUNT_PLACES)[number];

const AT = { gauge: 'arm', instrument: 'instrument', 'third-wire': 'output-wire' } as const;

export type PlacedShunt =
  | { readonly ok: true; readonly shunt: Shunt }
  | { readonly ok: false; readonly expected: string; readonly came: string };

/** `arm` says nothing of a shunt on the internal dummy, which has its own. */
export const placedShunt = (
  { circuit, leads }: BridgeResponse,
  place: ShuntPlace,
  arm: Arm,
  resistance: Shunt['resistance'],
): PlacedShunt => {
  if (place === 'internal-dummy') {
    const dummy = dummyArm(circuit);
    return dummy === null
      ? { ok: false, expected: 'a bridge with a fixed resistor', came: `${circuit}: all gauges` }
      : { ok: true, shunt: { arm: dummy, at: 'arm', resistance } };
  }
  const shunt: Shunt = { arm, at: AT[place], resistance };
  const fault = shuntFault(circuit, leads, shunt);
  return fault ? { ok: false, ...fault } : { ok: true, shunt };
};

/** Raw figures as they came, over V of excitation where that is measured; NaN where not believed. */
export interface ShuntReadings {
  readonly before: ArrayLike<number>;
  readonly during: ArrayLike<number>;
  /** null: not read again without the shunt. */
  readonly after: ArrayLike<number> | null;
}

const FEWEST = 10;
/** Levels without the shunt, before and after, may differ by this share of the step. */
const STEADY_SHARE = 0.02;
const COVERAGE = 0.95;

const halfWidthOf = ({ standardError, count }: Readings): number =>
  coverageFactor(COVERAGE, count - 1) * standardError;

/**
 * The step that the channel shows against that which its record must show for this resistor there:
 * `shuntedOutput` through the record's own inversion. A level before and one after take out what
 * drifts meanwhile. Passes or fails only where noise cannot turn the verdict.
 */
export const shuntCheck = (
  readings: ShuntReadings,
  { signal, response }: Pick<CalibrationRecord, 'signal' | 'response'>,
  shunt: Shunt,
  limits: Band,
): Check => {
  const kind = 'shunt';
  if (response.kind !== 'bridge') {
    return notJudged(kind, '1', 'A transducer states no gauge to lay a shunt across.');
  }
  const toRatio = signalMap(signal);
  const level = (raw: ArrayLike<number>) =>
    readingsOf(Array.from(raw, (figure) => apply(toRatio, figure)));
  const [before, during] = [level(readings.before), level(readings.during)];
  const after = readings.after && level(readings.after);
  const few = Math.min(before.count, during.count, after?.count ?? Infinity);
  if (few < FEWEST) {
    const why = `At least ${FEWEST} samples each with and without the shunt are needed, ${few} came.`;
    return notJudged(kind, '1', why);
  }
  const shown = (from: number, to: number) => shownChange(response, ratio(from), ratio(to));
  const without: Ratio = ratio(after ? (before.mean + after.mean) / 2 : before.mean);
  const due = shown(shuntedOutput(response, null), shuntedOutput(response, shunt));
  const step = shown(without, during.mean);
  const moved = after ? Math.abs(shown(before.mean, after.mean)) : 0;
  const noise = shown(
    without,
    without + Math.hypot(halfWidthOf(before), halfWidthOf(during), after ? halfWidthOf(after) : 0),
  );
  const figure = step / due - 1;
  const doubt = Math.abs(noise / due);
  const most = judge(Math.abs(figure) + doubt, limits);
  const surely = judge(Math.max(0, Math.abs(figure) - doubt), limits);
  const said = `${inWords(step, 'm/m')} shown where ${inWords(due, 'm/m')} are due`;
  const check = (verdict: Check['verdict'], why: string): Check => ({
    ...{ kind, verdict, figure, unit: '1', why, limits },
    also: [
      { name: 'step shown', value: step, unit: 'm/m' },
      { name: 'step due', value: due, unit: 'm/m' },
      { name: 'moved meanwhile', value: moved, unit: 'm/m' },
    ],
  });
  if (moved > STEADY_SHARE * Math.abs(due)) {
    const meanwhile = inWords(moved, 'm/m');
    return check(
      'doubtful',
      `${said}, but ${meanwhile} moved meanwhile: read it once more at rest.`,
    );
  }
  if (Math.abs(step) < Math.abs(due) / 10) {
    return check(
      'fail',
      `${said}: the shunt does not show, it is not across this channel's bridge.`,
    );
  }
  if (step / due < 0) {
    return check('fail', `${said}, to the wrong side: another arm, or signal wires are swapped.`);
  }
  if (most === surely) return check(most, `${said}.`);
  return check('doubtful', `${said}: the noise is too great to tell, read it for longer.`);
};
