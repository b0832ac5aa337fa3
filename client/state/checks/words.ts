import type {
  Check,
  CheckKind,
  FigureUnit,
  Verdict,
} from '../../../shared/channel-check/verdict.ts';
import { inWords } from '../../../shared/channel-check/words.ts';
import type { ChannelChecks, Given, Phase } from '../../../shared/protocol/checks.ts';
import { NO_FIGURE } from '../number-text.ts';
import { utcDateTime } from '../time-text.ts';

export const VERDICT_WORDS: Readonly<Record<Verdict, string>> = {
  pass: 'Pass',
  doubtful: 'Doubtful',
  fail: 'Fail',
  'not-judged': 'Not judged',
};

export const KIND_WORDS: Readonly<Record<CheckKind, string>> = {
  alive: 'Alive',
  frozen: 'Longest time unchanged',
  range: 'Room to the end of the input’s range',
  offset: 'Offset of the unloaded bridge',
  noise: 'Noise',
  'mains-50': '50 Hz in the noise',
  'mains-60': '60 Hz in the noise',
  drift: 'Drift',
  sign: 'Sign by a push',
  shunt: 'Shunt check',
  insulation: 'Insulation',
  'self-heating': 'Self-heating',
};

export const PHASE_WORDS: Readonly<Record<Phase, string>> = {
  rest: 'Hands off: reading at rest',
  push: 'Push now, hold, and let go',
  'shunt-on': 'The shunt is on: reading',
  'shunt-off': 'The shunt is off: reading again',
  arriving: 'Waiting for the last samples',
};

const unitOf = (unit: string): unit is FigureUnit => unit !== '';

/** With its unit, as its own sentence says it. */
export const figureOf = ({ figure, unit }: Check): string =>
  figure === null || !unitOf(unit) ? NO_FIGURE : inWords(figure, unit);

/** By what it was judged: `at most 2 µε, fails beyond 10 µε`. */
export const limitsOf = ({ limits, unit }: Check): string => {
  if (!limits) return '';
  const { good, bad } = limits;
  const [most, beyond] = good > bad ? ['at least', 'below'] : ['at most', 'beyond'];
  return `${most} ${inWords(good, unit)}, fails ${beyond} ${inWords(bad, unit)}`;
};

const windowText = ({ from, to }: { readonly from: number; readonly to: number }): string =>
  `${Number((to - from).toPrecision(3))} s to ${utcDateTime(to)}`;

const PLACES = {
  gauge: 'at the gauge',
  instrument: 'at the instrument',
  'third-wire': 'at the instrument, by the third wire',
  'internal-dummy': 'on the internal dummy',
} as const;

/** What a check was judged from. */
export const givenText = (given: Given): string => {
  switch (given.kind) {
    case 'samples':
      return `samples of ${windowText(given)}`;
    case 'push':
      return `a push, value expected ${given.expected}, ${windowText(given)}`;
    case 'shunt':
      return (
        `${given.resistance} Ω ${PLACES[given.place]}, arm ${given.arm}, ` +
        (given.how === 'commanded' ? 'laid by the node' : 'laid by hand')
      );
    case 'insulation':
      return 'measured and entered';
    case 'self-heating':
      return `${given.excitation.toPrecision(4)} V, grid ${(given.gridArea * 1e6).toPrecision(3)} mm²`;
  }
};

/** The one thing to say of a channel: what is gravest, else what passed first. */
export const tellingOf = ({ verdict, checks }: ChannelChecks): Check | undefined =>
  checks.find(({ check }) => check.verdict === verdict)?.check;

/** Has it been checked by its samples under the set-up that stands? */
export const isCheckedBy = ({ checks }: ChannelChecks, revision: number): boolean =>
  checks.some(({ record }) => record?.given.kind === 'samples' && record.revision === revision);

export const countsOf = (
  channels: readonly ChannelChecks[],
): readonly (readonly [Verdict, number])[] =>
  (['fail', 'doubtful', 'pass', 'not-judged'] as const).map((verdict) => [
    verdict,
    channels.filter((channel) => channel.verdict === verdict).length,
  ]);
