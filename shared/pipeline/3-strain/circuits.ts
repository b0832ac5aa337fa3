import type { BridgeCircuit } from '../../model/calibration.ts';

/**
 * Every circuit here obeys `r = B·d / (4 + N·d)` exactly, with d = GF·ε of arm 1
 * and r the bridge output over the excitation. Arms in a ring 1-2-3-4, supply
 * across (1|4) and (2|3): adjacent arms subtract, opposite arms add.
 * Source: r = R1/(R1+R2) − R4/(R3+R4) with each circuit's arms put in; Dally and
 * Riley, Experimental Stress Analysis, the Wheatstone bridge.
 */
export interface Circuit {
  /** B for the Poisson's ratio of the member. */
  readonly bridgeFactor: (poisson: number) => number;
  /** N for the Poisson's ratio of the member; 0 where the circuit is linear. */
  readonly nonlinearity: (poisson: number) => number;
}

const linear = () => 0;

/** Behind each circuit the changes of its arms 1 to 4. */
export const CIRCUITS: Readonly<Record<BridgeCircuit, Circuit>> = {
  /** d, 0, 0, 0 */
  quarter: { bridgeFactor: () => 1, nonlinearity: () => 2 },
  /** d, −ν·d, 0, 0 */
  'half-poisson': { bridgeFactor: (nu) => 1 + nu, nonlinearity: (nu) => 2 * (1 - nu) },
  /** d, −d, 0, 0 */
  'half-bending': { bridgeFactor: () => 2, nonlinearity: linear },
  /** d, 0, d, 0 */
  'half-opposite': { bridgeFactor: () => 2, nonlinearity: () => 2 },
  /** d, −d, d, −d */
  'full-bending': { bridgeFactor: () => 4, nonlinearity: linear },
  /** d, −d, ν·d, −ν·d */
  'full-bending-poisson': { bridgeFactor: (nu) => 2 * (1 + nu), nonlinearity: linear },
  /** d, −ν·d, d, −ν·d */
  'full-axial-poisson': { bridgeFactor: (nu) => 2 * (1 + nu), nonlinearity: (nu) => 2 * (1 - nu) },
  /** d, −d, d, −d with d = GF·γ/2: gauges at ±45° */
  'full-torsion': { bridgeFactor: () => 4, nonlinearity: linear },
};
