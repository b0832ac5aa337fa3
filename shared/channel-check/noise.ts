import { fitLine, lineAt } from '../series/line.ts';
import { finiteOf, median, type Series } from './series.ts';
import { judge, notJudged, type Band, type Check, type ValueUnit } from './verdict.ts';
import { inWords } from './words.ts';

/** What is left of a series without its straight line; NaN stays where a sample is missing. */
export const withoutDrift = ({ values }: Series): Float64Array => {
  const left = new Float64Array(values.length).fill(NaN);
  const line = fitLine(
    left.map((_, i) => i),
    values,
  );
  if (line === null) return left;
  for (let i = 0; i < left.length; i++) left[i] = (values[i] ?? NaN) - lineAt(line, i);
  return left;
};

/** σ over MAD of a normal distribution, 1/Φ⁻¹(¾); Rousseeuw and Croux, 1993, value from memory. */
const SIGMA_PER_MAD = 1.482602218505602;

export interface Noise {
  /** Standard deviation about the straight line, n − 2 degrees of freedom. */
  readonly deviation: number;
  /** The same from the median of magnitudes: up to half of the samples cannot spoil it. */
  readonly robust: number;
  readonly peakToPeak: number;
  /** Smallest difference between two figures that came: the input's step, or less. */
  readonly step: number;
  readonly samples: number;
}

/** Of the believed samples; figures are NaN with fewer than three. */
export const noiseOf = (series: Series): Noise => {
  const left = finiteOf(withoutDrift(series)).sort();
  const middle = median(left);
  let squares = 0;
  for (const residual of left) squares += residual * residual;
  const sorted = finiteOf(series.values).sort();
  let step = Infinity;
  for (let i = 1; i < sorted.length; i++) {
    const gap = (sorted[i] ?? NaN) - (sorted[i - 1] ?? NaN);
    if (gap > 0 && gap < step) step = gap;
  }
  const told = left.length > 2;
  return {
    deviation: told ? Math.sqrt(squares / (left.length - 2)) : NaN,
    robust: told ? SIGMA_PER_MAD * median(left.map((r) => Math.abs(r - middle))) : NaN,
    peakToPeak: told ? (left.at(-1) ?? NaN) - (left[0] ?? NaN) : NaN,
    step: step < Infinity ? step : 0,
    samples: left.length,
  };
};

/** So much above the robust figure and a few great outliers make the deviation, not the noise. */
const SPIKY = 3;

/** Scatter about the straight line, and whether it is made of spikes. */
export const noiseCheck = (series: Series, unit: ValueUnit, limits: Band | null): Check => {
  const { deviation, robust, peakToPeak, step, samples } = noiseOf(series);
  if (Number.isNaN(deviation)) {
    return notJudged('noise', unit, `At least 3 samples are needed, ${samples} came.`);
  }
  const also = [
    { name: 'robust deviation', value: robust, unit },
    { name: 'peak to peak', value: peakToPeak, unit },
  ];
  const said = `Standard deviation ${inWords(deviation, unit)} in ${samples} samples`;
  if (!limits) return notJudged('noise', unit, `${said}; no limit is stated.`, deviation, also);
  const spiky = deviation > SPIKY * Math.max(robust, step);
  const verdict = judge(deviation, limits);
  return {
    kind: 'noise',
    verdict: spiky && verdict === 'pass' ? 'doubtful' : verdict,
    figure: deviation,
    unit,
    why: spiky
      ? `${said}, but ${inWords(robust, unit)} without the greatest: spikes, a loose contact perhaps.`
      : `${said}.`,
    limits,
    also,
  };
};
