/**
 * Units are types. Every figure inside Yieldward is SI and branded with its
 * unit; this file holds the only casts. Conversions to what people read are
 * named `xToY` and return plain numbers, for showing and nothing else.
 */
declare const unit: unique symbol;
export type Quantity<U extends string> = number & { readonly [unit]: U };

/** A duration in s. */
export type Seconds = Quantity<'s'>;
/** UTC as seconds since 1970-01-01T00:00:00Z, leap seconds not counted (POSIX time). */
export type EpochSeconds = Quantity<'s since 1970'>;
export type Metre = Quantity<'m'>;
export type SquareMetre = Quantity<'m2'>;
export type CubicMetre = Quantity<'m3'>;
export type QuarticMetre = Quantity<'m4'>;
export type Newton = Quantity<'N'>;
/** A bending moment. */
export type NewtonMetre = Quantity<'N m'>;
export type Pascal = Quantity<'Pa'>;
export type Volt = Quantity<'V'>;
export type Ohm = Quantity<'Ohm'>;
export type Watt = Quantity<'W'>;
export type WattPerSquareMetre = Quantity<'W/m2'>;
export type Celsius = Quantity<'Cel'>;
/** A plane angle, counter-clockwise positive. */
export type Radian = Quantity<'rad'>;
/** Bridge output over excitation, V/V. */
export type Ratio = Quantity<'V/V'>;
/** Strain, m/m, tension positive. */
export type Strain = Quantity<'m/m'>;
/** A share of something whole: 1 is all of it. */
export type Share = Quantity<'1'>;

export const seconds = (n: number) => n as Seconds;
export const epochSeconds = (n: number) => n as EpochSeconds;
export const metre = (n: number) => n as Metre;
export const squareMetre = (n: number) => n as SquareMetre;
export const cubicMetre = (n: number) => n as CubicMetre;
export const quarticMetre = (n: number) => n as QuarticMetre;
export const newton = (n: number) => n as Newton;
export const newtonMetre = (n: number) => n as NewtonMetre;
export const pascal = (n: number) => n as Pascal;
export const volt = (n: number) => n as Volt;
export const ohm = (n: number) => n as Ohm;
export const watt = (n: number) => n as Watt;
export const wattPerSquareMetre = (n: number) => n as WattPerSquareMetre;
export const celsius = (n: number) => n as Celsius;
export const radian = (n: number) => n as Radian;
export const ratio = (n: number) => n as Ratio;
export const strain = (n: number) => n as Strain;
export const share = (n: number) => n as Share;

export const microstrainToStrain = (n: number) => strain(n * 1e-6);
export const strainToMicrostrain = (e: Strain): number => e * 1e6;
export const megapascalToPascal = (n: number) => pascal(n * 1e6);
export const pascalToMegapascal = (p: Pascal): number => p / 1e6;
export const pascalToGigapascal = (p: Pascal): number => p / 1e9;
export const gigapascalToPascal = (n: number) => pascal(n * 1e9);
export const kilonewtonMetreToNewtonMetre = (n: number) => newtonMetre(n * 1e3);
export const newtonMetreToKilonewtonMetre = (m: NewtonMetre): number => m / 1e3;
export const kilonewtonToNewton = (n: number) => newton(n * 1e3);
export const newtonToKilonewton = (n: Newton): number => n / 1e3;
export const millimetreToMetre = (n: number) => metre(n / 1e3);
export const squareMillimetreToSquareMetre = (n: number) => squareMetre(n * 1e-6);
export const degreeToRadian = (n: number) => radian((n * Math.PI) / 180);
export const radianToDegree = (a: Radian): number => (a * 180) / Math.PI;
export const metreToMillimetre = (m: Metre): number => m * 1e3;
export const voltToMillivolt = (v: Volt): number => v * 1e3;
export const ratioToMillivoltPerVolt = (r: Ratio): number => r * 1e3;
export const millivoltPerVoltToRatio = (n: number) => ratio(n / 1e3);
export const epochSecondsToDate = (t: EpochSeconds) => new Date(t * 1e3);
export const dateToEpochSeconds = (d: Date) => epochSeconds(d.getTime() / 1e3);

/** US customary, NIST SP 811 Appendix B.8: 1 in = 25.4 mm and 1 lbf = 4.4482216152605 N exactly. */
const NEWTON_PER_POUND_FORCE = 4.4482216152605;
const METRE_PER_INCH = 0.0254;
export const inchToMetre = (n: number) => metre(n * METRE_PER_INCH);
export const metreToInch = (m: Metre): number => m / METRE_PER_INCH;
/** Of section tables, in powers of a length: cm² and in², cm³ and in³, cm⁴ and in⁴. */
export const centimetrePowerToInch = (n: number, power: 2 | 3 | 4): number => n / 2.54 ** power;
export const inchPowerToCentimetre = (n: number, power: 2 | 3 | 4): number => n * 2.54 ** power;
export const newtonToKip = (n: Newton): number => n / (1e3 * NEWTON_PER_POUND_FORCE);
export const newtonMetreToKipFoot = (m: NewtonMetre): number =>
  m / (1e3 * NEWTON_PER_POUND_FORCE * 12 * METRE_PER_INCH);
export const kipFootToNewtonMetre = (n: number) =>
  newtonMetre(n * 1e3 * NEWTON_PER_POUND_FORCE * 12 * METRE_PER_INCH);
export const kipToNewton = (n: number) => newton(n * 1e3 * NEWTON_PER_POUND_FORCE);
export const ksiToPascal = (n: number) =>
  pascal((n * 1e3 * NEWTON_PER_POUND_FORCE) / METRE_PER_INCH ** 2);
export const pascalToKsi = (p: Pascal): number =>
  (p * METRE_PER_INCH ** 2) / (1e3 * NEWTON_PER_POUND_FORCE);
export const celsiusToFahrenheit = (c: Celsius): number => c * 1.8 + 32;
export const fahrenheitToCelsius = (f: number) => celsius((f - 32) / 1.8);
/** Of a coefficient per kelvin. */
export const perKelvinToPerFahrenheit = (n: number): number => n / 1.8;
export const perFahrenheitToPerKelvin = (n: number): number => n * 1.8;
