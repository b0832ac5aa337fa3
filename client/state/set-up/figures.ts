/** Figures of the site file as people type and read them. What is kept is in the file's unit. */
import {
  celsius,
  celsiusToFahrenheit,
  centimetrePowerToInch,
  fahrenheitToCelsius,
  gigapascalToPascal,
  inchPowerToCentimetre,
  inchToMetre,
  kilonewtonMetreToNewtonMetre,
  kilonewtonToNewton,
  kipFootToNewtonMetre,
  kipToNewton,
  ksiToPascal,
  megapascalToPascal,
  metre,
  metreToInch,
  metreToMillimetre,
  millimetreToMetre,
  millivoltPerVoltToRatio,
  newtonMetreToKilonewtonMetre,
  newtonMetreToKipFoot,
  newtonToKilonewton,
  newtonToKip,
  pascalToGigapascal,
  pascalToKsi,
  pascalToMegapascal,
  perFahrenheitToPerKelvin,
  perKelvinToPerFahrenheit,
  ratio,
  ratioToMillivoltPerVolt,
  volt,
  voltToMillivolt,
} from '../../../shared/model/units.ts';
import { fieldText, NO_BREAK, typedNumber } from '../number-text.ts';
import type { UnitSystem } from '../quantity.ts';
import { textAt, type Json } from './tree.ts';

/** How a figure of one unit of the file is shown in one system. */
export interface Shown {
  readonly unit: string;
  readonly fromFile: (figure: number) => number;
  readonly toFile: (shown: number) => number;
}

export type FileUnit = Readonly<Record<UnitSystem, Shown>>;

const asIs = (unit: string): Shown => ({ unit, fromFile: (n) => n, toFile: (n) => n });
/** The same in both systems. */
const both = (shown: Shown): FileUnit => ({ si: shown, us: shown });
const plain = (unit: string): FileUnit => both(asIs(unit));
const split = (
  unit: string,
  us: string,
  fromFile: Shown['fromFile'],
  toFile: Shown['toFile'],
): FileUnit => ({ si: asIs(unit), us: { unit: us, fromFile, toFile } });

const power = (n: 2 | 3 | 4, mark: string): FileUnit =>
  split(
    `cm${mark}`,
    `in${mark}`,
    (x) => centimetrePowerToInch(x, n),
    (x) => inchPowerToCentimetre(x, n),
  );

const MPA = split(
  'MPa',
  'ksi',
  (n) => pascalToKsi(megapascalToPascal(n)),
  (n) => pascalToMegapascal(ksiToPascal(n)),
);
const KN = split(
  'kN',
  'kip',
  (n) => newtonToKip(kilonewtonToNewton(n)),
  (n) => newtonToKilonewton(kipToNewton(n)),
);
const MM = split(
  'mm',
  'in',
  (n) => metreToInch(millimetreToMetre(n)),
  (n) => metreToMillimetre(inchToMetre(n)),
);
const CELSIUS = split('°C', '°F', (n) => celsiusToFahrenheit(celsius(n)), fahrenheitToCelsius);
/** A difference of temperatures. */
const KELVIN = split('K', '°F', perFahrenheitToPerKelvin, perKelvinToPerFahrenheit);
const MICROSTRAIN = plain('µε');
const KN_M = split(
  'kN·m',
  'kip·ft',
  (n) => newtonMetreToKipFoot(kilonewtonMetreToNewtonMetre(n)),
  (n) => newtonMetreToKilonewtonMetre(kipFootToNewtonMetre(n)),
);
const SHARE = both({ unit: '% of yield', fromFile: (n) => n * 100, toFile: (n) => n / 100 });
const RATIO = both({
  unit: 'mV/V',
  fromFile: (n) => ratioToMillivoltPerVolt(ratio(n)),
  toFile: millivoltPerVoltToRatio,
});

/** By the end of the key; the longest that fits counts. */
const BY_KEY: Readonly<Record<string, FileUnit>> = {
  _mV_per_V: plain('mV/V'),
  mV_per_V_per_count: plain('mV/V a count'),
  microvolt_per_count: plain('µV a count'),
  _ohm: plain('Ω'),
  stated_V: plain('V'),
  _V: plain('V'),
  _uV: plain('µV'),
  _microstrain: MICROSTRAIN,
  coefficients_microstrain: plain('µε, T in °C'),
  _microstrain_per_K: split('µε/K', 'µε/°F', perKelvinToPerFahrenheit, perFahrenheitToPerKelvin),
  _percent: plain('%'),
  _percent_per_100_K: plain('% per 100 K'),
  _share_of_yield: SHARE,
  _m: split('m', 'in', (n) => metreToInch(metre(n)), inchToMetre),
  _mm: MM,
  _cm2: power(2, '²'),
  _cm3: power(3, '³'),
  _cm4: power(4, '⁴'),
  _MPa: MPA,
  _GPa: split(
    'GPa',
    'ksi',
    (n) => pascalToKsi(gigapascalToPascal(n)),
    (n) => pascalToGigapascal(ksiToPascal(n)),
  ),
  _kN: KN,
  _s: plain('s'),
  _Cel: CELSIUS,
  _degree: plain('°'),
};

const BASES: Readonly<Record<string, FileUnit>> = {
  share_of_yield: SHARE,
  stress_MPa: MPA,
  strain_microstrain: MICROSTRAIN,
  force_kN: KN,
  displacement_mm: MM,
  temperature_Cel: CELSIUS,
  moment_kN_m: KN_M,
  angle_degree: plain('°'),
};

const NAMED: Readonly<Record<string, FileUnit>> = {
  '/': RATIO,
  'mV/V': plain('mV/V'),
  // A converter of V reads a bridge's mV; both stand beside each other.
  V: plain('V'),
  count: plain('counts'),
  Cel: CELSIUS,
  N: split(
    'N',
    'kip',
    (n) => newtonToKip(kilonewtonToNewton(n / 1e3)),
    (n) => newtonToKilonewton(kipToNewton(n)) * 1e3,
  ),
  m: split('m', 'in', (n) => metreToInch(metre(n)), inchToMetre),
  kN: KN,
  mm: MM,
};

const ofText = (table: Readonly<Record<string, FileUnit>>, name: string | null): FileUnit | null =>
  (name === null ? undefined : table[name]) ?? null;

/** The unit of the figure under `key` of `map`; null: it has none. */
export const unitOf = (key: string, map: Json | undefined): FileUnit | null => {
  switch (key) {
    case 'deadband':
      return textAt(map, 'basis') === 'temperature_Cel'
        ? KELVIN
        : ofText(BASES, textAt(map, 'basis'));
    case 'value':
      return ofText(BASES, textAt(map, 'basis'));
    case 'range':
    case 'raw':
    case 'noise':
      return ofText(NAMED, textAt(map, 'unit'));
    case 'rated_signal':
    case 'zero_signal':
      return ofText(NAMED, textAt(map, 'signal_unit'));
    case 'rated_value':
      return ofText(NAMED, textAt(map, 'value_unit'));
    default: {
      const ends = Object.keys(BY_KEY).filter((end) => key.endsWith(end));
      return BY_KEY[ends.sort((a, b) => b.length - a.length)[0] ?? ''] ?? null;
    }
  }
};

/** Of a conversion's rounding nothing is kept. */
const DIGITS = 12;

/** A figure of the file as it stands in a field. What is no number stands as it was typed. */
export const fieldOfFile = (
  value: Json | undefined,
  unit: FileUnit | null,
  system: UnitSystem,
): string => {
  if (typeof value === 'string') return value;
  if (typeof value !== 'number') return '';
  const shown = unit?.[system];
  return shown ? fieldText(shown.fromFile(value)) : String(value);
};

/** What was typed, in the file's unit. Nothing: undefined. What is no number: the text itself. */
export const fileOfField = (
  text: string,
  unit: FileUnit | null,
  system: UnitSystem,
): number | string | undefined => {
  if (text.trim() === '') return undefined;
  const typed = typedNumber(text);
  if (Number.isNaN(typed)) return text;
  const shown = unit?.[system];
  const kept = shown?.toFile(typed) ?? typed;
  return kept === typed ? typed : Number(kept.toPrecision(DIGITS));
};

const inSystem = (figure: number, { unit, fromFile }: Shown): string =>
  `${Number(fromFile(figure).toPrecision(4))}${NO_BREAK}${unit}`;

/** The figure in the other system, or where both have the same unit, in that unit's other size. */
export const besideText = (
  value: Json | undefined,
  unit: FileUnit | null,
  system: UnitSystem,
): string => {
  if (typeof value !== 'number' || unit === null) return '';
  const other = unit[system === 'si' ? 'us' : 'si'];
  if (other.unit !== unit[system].unit) return `= ${inSystem(value, other)}`;
  return other.unit === 'V' && Math.abs(value) < 1
    ? `= ${Number(voltToMillivolt(volt(value)).toPrecision(6))}${NO_BREAK}mV`
    : '';
};

/** A figure of the file with its unit, to be read. */
export const figureWithUnit = (
  value: number,
  unit: FileUnit | null,
  system: UnitSystem,
): string => {
  const shown = unit?.[system];
  if (!shown) return String(value);
  const figure = shown.fromFile(value);
  // Of a figure that is converted, as many digits as are read.
  const isConverted = shown !== unit?.si;
  const text = isConverted ? String(Number(figure.toPrecision(5))) : fieldText(figure);
  return `${text}${NO_BREAK}${shown.unit}`;
};
