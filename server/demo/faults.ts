import {
  celsius,
  kilonewtonToNewton,
  newton,
  strain,
  type Celsius,
  type Newton,
  type Strain,
} from '../../shared/model/units.ts';

/** Overload bump: the hook's load shoots up to `BUMP_PEAK` and is back after `BUMP_SECONDS`. */
const BUMP_PEAK = kilonewtonToNewton(235);
export const BUMP_SECONDS = 2;

/** Load in the hook `since` seconds after a bump began on top of `load`. */
export const bumpedLoad = (load: Newton, since: number): Newton =>
  since < 0 || since > BUMP_SECONDS
    ? load
    : newton(
        load + Math.max(0, BUMP_PEAK - load) * Math.sin((Math.PI * since) / BUMP_SECONDS) ** 2,
      );

/** Sun on one leg: warms its outer flange by so much, so fast, for so long; then it cools. */
const [SUN_KELVIN, SUN_TIME, SUN_SECONDS] = [15, 60, 300];

/** How much warmer the flange in the sun is than the other, K, `since` seconds after it came out. */
export const sunWarmth = (since: number): Celsius => {
  if (since < 0) return celsius(0);
  const warmed = SUN_KELVIN * (1 - Math.exp(-Math.min(since, SUN_SECONDS) / SUN_TIME));
  return celsius(warmed * Math.exp(-Math.max(0, since - SUN_SECONDS) / SUN_TIME));
};

/** A gauge coming off: share of the strain that it loses in the end, and how soon, s. */
const [SLIP_SHARE, SLIP_TIME] = [0.7, 40];

/**
 * Slip of a debonding gauge after another `dt` seconds at `true strain`; the gauge
 * shows the strain less its slip. It creeps on under load and never goes back.
 */
export const nextSlip = (slip: Strain, trueStrain: Strain, dt: number): Strain => {
  const end = SLIP_SHARE * trueStrain;
  const isGrowing = end * slip >= 0 && Math.abs(end) > Math.abs(slip);
  return isGrowing ? strain(slip + (end - slip) * (1 - Math.exp(-dt / SLIP_TIME))) : slip;
};
