import type { FigureUnit } from './verdict.ts';

/** How a unit is read by people, and how many of it are one SI unit. */
const READ: Readonly<Record<FigureUnit, readonly [per: number, unit: string]>> = {
  'm/m': [1e6, ' µε'],
  N: [1e-3, ' kN'],
  m: [1e3, ' mm'],
  Cel: [1, ' °C'],
  'm/m/s': [60e6, ' µε/min'],
  'N/s': [60e-3, ' kN/min'],
  'm/s': [60e3, ' mm/min'],
  'Cel/s': [60, ' °C/min'],
  'V/V': [1e3, ' mV/V'],
  Ohm: [1e-6, ' MΩ'],
  'W/m2': [1e-6, ' W/mm²'],
  '1': [100, ' %'],
  s: [1, ' s'],
};

/** A figure with its unit, three digits, for a sentence. */
export const inWords = (value: number, unit: FigureUnit): string => {
  const [per, name] = READ[unit];
  return `${Number((value * per).toPrecision(3))}${name}`;
};
