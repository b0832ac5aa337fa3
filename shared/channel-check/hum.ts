import { mainsShare, type MainsFrequency } from './mains.ts';
import { withoutDrift } from './noise.ts';
import type { Series } from './series.ts';
import { judge, notJudged, type Band, type Check, type ValueUnit } from './verdict.ts';
import { inWords } from './words.ts';

/**
 * Mains pick-up as a share of the noise. It fails only where it is itself above what noise may
 * be, and never by an alias alone: a vibration of that frequency would look the same.
 */
export const humCheck = (
  series: Series,
  unit: ValueUnit,
  frequency: MainsFrequency,
  limits: Band,
  noise: Band | null,
): Check => {
  const kind = frequency === 50 ? 'mains-50' : 'mains-60';
  const found = mainsShare(withoutDrift(series), series.dt, frequency);
  if (!found.told) return notJudged(kind, '1', `Cannot be told: ${found.why}.`);
  const { share, rms, seenAt } = found;
  const aliased = seenAt !== frequency;
  const verdict = judge(share, limits);
  const harmless = noise !== null && rms <= noise.good;
  const place = aliased
    ? `, seen at ${Number(seenAt.toPrecision(3))} Hz, where a vibration would look the same`
    : '';
  return {
    kind,
    verdict: verdict === 'fail' && (aliased || harmless) ? 'doubtful' : verdict,
    figure: share,
    unit: '1',
    why: `${inWords(share, '1')} of the noise's variance is ${frequency} Hz, ${inWords(rms, unit)} r.m.s.${place}.`,
    limits,
    also: [{ name: `${frequency} Hz, r.m.s.`, value: rms, unit }],
  };
};
