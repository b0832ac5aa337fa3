import { share, strain, type Celsius, type Share, type Strain } from '../../model/units.ts';

/** α·(T − T0): what a member free to expand does, without stress. Expansion α in 1/K. */
export const freeExpansion = (expansion: number, t: Celsius, t0: Celsius): Strain =>
  strain(expansion * (t - t0));

/** A gauge's own materials. */
export interface Grid {
  /** Of the grid's resistance, α_R, 1/K. */
  readonly resistancePerKelvin: number;
  /** Of the grid's length, α_g, 1/K. */
  readonly expansion: number;
  readonly gaugeFactor: number;
}

/**
 * Thermal output from its physics, linear in temperature: [α_R/GF + (α_s − α_g)]·ΔT. Source: Dally
 * and Riley, Experimental Stress Analysis (value from memory).
 */
export const gridThermalOutput = (
  { resistancePerKelvin, expansion, gaugeFactor }: Grid,
  memberExpansion: number,
  t: Celsius,
  t0: Celsius,
): Strain =>
  strain(
    (resistancePerKelvin / gaugeFactor) * (t - t0) +
      freeExpansion(memberExpansion, t, t0) -
      freeExpansion(expansion, t, t0),
  );

export interface Compensation {
  /** Of the member's material, 1/K. */
  readonly member: number;
  /** That the gauge, or the polynomial taken off, is made for, 1/K. */
  readonly matched: number;
}

export interface CompensationCheck {
  /** What the channel shows if the member is free to expand: 0 where it is matched. */
  readonly free: Strain;
  /** What it shows if the member is held at both ends and cannot expand. */
  readonly held: Strain;
  /** What it does show, less `free`. */
  readonly unexplained: Strain;
  /** `unexplained` as a share of what holding would add: 0 free, 1 held; null at one temperature. */
  readonly restraint: Share | null;
}

/**
 * Cross-check of a temperature-compensated channel that carries no load: what it shows at T, zero
 * at T0, beside what it should. A matched gauge on free steel shows nothing, for free expansion is
 * the output that it takes off; held steel shows −α·ΔT, and that is real stress. A share far from
 * 0 to 1, or one where nothing holds the member, speaks of the gauge: wrong polynomial, wrong
 * matched expansion, sun on one side, or a temperature that is not the steel's. Source: free
 * expansion and superposition, Gere, Mechanics of Materials, thermal effects.
 */
export const compensationCheck = (
  { member, matched }: Compensation,
  shown: Strain,
  t: Celsius,
  t0: Celsius,
): CompensationCheck => {
  const expansion = freeExpansion(member, t, t0);
  const free = strain(expansion - freeExpansion(matched, t, t0));
  const unexplained = strain(shown - free);
  return {
    free,
    held: strain(free - expansion),
    unexplained,
    restraint: expansion === 0 ? null : share(-unexplained / expansion),
  };
};
