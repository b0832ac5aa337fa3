import { finiteOf, median, type Series } from './series.ts';
import { noiseOf } from './noise.ts';
import { notJudged, type Check, type ValueUnit } from './verdict.ts';
import { inWords } from './words.ts';

export interface Push {
  /** Window that begins at rest: a push by hand after its first fifth. */
  readonly series: Series;
  /** Of the value while pushed: +1 tension. */
  readonly expected: 1 | -1;
  /** A push has to move the value by so many times the noise at rest. */
  readonly timesNoise: number;
}

const REST_SHARE = 0.2;
const FEWEST_AT_REST = 5;
/** A push held by hand lasts longer; what is shorter than this (s) is averaged away. */
const SMOOTHED_OVER = 0.1;
/** A move back past rest by more than this share of the push is no push. */
const REBOUND_SHARE = 0.5;

const smoothed = ({ values, dt }: Series): Float64Array => {
  const width = Math.max(1, Math.round(SMOOTHED_OVER / dt));
  return Float64Array.from({ length: Math.max(0, values.length - width + 1) }, (_, i) => {
    const piece = finiteOf(values.subarray(i, i + width));
    return piece.reduce((sum, value) => sum + value, 0) / piece.length;
  });
};

/** Whether a push by hand moves the value to the side it should: arms swapped, wires crossed. */
export const signCheck = ({ series, expected, timesNoise }: Push, unit: ValueUnit): Check => {
  const resting = Math.floor(series.values.length * REST_SHARE);
  const rest = { ...series, values: series.values.slice(0, resting) };
  const atRest = finiteOf(rest.values).length;
  if (atRest < FEWEST_AT_REST) {
    const why = `At least ${FEWEST_AT_REST} samples at rest before the push are needed, ${atRest} came.`;
    return notJudged('sign', unit, why);
  }
  const level = median(rest.values);
  const { deviation } = noiseOf(rest);
  let [up, down] = [0, 0];
  for (const value of finiteOf(smoothed({ ...series, values: series.values.slice(resting) }))) {
    up = Math.max(up, value - level);
    down = Math.max(down, level - value);
  }
  const figure = up >= down ? up : -down;
  const size = Math.max(up, down);
  const said = `The push moved the value by ${inWords(figure, unit)}`;
  const check = (verdict: Check['verdict'], why: string): Check => ({
    kind: 'sign',
    verdict,
    figure,
    unit,
    why,
    limits: null,
    also: [{ name: 'noise at rest', value: deviation, unit }],
  });
  if (!(size > timesNoise * deviation)) {
    const noise = inWords(deviation, unit);
    return check(
      'doubtful',
      `No push stands out: at most ${inWords(size, unit)} in ${noise} of noise.`,
    );
  }
  if (Math.min(up, down) > REBOUND_SHARE * size) {
    return check('doubtful', `${said}, but nearly as far the other way: push once more, slowly.`);
  }
  return Math.sign(figure) === expected
    ? check('pass', `${said}, to the side expected.`)
    : check('fail', `${said}, to the wrong side: arms or signal wires are swapped.`);
};
