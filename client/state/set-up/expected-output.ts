import type { BridgeResponse } from '../../../shared/model/calibration.ts';
import { apply } from '../../../shared/model/fractional-linear.ts';
import {
  ratio,
  ratioToMillivoltPerVolt,
  volt,
  voltToMillivolt,
  type Strain,
} from '../../../shared/model/units.ts';
import { bridgeOutput } from '../../../shared/pipeline/3-strain/bridge.ts';
import { numberAt, textAt, type Json } from './tree.ts';

/** Volts that a record states; null: measured, or of the instrument's own. */
export const statedVolts = (record: Json | undefined): number | null =>
  numberAt(record, 'signal', 'excitation', 'stated_V');

/** `5 V stated`, `measured by input ex`; null: the node's figure is a ratio already. */
export const excitationWords = (record: Json | undefined): string | null => {
  const volts = statedVolts(record);
  if (volts !== null) return `${volts} V, stated`;
  const input = textAt(record, 'signal', 'excitation', 'measured_by_input');
  return input === null ? null : `measured by input ${input}`;
};

export interface ExpectedOutput {
  /** mV/V, with the zero in it. */
  readonly output: number;
  /** mV/V, without strain. */
  readonly zero: number;
  /** mV at the stated excitation; null: none stated. */
  readonly millivolts: number | null;
}

/**
 * What the bridge shows at a strain of arm 1, by its exact circuit, leads and zero; null while its
 * figures are incomplete.
 */
export const expectedOutput = (
  bridge: BridgeResponse,
  volts: number | null,
  strain: Strain,
): ExpectedOutput | null => {
  const output = apply(bridgeOutput(bridge), strain);
  if (!Number.isFinite(output)) return null;
  return {
    output: ratioToMillivoltPerVolt(ratio(output)),
    zero: ratioToMillivoltPerVolt(bridge.zero),
    millivolts: volts === null ? null : voltToMillivolt(volt(output * volts)),
  };
};
