/** How a channel stands by one check, before anybody loads anything. */
export type Verdict = 'pass' | 'doubtful' | 'fail' | 'not-judged';

/** Of a channel, in the order of a first look. */
export const CHECK_KINDS = [
  'alive',
  'frozen',
  'range',
  'offset',
  'noise',
  'mains-50',
  'mains-60',
  'drift',
  'sign',
  'shunt',
  'insulation',
  'self-heating',
] as const;
export type CheckKind = (typeof CHECK_KINDS)[number];

/** SI units of what channels report. */
export type ValueUnit = 'm/m' | 'N' | 'm' | 'Cel';
export type FigureUnit = ValueUnit | `${ValueUnit}/s` | 'V/V' | 'Ohm' | 'W/m2' | '1' | 's';

export interface Figure {
  readonly name: string;
  readonly value: number;
  readonly unit: FigureUnit;
}

/**
 * Up to `good` a figure passes, beyond `bad` it fails, between them it is doubtful. With
 * `good` above `bad` more is better. In the figure's own unit.
 */
export interface Band {
  readonly good: number;
  readonly bad: number;
}

export interface Check {
  readonly kind: CheckKind;
  readonly verdict: Verdict;
  /** What was judged; null if it could not be found. */
  readonly figure: number | null;
  readonly unit: FigureUnit;
  /** In plain words. */
  readonly why: string;
  /** What it was judged by; null where nothing was. */
  readonly limits: Band | null;
  /** Other figures that came with it. */
  readonly also: readonly Figure[];
}

/** A figure that is no number is not judged. */
export const judge = (figure: number, { good, bad }: Band): Verdict => {
  if (Number.isNaN(figure)) return 'not-judged';
  const turn = good > bad ? -1 : 1;
  if (figure * turn <= good * turn) return 'pass';
  return figure * turn <= bad * turn ? 'doubtful' : 'fail';
};

export const notJudged = (
  kind: CheckKind,
  unit: FigureUnit,
  why: string,
  figure: number | null = null,
  also: readonly Figure[] = [],
): Check => ({ kind, verdict: 'not-judged', figure, unit, why, limits: null, also });

const GRAVITY: readonly Verdict[] = ['not-judged', 'pass', 'doubtful', 'fail'];

/** The gravest of several; not judged only where none was. */
export const gravest = (verdicts: readonly Verdict[]): Verdict =>
  GRAVITY[Math.max(0, ...verdicts.map((verdict) => GRAVITY.indexOf(verdict)))] ?? 'not-judged';
