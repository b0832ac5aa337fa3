import type { Measurand } from '../../shared/model/site.ts';
import {
  celsius,
  epochSeconds,
  epochSecondsToDate,
  metre,
  metreToMillimetre,
  newton,
  newtonMetre,
  newtonMetreToKilonewtonMetre,
  newtonToKilonewton,
  pascal,
  pascalToMegapascal,
  radian,
  radianToDegree,
  strain,
  strainToMicrostrain,
} from '../../shared/model/units.ts';
import type { History } from '../../shared/protocol/http.ts';

interface Shown {
  readonly unit: string;
  readonly show: (si: number) => number;
}

const MICROSTRAIN: Shown = {
  unit: 'microstrain',
  show: (si) => strainToMicrostrain(strain(si)),
};

/** The unit that people read, by its ASCII name, as the site file's keys name it. */
const SHOWN: Readonly<Record<Measurand, Shown>> = {
  strain: MICROSTRAIN,
  shear: MICROSTRAIN,
  force: { unit: 'kN', show: (si) => newtonToKilonewton(newton(si)) },
  displacement: { unit: 'mm', show: (si) => metreToMillimetre(metre(si)) },
  temperature: { unit: 'Cel', show: (si) => celsius(si) },
  stress: { unit: 'MPa', show: (si) => pascalToMegapascal(pascal(si)) },
  moment: { unit: 'kN_m', show: (si) => newtonMetreToKilonewtonMetre(newtonMetre(si)) },
  angle: { unit: 'degree', show: (si) => radianToDegree(radian(si)) },
  number: { unit: '1', show: (si) => si },
};

/** More digits than any converter has; fewer than bring the double's last bit to light. */
const DIGITS = 12;
const MICROSECONDS = 1e6;

/** UTC with microseconds, RFC 3339 §5.6. */
const timeText = (t: number): string => {
  const ticks = Math.round(t * MICROSECONDS);
  const whole = Math.floor(ticks / MICROSECONDS);
  const fraction = String(ticks - whole * MICROSECONDS).padStart(6, '0');
  return `${epochSecondsToDate(epochSeconds(whole)).toISOString().slice(0, 19)}.${fraction}Z`;
};

/** A field in quotes where RFC 4180 §2.6 and 2.7 ask for them. */
const field = (text: string): string =>
  /[",\r\n]/.test(text) ? `"${text.replace(/"/g, '""')}"` : text;

/**
 * History as CSV (RFC 4180): a header line that names units, then a line a point,
 * each of them marked as simulated or not. A gap is an empty field.
 */
export const historyCsv = (history: History, measurand: Measurand): string => {
  const { unit, show } = SHOWN[measurand];
  const figure = (value: number | null | undefined) =>
    value === null || value === undefined ? '' : String(Number(show(value).toPrecision(DIGITS)));
  const marks = [field(history.channel), history.simulated ? 'yes' : 'no'];
  const header = ['time_utc', `min_${unit}`, `mean_${unit}`, `max_${unit}`, 'channel', 'simulated'];
  const lines = history.t.map((t, i) => {
    const { min, mean, max } = history;
    return [timeText(t), figure(min[i]), figure(mean[i]), figure(max[i]), ...marks].join(',');
  });
  return [header.join(','), ...lines, ''].join('\r\n');
};

/** Names site, channel and window; of letters, digits and signs that every file system takes. */
export const historyFileName = (history: History, siteId: string): string => {
  const compact = (t: number) => `${timeText(t).slice(0, 19).replace(/[-:]/g, '')}Z`;
  const parts = [siteId, history.channel, compact(history.from), compact(history.to)];
  const name = parts.join('_').replace(/[^A-Za-z0-9._-]/g, '-');
  return `${history.simulated ? 'SIMULATED_' : ''}${name}.csv`;
};
