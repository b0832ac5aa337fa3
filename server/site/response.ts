import type {
  BridgeCircuit,
  BridgeResponse,
  HeatSink,
  Leads,
  LinearResponse,
  Response,
  Signal,
  TemperatureCorrection,
} from '../../shared/model/calibration.ts';
import type { InputUnit, Material, Measurand } from '../../shared/model/site.ts';
import {
  celsius,
  microstrainToStrain,
  millimetreToMetre,
  millivoltPerVoltToRatio,
  ohm,
} from '../../shared/model/units.ts';
import { leadFault } from '../../shared/pipeline/3-strain/leads.ts';
import { thermalShare } from '../../shared/pipeline/3-strain/thermal-output.ts';
import type { Reading } from './reading.ts';

type LeadsOfFile =
  | { readonly kind: 'none' }
  | { readonly kind: 'two-wire'; readonly resistance_ohm: number; readonly trimmed: boolean }
  | { readonly kind: 'three-wire' | 'excitation'; readonly resistance_ohm: number };

interface TemperatureOfFile {
  readonly channel: string;
  readonly zero_Cel: number;
  readonly reference_Cel?: number;
  readonly factor_percent_per_100_K?: number;
  readonly thermal_output?: {
    readonly coefficients_microstrain: readonly number[];
    readonly quoted_gauge_factor: number;
  };
}

interface BridgeOfFile {
  readonly circuit: BridgeCircuit;
  readonly gauge_factor: number;
  readonly gauge_resistance_ohm: number;
  readonly poisson?: number;
  readonly leads: LeadsOfFile;
  readonly temperature?: TemperatureOfFile;
  readonly transverse_sensitivity_percent?: number;
  readonly grid?: { readonly length_mm: number; readonly width_mm: number; readonly on: HeatSink };
  readonly zero_mV_per_V: number;
}

interface LinearOfFile {
  readonly rated_signal: number;
  readonly signal_unit: 'mV/V' | 'V' | 'count';
  readonly rated_value: number;
  readonly value_unit: 'kN' | 'mm' | 'Cel';
  readonly zero_signal: number;
}

/** What a response is read for. */
export interface ResponseContext {
  readonly measurand: Measurand;
  readonly signal: Signal | null;
  readonly inputUnit: InputUnit | undefined;
  /** null: at fault. */
  readonly material: Material | null;
}

/** Of what is measured by transducers: the unit in the file, that unit in SI, and the SI unit itself. */
const TRANSDUCERS = {
  force: { unit: 'kN', si: 1e3, own: 'N' },
  displacement: { unit: 'mm', si: 1e-3, own: 'm' },
  temperature: { unit: 'Cel', si: 1, own: 'Cel' },
} as const;

type TransducerMeasurand = keyof typeof TRANSDUCERS;

/** The others are not measured: the schema lets none through. */
const isTransducer = (measurand: Measurand): measurand is TransducerMeasurand =>
  Object.hasOwn(TRANSDUCERS, measurand);

const SIGNAL_SI = { 'mV/V': 1e-3, V: 1, count: 1 } as const;

const leadsOf = (file: LeadsOfFile): Leads => {
  switch (file.kind) {
    case 'none':
      return { kind: 'none' };
    case 'two-wire':
      return { kind: 'two-wire', resistance: ohm(file.resistance_ohm), trimmed: file.trimmed };
    case 'three-wire':
    case 'excitation':
      return { kind: file.kind, resistance: ohm(file.resistance_ohm) };
  }
};

/** Where gauge factors are stated unless it is said otherwise, °C. Common practice, no source. */
const REFERENCE = 24;

const temperatureOf = (file: TemperatureOfFile): TemperatureCorrection => ({
  channel: file.channel,
  zeroAt: celsius(file.zero_Cel),
  factorPerKelvin: (file.factor_percent_per_100_K ?? 0) * 1e-4,
  reference: celsius(file.reference_Cel ?? REFERENCE),
  thermalOutput: file.thermal_output
    ? {
        coefficients: file.thermal_output.coefficients_microstrain.map(microstrainToStrain),
        gaugeFactor: file.thermal_output.quoted_gauge_factor,
      }
    : null,
});

/** A thermal output that the bridge takes off by itself must not be taken off again. */
const checkTemperature = (reading: Reading, at: string, circuit: BridgeCircuit | undefined) => {
  const path = `${at}/temperature/thermal_output`;
  if (circuit === undefined || !reading.has(path) || thermalShare(circuit) === 1) return;
  const expected = `none with a ${circuit} bridge: its adjacent gauges take it off`;
  reading.fault(path, expected, 'a polynomial');
};

const readBridge = (reading: Reading, at: string, context: ResponseContext): Response | null => {
  const { measurand, signal, material } = context;
  if (signal?.kind === 'direct') {
    reading.fault(`${at}/kind`, 'linear or as-is with a direct signal', 'bridge');
  }
  const circuit = reading.value<BridgeCircuit>(`${at}/circuit`);
  if (circuit !== undefined && (circuit === 'full-torsion') !== (measurand === 'shear')) {
    const expected =
      measurand === 'shear' ? 'full-torsion for shear' : 'no full-torsion for strain';
    reading.fault(`${at}/circuit`, expected, circuit);
  }
  const leadsFile = reading.value<LeadsOfFile>(`${at}/leads`);
  if (circuit !== undefined && leadsFile) {
    const fault = leadFault(circuit, leadsOf(leadsFile));
    if (fault) reading.fault(`${at}/leads`, fault.expected, fault.came);
  }
  checkTemperature(reading, at, circuit);
  const file = reading.value<BridgeOfFile>(at);
  const poisson = file?.poisson ?? material?.poisson;
  if (!file || poisson === undefined) return null;
  return {
    kind: 'bridge',
    circuit: file.circuit,
    gaugeFactor: file.gauge_factor,
    gaugeResistance: ohm(file.gauge_resistance_ohm),
    poisson,
    leads: leadsOf(file.leads),
    temperature: file.temperature ? temperatureOf(file.temperature) : null,
    transverseSensitivity: (file.transverse_sensitivity_percent ?? 0) / 100,
    grid: file.grid
      ? {
          length: millimetreToMetre(file.grid.length_mm),
          width: millimetreToMetre(file.grid.width_mm),
          on: file.grid.on,
        }
      : null,
    zero: millivoltPerVoltToRatio(file.zero_mV_per_V),
  } satisfies BridgeResponse;
};

/** The unit of what a signal hands to a transducer's line; null where it hands the value itself. */
const signalUnit = (signal: Signal, inputUnit: InputUnit): LinearOfFile['signal_unit'] | null => {
  if (signal.kind !== 'direct') return 'mV/V';
  return inputUnit === 'V' || inputUnit === 'count' ? inputUnit : null;
};

const readLinear = (
  reading: Reading,
  at: string,
  measurand: TransducerMeasurand,
  { signal, inputUnit }: ResponseContext,
): LinearResponse | null => {
  const valueUnit = reading.value<string>(`${at}/value_unit`);
  const { unit, si } = TRANSDUCERS[measurand];
  if (valueUnit !== undefined && valueUnit !== unit) {
    reading.faultAt(`${at}/value_unit`, `"${unit}" for ${measurand}`);
  }
  if (signal && inputUnit !== undefined) {
    const needed = signalUnit(signal, inputUnit);
    const given = reading.value<string>(`${at}/signal_unit`);
    if (needed === null)
      reading.fault(`${at}/kind`, `as-is with an input in ${inputUnit}`, 'linear');
    else if (given !== undefined && given !== needed) {
      reading.faultAt(`${at}/signal_unit`, `"${needed}" with this signal`);
    }
  }
  const file = reading.value<LinearOfFile>(at);
  if (!file) return null;
  const signalSi = SIGNAL_SI[file.signal_unit];
  const perUnit = (file.rated_value * si) / (file.rated_signal * signalSi);
  return { kind: 'linear', perUnit, zero: file.zero_signal * signalSi };
};

const readAsIs = (
  reading: Reading,
  at: string,
  measurand: TransducerMeasurand,
  { signal, inputUnit }: ResponseContext,
): LinearResponse => {
  const { own } = TRANSDUCERS[measurand];
  if (signal && inputUnit !== undefined && inputUnit !== own) {
    reading.fault(
      `${at}/kind`,
      `as-is for ${measurand} with an input in ${own} only`,
      `an input in ${inputUnit}`,
    );
  }
  return { kind: 'linear', perUnit: 1, zero: 0 };
};

/** A response that fits the measurand and the signal; null where something is at fault. */
export const readResponse = (
  reading: Reading,
  at: string,
  context: ResponseContext,
): Response | null => {
  const kind = reading.value<'bridge' | 'linear' | 'as-is'>(`${at}/kind`);
  if (kind === undefined) return null;
  const { measurand } = context;
  if (measurand === 'strain' || measurand === 'shear') {
    if (kind === 'bridge') return readBridge(reading, at, context);
    reading.faultAt(`${at}/kind`, `"bridge" for ${measurand}`);
    return null;
  }
  if (!isTransducer(measurand)) return null;
  if (kind === 'linear') return readLinear(reading, at, measurand, context);
  if (kind === 'as-is') return readAsIs(reading, at, measurand, context);
  reading.faultAt(`${at}/kind`, `"linear" or "as-is" for ${measurand}`);
  return null;
};
