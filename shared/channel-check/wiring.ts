import type { BridgeResponse, CalibrationRecord } from '../model/calibration.ts';
import { apply, inverse } from '../model/fractional-linear.ts';
import { signalMap } from '../pipeline/2-ratio/signal.ts';
import { circuitChange } from '../pipeline/3-strain/bridge.ts';
import { leadUnbalance } from '../pipeline/3-strain/leads.ts';
import type { Range } from '../pipeline/convert.ts';
import { finiteOf, median, type Watched } from './series.ts';
import { judge, notJudged, type Band, type Check } from './verdict.ts';
import { inWords } from './words.ts';

/** Output of the bridge, V/V, that its leads alone bring about: of two untrimmed wires, else 0. */
const leadOffset = (response: BridgeResponse): number =>
  apply(inverse(circuitChange(response)), leadUnbalance(response.leads, response.gaugeResistance));

/**
 * What the unloaded bridge puts out, V/V, beside what its leads account for, against a stated
 * window either side.
 */
export const offsetCheck = (
  watched: Watched,
  { signal, response }: Pick<CalibrationRecord, 'signal' | 'response'>,
  limits: Band | null,
): Check => {
  if (response.kind !== 'bridge') {
    return notJudged('offset', 'V/V', 'A transducer states no bridge that could be unbalanced.');
  }
  const middle = median(watched.raw);
  if (Number.isNaN(middle)) return notJudged('offset', 'V/V', 'No sample arrived.');
  const output = apply(signalMap(signal), middle);
  const ofLeads = leadOffset(response);
  const figure = output - ofLeads;
  const said = `The bridge puts out ${inWords(output, 'V/V')}${
    ofLeads === 0 ? '' : `, ${inWords(ofLeads, 'V/V')} of it by its leads`
  }`;
  const also = [{ name: 'accounted for by the leads', value: ofLeads, unit: 'V/V' }] as const;
  if (!limits) return notJudged('offset', 'V/V', `${said}; no window is stated.`, figure, also);
  return {
    kind: 'offset',
    verdict: judge(Math.abs(figure), limits),
    figure,
    unit: 'V/V',
    why: `${said}; ${inWords(limits.good, 'V/V')} either side is usual.`,
    limits,
    also,
  };
};

/** How near the samples come to an end of their input's range, as a share of its span. */
export const rangeCheck = ({ input }: Watched, range: Range, limits: Band): Check => {
  if (range === null) return notJudged('range', '1', 'The input states no range.');
  const [low, high] = range;
  const came = finiteOf(input);
  if (came.length === 0) return notJudged('range', '1', 'No sample arrived.');
  let nearest = Infinity;
  for (const figure of came) nearest = Math.min(nearest, figure - low, high - figure);
  const figure = Math.max(0, nearest / (high - low));
  return {
    kind: 'range',
    verdict: judge(figure, limits),
    figure,
    unit: '1',
    why:
      figure === 0
        ? 'A sample lies at the end of the input’s range or beyond.'
        : `At the nearest, ${inWords(figure, '1')} of the input's span are left.`,
    limits,
    also: [],
  };
};
