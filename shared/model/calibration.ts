import type { Celsius, EpochSeconds, Metre, Newton, Ohm, Ratio, Volt } from './units.ts';

/** Where the excitation of a bridge is known from. */
export type Excitation =
  | { readonly kind: 'stated'; readonly volts: Volt }
  /** Another input of the same node measures it, sample by sample, in V. */
  | { readonly kind: 'measured'; readonly input: string };

/** What the node's figure is, and so how it becomes V/V or the SI unit of a transducer. */
export type Signal =
  | { readonly kind: 'ratio' }
  | { readonly kind: 'volts'; readonly excitation: Excitation }
  /** `(count − zeroCount) · perCount` is V/V. */
  | {
      readonly kind: 'counts';
      readonly as: 'ratio';
      readonly perCount: number;
      readonly zeroCount: number;
    }
  /** `(count − zeroCount) · perCount` is V. */
  | {
      readonly kind: 'counts';
      readonly as: 'volts';
      readonly perCount: number;
      readonly zeroCount: number;
      readonly excitation: Excitation;
    }
  /** Already N, m or °C, or a voltage that a linear response turns into one. */
  | { readonly kind: 'direct' };

/** Arms are numbered round the ring; arm 1 sees the strain that is reported. */
export type BridgeCircuit =
  | 'quarter'
  | 'half-poisson'
  | 'half-bending'
  | 'half-opposite'
  | 'full-bending'
  | 'full-bending-poisson'
  | 'full-axial-poisson'
  | 'full-torsion';

/** Resistance is of one conductor; every gauge of a half bridge is wired alike. */
export type Leads =
  /** None worth counting, or sensed away by the instrument. */
  | { readonly kind: 'none' }
  /** Both conductors in the gauge's arm; `trimmed` if the adjacent arm holds as much. */
  | { readonly kind: 'two-wire'; readonly resistance: Ohm; readonly trimmed: boolean }
  /** One conductor in the gauge's arm, one in the adjacent arm, the third in the output. */
  | { readonly kind: 'three-wire'; readonly resistance: Ohm }
  /** Full bridge whose excitation drops along two conductors. */
  | { readonly kind: 'excitation'; readonly resistance: Ohm };

/** What an unloaded, bonded gauge shows over temperature, as its data sheet states it. */
export interface ThermalOutput {
  /** a0 … a4 of Σ ak·T^k with T in °C, m/m per °C^k; at most degree 4. */
  readonly coefficients: readonly number[];
  /** The instrument's gauge factor that the polynomial is quoted for, usually 2.0. */
  readonly gaugeFactor: number;
}

/** How the strain of a gauge is put right for its temperature. */
export interface TemperatureCorrection {
  /** Id of the channel that measures the temperature of the structure at the gauge. */
  readonly channel: string;
  /** In the zero state that the calibration record states. */
  readonly zeroAt: Celsius;
  /** kT of GF(T) = GF·(1 + kT·(T − Tref)), 1/K; about +1e-4 for constantan. 0: not accounted for. */
  readonly factorPerKelvin: number;
  /** Tref, at which the gauge factor is stated. */
  readonly reference: Celsius;
  /** null: not accounted for, or the bridge takes it off by itself. */
  readonly thermalOutput: ThermalOutput | null;
}

/** What a gauge is bonded to, by how well it carries heat away. */
export const HEAT_SINKS = [
  'thick-aluminium-or-copper',
  'thick-steel',
  'thin-steel',
  'glass-ceramic-or-composite',
  'unfilled-plastic',
] as const;
export type HeatSink = (typeof HEAT_SINKS)[number];

/** A gauge's measuring grid. */
export interface Grid {
  readonly length: Metre;
  readonly width: Metre;
  readonly on: HeatSink;
}

export interface BridgeResponse {
  readonly kind: 'bridge';
  readonly circuit: BridgeCircuit;
  readonly gaugeFactor: number;
  readonly gaugeResistance: Ohm;
  /** Poisson's ratio of the member under the gauge; used by the circuits with Poisson arms. */
  readonly poisson: number;
  readonly leads: Leads;
  /** null: not put right for. */
  readonly temperature: TemperatureCorrection | null;
  /** Kt, a share: 0.01 for 1 %. 0: none, or not stated. Put right for in rosettes. */
  readonly transverseSensitivity: number;
  /** null: not stated. */
  readonly grid: Grid | null;
  /**
   * Bridge output of the structure's zero state, V/V. Taken off as ΔR/R, after inversion,
   * with what the unbalance behind it does to the bridge's sensitivity accounted for.
   */
  readonly zero: Ratio;
}

/** A transducer: `(signal − zero) · perUnit` is N, m or °C. */
export interface LinearResponse {
  readonly kind: 'linear';
  readonly perUnit: number;
  readonly zero: number;
}

export type Response = BridgeResponse | LinearResponse;

/** What every record has. Records are added, never edited; see `inForce` for which one governs. */
interface RecordHead {
  /** Once in the site. */
  readonly id: string;
  readonly validFrom: EpochSeconds;
  readonly author: string;
  readonly reason: string;
  /** When it was added on screen; null: it came with the site file. */
  readonly recordedAt: EpochSeconds | null;
  /** The earlier record of the same kind and channel that it takes the place of; null: none. */
  readonly corrects: string | null;
}

/** How a channel's raw figure becomes its value. */
export interface CalibrationRecord extends RecordHead {
  readonly signal: Signal;
  readonly response: Response;
}

/** What was on the structure when a zero was read. */
export type StructureState =
  { readonly kind: 'unloaded' } | { readonly kind: 'loaded'; readonly load: Newton };

/** A zero that was read: takes the place of the zero in the calibration record from then on. */
export interface ZeroRecord extends RecordHead {
  /**
   * Mean of the raw figures, as the node gives them, over V of excitation if that is
   * measured. Raw, so that a corrected scale or excitation corrects the zero as well.
   */
  readonly raw: number;
  /** Standard deviation of the raw figures it is the mean of. */
  readonly noise: number;
  readonly samples: number;
  /** Of the structure at the gauge, if it was known. */
  readonly temperature: Celsius | null;
  readonly state: StructureState;
}
