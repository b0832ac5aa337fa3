import { share, type Ohm, type Share } from '../../model/units.ts';

/**
 * What an input's own resistance leaves of a bridge's output: Ri/(Ri + Ro). Ro, the bridge's output
 * resistance, is that of one arm where all four are alike. Source: voltage divider.
 */
export const inputLoading = (output: Ohm, input: Ohm): Share => share(input / (input + output));
