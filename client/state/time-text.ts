import { NO_BREAK } from './number-text.ts';

const two = (n: number): string => String(Math.floor(n)).padStart(2, '0');

/** `14:03:22`, of a UTC time in s. */
export const utcTime = (t: number): string => new Date(t * 1e3).toISOString().slice(11, 19);

/** `2026-05-06 14:03:22 UTC` */
export const utcDateTime = (t: number): string =>
  `${new Date(t * 1e3).toISOString().slice(0, 19).replace('T', ' ')}${NO_BREAK}UTC`;

/** `14:03:22` by the reader's own clock. */
export const localTime = (t: number): string => {
  const date = new Date(t * 1e3);
  return [date.getHours(), date.getMinutes(), date.getSeconds()].map(two).join(':');
};

/** `UTC+02:00`: how the reader's clock stands to UTC at that time. */
export const localOffset = (t: number): string => {
  const minutes = -new Date(t * 1e3).getTimezoneOffset();
  const size = Math.abs(minutes);
  return `UTC${minutes < 0 ? '\u2212' : '+'}${two(size / 60)}:${two(size % 60)}`;
};

/** A length of time in words that fit beside a figure: `4 s`, `3 min 20 s`, `2 h 5 min`, `3 d 4 h`. */
export const durationText = (seconds: number): string => {
  const s = Math.max(0, Math.floor(seconds));
  const unit = (n: number, name: string) => `${Math.floor(n)}${NO_BREAK}${name}`;
  const pair = (big: string, small: number, name: string) =>
    small >= 1 ? `${big} ${unit(small, name)}` : big;
  if (s < 60) return unit(s, 's');
  if (s < 3600) return pair(unit(s / 60, 'min'), s % 60, 's');
  if (s < 86_400) return pair(unit(s / 3600, 'h'), (s % 3600) / 60, 'min');
  return pair(unit(s / 86_400, 'd'), (s % 86_400) / 3600, 'h');
};
