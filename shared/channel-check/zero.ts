import { accept, refuse, type Result } from '../model/frame.ts';
import { readingsOf } from '../uncertainty/readings.ts';
import { driftOf } from './drift.ts';
import { noiseOf } from './noise.ts';
import { seriesOf, type Watched } from './series.ts';
import type { ValueUnit } from './verdict.ts';
import { inWords } from './words.ts';

export interface ZeroLimits {
  /** Believed samples, at least 3. */
  readonly fewest: number;
  /** Share of the samples due that have to be there. */
  readonly share: number;
  /** Standard deviation about the straight line, the channel's SI unit. */
  readonly noise: number;
  /** Magnitude per s, the channel's SI unit. */
  readonly drift: number;
}

/** Of a strain channel: 30 samples, 10 µε, 5 µε/min. Common practice, no source. */
export const STRAIN_ZERO: ZeroLimits = { fewest: 30, share: 0.9, noise: 10e-6, drift: 5e-6 / 60 };

/** A zero as it was read, in the unit of `raw`. */
export interface ZeroReading {
  readonly mean: number;
  /** Of single samples. */
  readonly deviation: number;
  readonly samples: number;
  /** deviation/√samples, GUM (JCGM 100:2008) 4.2.3: for samples that do not depend on each other. */
  readonly standardError: number;
}

/**
 * Whether a zero may be taken of these samples, and which. Refused with `not-arriving`,
 * `too-few-samples`, `noisy`, or `drifting`: the last where the slope is beyond the limit even at
 * the near end of its 95 % interval, for a short reading cannot tell a small one.
 */
export const zeroOf = (
  watched: Watched,
  unit: ValueUnit,
  limits: ZeroLimits,
): Result<ZeroReading> => {
  const series = seriesOf(watched);
  const noise = noiseOf(series);
  const due = series.values.length;
  if (noise.samples < limits.share * due) {
    const expected = `${inWords(limits.share, '1')} of ${due} samples or more`;
    return refuse('not-arriving', 'samples', expected, String(noise.samples));
  }
  const fewest = Math.max(3, limits.fewest);
  if (noise.samples < fewest) {
    return refuse('too-few-samples', 'samples', `${fewest} or more`, String(noise.samples));
  }
  if (noise.deviation > limits.noise) {
    const expected = `noise of at most ${inWords(limits.noise, unit)}`;
    return refuse('noisy', 'noise', expected, inWords(noise.deviation, unit));
  }
  const drift = driftOf(series);
  const perSecond = `${unit}/s` as const;
  if (drift && Math.abs(drift.slope) - drift.halfWidth > limits.drift) {
    const expected = `a drift of at most ${inWords(limits.drift, perSecond)}`;
    return refuse('drifting', 'drift', expected, inWords(drift.slope, perSecond));
  }
  const believed = Float64Array.from(watched.raw, (figure, i) =>
    Number.isFinite(series.values[i]) ? figure : NaN,
  );
  const { count, ...reading } = readingsOf(believed);
  return accept({ ...reading, samples: count });
};
