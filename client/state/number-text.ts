/** U+2212, as wide as a plus sign and never broken from its figure. */
const MINUS = '\u2212';
/** Between a figure and its unit: no line break. */
export const NO_BREAK = '\u00a0';
/** Stands where there is no figure. */
export const NO_FIGURE = '–';

/** Decimal point, no grouping, true minus sign; a figure that rounds to nought has no sign. */
export const decimalText = (value: number, decimals: number): string => {
  if (!Number.isFinite(value)) return NO_FIGURE;
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? `${MINUS}${text}` : text;
};

/** What a person typed, with a decimal point or comma; NaN for anything else. */
export const typedNumber = (text: string): number => {
  const plain = text.trim().replaceAll(MINUS, '-').replace(',', '.');
  return /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(plain) ? Number(plain) : NaN;
};

/** A figure for an input field: all the digits that matter, none that rounding left. */
export const fieldText = (value: number): string => String(Number(value.toPrecision(9)));

/**
 * A share as whole percent. Near a limit, from 95 to 105 %, one decimal, rounded down below
 * 100 %: a limit that is not reached never reads as reached.
 */
export const percentText = (share: number): string => {
  const percent = Math.abs(share) * 100;
  if (!Number.isFinite(percent)) return `${NO_FIGURE}${NO_BREAK}%`;
  const near = percent >= 95 && percent < 105;
  const shown = near && percent < 100 ? Math.floor(percent * 10) / 10 : percent;
  return `${shown.toFixed(near ? 1 : 0)}${NO_BREAK}%`;
};
