import type { BridgeResponse } from '../../model/calibration.ts';
import {
  ohm,
  strain,
  type Metre,
  type Ohm,
  type SquareMetre,
  type Strain,
} from '../../model/units.ts';
import { thermalShare } from './thermal-output.ts';

/** Of annealed copper at 20 °C, 100 % IACS (IEC 60028, value from memory). */
export const COPPER = {
  /** Ω·m. */
  resistivity: 1.7241e-8,
  /** 1/K. */
  perKelvin: 0.00393,
} as const;

/** One copper conductor at 20 °C: ρ·l/A. */
export const conductorResistance = (length: Metre, area: SquareMetre): Ohm =>
  ohm((COPPER.resistivity * length) / area);

/**
 * False strain of copper leads that warm by `kelvin` after the zero, to the first order:
 * 2·RL·α·ΔT/(Rg·GF) with both conductors in the gauge's arm, for a trim resistor stays cool; 0
 * where adjacent arms warm alike (three wires, gauges in adjacent arms) and where the leads carry
 * excitation only. Value from memory.
 */
export const leadTemperatureStrain = (
  { circuit, leads, gaugeResistance, gaugeFactor }: BridgeResponse,
  kelvin: number,
): Strain =>
  strain(
    leads.kind === 'two-wire'
      ? (thermalShare(circuit) * 2 * leads.resistance * COPPER.perKelvin * kelvin) /
          (gaugeResistance * gaugeFactor)
      : 0,
  );
