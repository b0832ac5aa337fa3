import { fitLine } from '../series/line.ts';
import { coverageFactor } from '../uncertainty/student.ts';
import { durationOf, finiteOf, type Series } from './series.ts';
import { judge, notJudged, type Band, type Check, type ValueUnit } from './verdict.ts';
import { inWords } from './words.ts';

export interface Drift {
  /** Per s. */
  readonly slope: number;
  /** Standard error of the slope, per s. */
  readonly error: number;
  /** Half-width of its 95 % interval, k·error with n − 2 degrees of freedom. */
  readonly halfWidth: number;
}

const MOST_MEANS = 60;
const COVERAGE = 0.95;

/**
 * The straight line through means of up to sixty consecutive pieces: their scatter tells the
 * slope's error also where neighbouring samples are alike, as filtered ones are. null with
 * fewer than three pieces that hold samples.
 */
export const driftOf = ({ values, dt }: Series): Drift | null => {
  const pieces = Math.min(MOST_MEANS, values.length);
  const bounds = Array.from({ length: pieces + 1 }, (_, i) =>
    Math.round((i * values.length) / pieces),
  );
  const times: number[] = [];
  const means: number[] = [];
  for (let i = 0; i < pieces; i++) {
    const [from, to] = [bounds[i] ?? 0, bounds[i + 1] ?? 0];
    const piece = finiteOf(values.subarray(from, to));
    times.push(((from + to - 1) / 2) * dt);
    means.push(piece.reduce((sum, value) => sum + value, 0) / piece.length);
  }
  const line = fitLine(times, means);
  if (line === null || line.count < 3) return null;
  const halfWidth = coverageFactor(COVERAGE, line.count - 2) * line.slopeError;
  return { slope: line.slope, error: line.slopeError, halfWidth };
};

/**
 * Drift over minutes. Passes or fails only where the slope's 95 % interval lies on one side of
 * the limit; else it is doubtful, and more time would tell.
 */
export const driftCheck = (
  series: Series,
  unit: ValueUnit,
  limits: Band | null,
  least: number,
): Check => {
  const perSecond = `${unit}/s` as const;
  const duration = durationOf(series);
  if (duration < least) {
    const [needed, came] = [inWords(least, 's'), inWords(duration, 's')];
    return notJudged('drift', perSecond, `At least ${needed} of samples are needed, ${came} came.`);
  }
  const drift = driftOf(series);
  if (drift === null) return notJudged('drift', perSecond, 'Too few samples arrived.');
  const { slope, error, halfWidth } = drift;
  const also = [{ name: 'standard error', value: error, unit: perSecond }];
  const said = `${inWords(slope, perSecond)} ± ${inWords(halfWidth, perSecond)} over ${inWords(duration, 's')}`;
  if (!limits) {
    return notJudged('drift', perSecond, `${said}; no limit is stated.`, slope, also);
  }
  const most = judge(Math.abs(slope) + halfWidth, limits);
  const surely = judge(Math.max(0, Math.abs(slope) - halfWidth), limits);
  const verdict = most === 'pass' || surely === 'fail' ? most : 'doubtful';
  return {
    kind: 'drift',
    verdict,
    figure: slope,
    unit: perSecond,
    why:
      verdict === 'doubtful' ? `${said}: not settled, or not watched for long enough.` : `${said}.`,
    limits,
    also,
  };
};
