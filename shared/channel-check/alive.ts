import { durationOf, finiteOf, type Series } from './series.ts';
import { judge, notJudged, type Band, type Check } from './verdict.ts';
import { inWords } from './words.ts';

/** Samples arrive and are believed: their share of those due in the window. */
export const aliveCheck = (series: Series, limits: Band): Check => {
  const due = series.values.length;
  if (due === 0) return notJudged('alive', '1', 'No time has passed yet.');
  const came = finiteOf(series.values).length;
  const figure = came / due;
  const window = inWords(durationOf(series), 's');
  return {
    kind: 'alive',
    verdict: judge(figure, limits),
    figure,
    unit: '1',
    why:
      came === 0
        ? `No sample in ${window} can be believed: none arrived, or the input is over range.`
        : `${came} of ${due} samples of ${window} arrived and are within the input's range.`,
    limits,
    also: [],
  };
};

/** The longest run of one and the same figure, in samples; missing ones neither add nor break. */
const longestRun = (values: Float64Array): number => {
  let [longest, run, before] = [0, 0, NaN];
  for (const value of finiteOf(values)) {
    run = value === before ? run + 1 : 1;
    before = value;
    if (run > longest) longest = run;
  }
  return longest;
};

/** Samples so few that a run of them says nothing. */
const FEWEST = 10;

/** The value moves: the longest time that it stood still, as a share of the window. */
export const frozenCheck = (series: Series, limits: Band): Check => {
  const came = finiteOf(series.values).length;
  if (came < FEWEST) {
    return notJudged('frozen', '1', `At least ${FEWEST} samples are needed, ${came} came.`);
  }
  const run = longestRun(series.values);
  const figure = run / came;
  const verdict = judge(figure, limits);
  const stood = inWords(run * series.dt, 's');
  return {
    kind: 'frozen',
    verdict,
    figure,
    unit: '1',
    why:
      run === came
        ? `The value has not changed at all in ${stood}.`
        : verdict === 'pass'
          ? 'The value changes as that of a live input does.'
          : `The value stood still for ${stood}: the input hangs, or its steps are coarse.`,
    limits,
    also: [{ name: 'longest time unchanged', value: run * series.dt, unit: 's' }],
  };
};
