import { epochSeconds } from '../../../shared/model/units.ts';
import { decodeSenml, type SenmlContext } from '../../../shared/pipeline/1-decode/senml.ts';

export const ARRIVED = epochSeconds(1_800_000_000);
export const context = (change: Partial<SenmlContext> = {}): SenmlContext => ({
  form: 'json',
  node: 'yard',
  arrived: ARRIVED,
  declared: () => null,
  ...change,
});

/** Input, time and value of each reading, and the refusals; or the refusal of the pack. */
export const readings = (pack: unknown, change: Partial<SenmlContext> = {}) => {
  const decoded = decodeSenml(pack, context(change));
  if (!decoded.ok) return decoded.refusal;
  return {
    values: decoded.value.frames.map((f) => [f.inputs[0]?.input, f.t0, f.inputs[0]?.samples[0]]),
    refusals: decoded.value.refusals,
  };
};
