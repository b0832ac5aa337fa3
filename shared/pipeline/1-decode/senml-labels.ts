/** RFC 8428 §4.3, §5 and Table 4: labels in JSON, and the integers that stand for them in CBOR. */
export const SENML_LABELS = {
  bver: -1,
  bn: -2,
  bt: -3,
  bu: -4,
  bv: -5,
  bs: -6,
  n: 0,
  u: 1,
  v: 2,
  vs: 3,
  vb: 4,
  s: 5,
  t: 6,
  ut: 7,
  vd: 8,
} as const;

export type SenmlLabel = keyof typeof SENML_LABELS;

export const isLabel = (text: string): text is SenmlLabel => Object.hasOwn(SENML_LABELS, text);

const BY_NUMBER: ReadonlyMap<string, SenmlLabel> = new Map(
  Object.entries(SENML_LABELS).flatMap(([label, number]) =>
    isLabel(label) ? [[String(number), label]] : [],
  ),
);

export type SenmlForm = 'json' | 'cbor';

/** A record's key as its label; null for one that this version does not know. */
export const labelOf = (key: string, form: SenmlForm): SenmlLabel | null => {
  if (form === 'cbor') return BY_NUMBER.get(key) ?? null;
  return isLabel(key) ? key : null;
};
