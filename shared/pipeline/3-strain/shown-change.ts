import type { BridgeResponse } from '../../model/calibration.ts';
import { apply } from '../../model/fractional-linear.ts';
import { strain, type Ratio, type Strain } from '../../model/units.ts';
import { bridgeStrain } from './bridge.ts';

/**
 * Strain that a record's exact inversion shows when the bridge output goes from one V/V to another,
 * the first taken as zero: what a shunt check must read, or what a zero that moved amounts to.
 */
export const shownChange = (response: BridgeResponse, from: Ratio, to: Ratio): Strain =>
  strain(apply(bridgeStrain({ ...response, zero: from }), to));
