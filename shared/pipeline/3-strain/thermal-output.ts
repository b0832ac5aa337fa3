import type {
  BridgeCircuit,
  TemperatureCorrection,
  ThermalOutput,
} from '../../model/calibration.ts';
import { affine, type FractionalLinear } from '../../model/fractional-linear.ts';
import { celsius, strain, type Celsius, type Strain } from '../../model/units.ts';

export const HIGHEST_DEGREE = 4;

/** A gauge over temperature. */
export interface GaugeTemperature extends Pick<
  TemperatureCorrection,
  'factorPerKelvin' | 'reference' | 'thermalOutput'
> {
  /** At the reference temperature. */
  readonly gaugeFactor: number;
}

/** A polynomial that cannot be, or null. */
export const thermalFault = ({
  coefficients,
  gaugeFactor,
}: ThermalOutput): { expected: string; came: string } | null => {
  if (coefficients.length > HIGHEST_DEGREE + 1) {
    return {
      expected: `at most ${HIGHEST_DEGREE + 1} coefficients`,
      came: String(coefficients.length),
    };
  }
  const odd = coefficients.find((a) => !Number.isFinite(a));
  if (odd !== undefined) return { expected: 'finite coefficients', came: String(odd) };
  return gaugeFactor > 0 ? null : { expected: 'a gauge factor above 0', came: String(gaugeFactor) };
};

/** Thermal output at T on the scale that it is quoted for, m/m. */
export const thermalOutputAt = ({ coefficients }: ThermalOutput, t: Celsius): Strain => {
  let sum = 0;
  for (let k = coefficients.length - 1; k >= 0; k--) sum = sum * t + (coefficients[k] ?? 0);
  return strain(sum);
};

/** Value from memory for the form of the slope: linear about the reference temperature. */
export const gaugeFactorAt = (
  { gaugeFactor, factorPerKelvin, reference }: GaugeTemperature,
  t: Celsius,
): number => gaugeFactor * (1 + factorPerKelvin * (t - reference));

/** Thermal output since the zero times the gauge factor that it is quoted for: as ΔR/R. */
const thermalChange = ({ thermalOutput }: GaugeTemperature, t: Celsius, zeroAt: Celsius): number =>
  thermalOutput === null
    ? 0
    : (thermalOutputAt(thermalOutput, t) - thermalOutputAt(thermalOutput, zeroAt)) *
      thermalOutput.gaugeFactor;

/**
 * A strain indicated at the gauge factor `indicatedAt`, zero taken at `zeroAt`, to the strain at T:
 * ε = [ε_ind − (ε_T(T) − ε_T(T0))·GF_quoted/GF_ind]·GF_ind/GF(T). The thermal output comes off
 * first, then the gauge factor at temperature is put in: quoted outputs already hold GF's own
 * change. ASTM E251 for the terms; the order is from memory.
 */
export const thermalCorrected = (
  gauge: GaugeTemperature,
  indicatedAt: number,
  zeroAt: Celsius,
  indicated: Strain,
  t: Celsius,
): Strain =>
  strain((indicated * indicatedAt - thermalChange(gauge, t, zeroAt)) / gaugeFactorAt(gauge, t));

/** `thermalCorrected` at one temperature as a map, to be chained with the others. */
export const thermalMap = (
  gauge: GaugeTemperature,
  indicatedAt: number,
  zeroAt: Celsius,
  t: Celsius,
): FractionalLinear =>
  affine(
    indicatedAt / gaugeFactorAt(gauge, t),
    thermalCorrected(gauge, indicatedAt, zeroAt, strain(0), t),
  );

/**
 * `thermalCorrected` sample by sample, strains in m/m and temperatures in °C, all of one length;
 * `out` may be `indicated`. NaN where the temperature is.
 */
export const fillThermalCorrected = (
  gauge: GaugeTemperature,
  indicatedAt: number,
  zeroAt: Celsius,
  indicated: Float64Array,
  temperatures: Float64Array,
  out: Float64Array,
): void => {
  for (let i = 0; i < indicated.length; i++) {
    const at = strain(indicated[i] ?? NaN);
    out[i] = thermalCorrected(gauge, indicatedAt, zeroAt, at, celsius(temperatures[i] ?? NaN));
  }
};

/**
 * How much of a thermal output that all gauges of the bridge share the reported strain shows:
 * adjacent arms subtract. 1 for circuits whose gauges lie in one or in opposite arms, else 0.
 */
export const thermalShare = (circuit: BridgeCircuit): 0 | 1 => {
  switch (circuit) {
    case 'quarter':
    case 'half-opposite':
      return 1;
    case 'half-poisson':
    case 'half-bending':
    case 'full-bending':
    case 'full-bending-poisson':
    case 'full-axial-poisson':
    case 'full-torsion':
      return 0;
  }
};
