import type { Fault } from '../../model/fault.ts';
import type { Limit, LimitBasis, LimitContext } from '../../model/limit.ts';
import { figureInWords, limitInWords, shareInWords, shareOfYield } from './limit-words.ts';
import { thresholdOf } from './threshold.ts';

const LONGEST_ON_DELAY = 3600;

/** What limits of a channel may be stated in. */
export const basesFor = ({ measurand, stressPerStrain }: LimitContext): readonly LimitBasis[] => {
  switch (measurand) {
    case 'strain':
    case 'shear':
      return stressPerStrain === null ? ['strain'] : ['strain', 'stress', 'share'];
    case 'stress':
      return ['stress', 'share'];
    case 'force':
    case 'displacement':
    case 'temperature':
    case 'moment':
    case 'angle':
    case 'number':
      return ['value'];
  }
};

/** A limit stated as all of yield has gone through its strain and back. */
const ROUNDING = 1e-9;

const figureFaults = (limit: Limit, at: string, context: LimitContext): Fault[] => {
  const faults: Fault[] = [];
  const fault = (field: string, expected: string, came: string) =>
    faults.push({ path: `${at}/${field}`, expected, came });
  const inWords = (figure: number) => figureInWords(figure, limit.basis, context);
  const bases = basesFor(context);
  if (!bases.includes(limit.basis)) {
    fault('basis', `${bases.join(', ')} for a ${context.measurand} channel`, limit.basis);
  }
  if (!(Number.isFinite(limit.value) && limit.value > 0)) {
    fault('value', 'a figure above 0', inWords(limit.value));
  } else if (!(limit.deadband >= 0 && limit.deadband < limit.value)) {
    const expected = `from 0 to below the limit's value of ${inWords(limit.value)}`;
    fault('deadband', expected, inWords(limit.deadband));
  }
  if (!(limit.onDelay >= 0 && limit.onDelay <= LONGEST_ON_DELAY)) {
    fault('onDelay', `from 0 to ${LONGEST_ON_DELAY} s`, `${limit.onDelay} s`);
  }
  return faults;
};

/** A limit has to lie below yield, and within the share of it that the site allows. */
const yieldFault = (limit: Limit, at: string, context: LimitContext): Fault | null => {
  const { highestLimit } = context;
  const used = shareOfYield(limit, context);
  if (used === null) return null;
  const isBelowYield = used < 1 - ROUNDING;
  if (isBelowYield && used <= highestLimit * (1 + ROUNDING)) return null;
  return {
    path: `${at}/value`,
    expected: !isBelowYield
      ? 'below yield'
      : `at most ${shareInWords(highestLimit)}, the highest the site allows`,
    came: shareInWords(used),
  };
};

const orderFault = (limits: readonly Limit[], context: LimitContext): Fault | null => {
  const at = (level: Limit['level']) => limits.find((limit) => limit.level === level);
  const caution = at('caution');
  const stop = at('stop');
  if (!caution || !stop) return null;
  const [first, second] = [thresholdOf(caution, context).raise, thresholdOf(stop, context).raise];
  if (first < second) return null;
  const inWords = (limit: Limit) => limitInWords(limit, context, caution.basis !== stop.basis);
  return {
    path: `/limits/${limits.indexOf(caution)}/value`,
    expected: `below the stop limit of ${inWords(stop)}`,
    came: inWords(caution),
  };
};

/** Everything wrong with a channel's limits at once; none means that they may be put in force. */
export const limitFaults = (limits: readonly Limit[], context: LimitContext): Fault[] => {
  const faults = limits.flatMap((limit, i) => {
    const at = `/limits/${i}`;
    const first = limits.findIndex((other) => other.level === limit.level);
    const twice: Fault[] =
      first < i
        ? [{ path: `${at}/level`, expected: 'each level once', came: `${limit.level} again` }]
        : [];
    return [...twice, ...figureFaults(limit, at, context)];
  });
  if (faults.length > 0) return faults;
  const beyond = limits.flatMap((limit, i) => yieldFault(limit, `/limits/${i}`, context) ?? []);
  const order = orderFault(limits, context);
  return order ? [...beyond, order] : beyond;
};
