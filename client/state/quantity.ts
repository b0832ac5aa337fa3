import type { LimitBasis } from '../../shared/model/limit.ts';
import type { Measurand } from '../../shared/model/site.ts';
import {
  celsius,
  celsiusToFahrenheit,
  degreeToRadian,
  fahrenheitToCelsius,
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
  microstrainToStrain,
  millimetreToMetre,
  newton,
  newtonMetre,
  newtonMetreToKilonewtonMetre,
  newtonMetreToKipFoot,
  newtonToKilonewton,
  newtonToKip,
  pascal,
  pascalToKsi,
  pascalToMegapascal,
  radian,
  radianToDegree,
  strain,
  strainToMicrostrain,
} from '../../shared/model/units.ts';
import { decimalText, NO_BREAK } from './number-text.ts';

export const UNIT_SYSTEMS = ['si', 'us'] as const;
export type UnitSystem = (typeof UNIT_SYSTEMS)[number];

/** How one kind of quantity is read and written by people. */
export interface Scale {
  readonly unit: string;
  readonly fromSi: (value: number) => number;
  readonly toSi: (shown: number) => number;
  readonly decimals: (shown: number) => number;
}

export type Kind = Exclude<Measurand, 'shear'> | 'share';

const always = (decimals: number) => () => decimals;

/** One decimal below 100 µε, where it is above the noise of a good input; none from there. */
const STRAIN: Scale = {
  unit: 'µε',
  fromSi: (value) => strainToMicrostrain(strain(value)),
  toSi: microstrainToStrain,
  decimals: (shown) => (Math.abs(shown) < 99.95 ? 1 : 0),
};

const SHARE: Scale = {
  unit: '% of yield',
  fromSi: (value) => value * 100,
  toSi: (shown) => shown / 100,
  decimals: always(1),
};

const ANGLE: Scale = {
  unit: '°',
  fromSi: (value) => radianToDegree(radian(value)),
  toSi: degreeToRadian,
  decimals: always(1),
};

const NUMBER: Scale = {
  unit: '',
  fromSi: (value) => value,
  toSi: (shown) => shown,
  decimals: always(3),
};

const SCALES: Readonly<Record<UnitSystem, Readonly<Record<Kind, Scale>>>> = {
  si: {
    strain: STRAIN,
    share: SHARE,
    angle: ANGLE,
    number: NUMBER,
    moment: {
      unit: 'kN·m',
      fromSi: (value) => newtonMetreToKilonewtonMetre(newtonMetre(value)),
      toSi: kilonewtonMetreToNewtonMetre,
      decimals: always(1),
    },
    stress: {
      unit: 'MPa',
      fromSi: (value) => pascalToMegapascal(pascal(value)),
      toSi: megapascalToPascal,
      decimals: always(1),
    },
    force: {
      unit: 'kN',
      fromSi: (value) => newtonToKilonewton(newton(value)),
      toSi: kilonewtonToNewton,
      decimals: always(1),
    },
    displacement: {
      unit: 'mm',
      fromSi: (value) => metreToMillimetre(metre(value)),
      toSi: millimetreToMetre,
      decimals: always(2),
    },
    temperature: {
      unit: '°C',
      fromSi: (value) => value,
      toSi: (shown) => shown,
      decimals: always(1),
    },
  },
  us: {
    strain: STRAIN,
    share: SHARE,
    angle: ANGLE,
    number: NUMBER,
    moment: {
      unit: 'kip·ft',
      fromSi: (value) => newtonMetreToKipFoot(newtonMetre(value)),
      toSi: kipFootToNewtonMetre,
      decimals: always(2),
    },
    stress: {
      unit: 'ksi',
      fromSi: (value) => pascalToKsi(pascal(value)),
      toSi: ksiToPascal,
      decimals: always(2),
    },
    force: {
      unit: 'kip',
      fromSi: (value) => newtonToKip(newton(value)),
      toSi: kipToNewton,
      decimals: always(2),
    },
    displacement: {
      unit: 'in',
      fromSi: (value) => metreToInch(metre(value)),
      toSi: inchToMetre,
      decimals: always(3),
    },
    temperature: {
      unit: '°F',
      fromSi: (value) => celsiusToFahrenheit(celsius(value)),
      toSi: fahrenheitToCelsius,
      decimals: always(1),
    },
  },
};

export const scaleFor = (kind: Kind, system: UnitSystem): Scale => SCALES[system][kind];

export const kindOf = (measurand: Measurand): Kind =>
  measurand === 'shear' ? 'strain' : measurand;

/** The kind of figure that a limit of a basis is stated in. */
export const kindOfBasis = (basis: LimitBasis, measurand: Measurand): Kind =>
  basis === 'value' ? kindOf(measurand) : basis;

/** Without its unit, for a column whose heading has it. */
export const figureText = (value: number, scale: Scale): string => {
  const shown = scale.fromSi(value);
  return decimalText(shown, scale.decimals(shown));
};

export const quantityText = (value: number, scale: Scale): string =>
  scale.unit === ''
    ? figureText(value, scale)
    : `${figureText(value, scale)}${NO_BREAK}${scale.unit}`;

/** A place along a member, m. */
export const alongText = (metres: number, system: UnitSystem): string =>
  system === 'si'
    ? `${decimalText(metres, 2)}${NO_BREAK}m`
    : `${decimalText(metreToInch(metre(metres)), 1)}${NO_BREAK}in`;
