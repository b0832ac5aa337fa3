import type { BridgeCircuit } from '../../model/calibration.ts';

/**
 * Every circuit here obeys `r = B·d / (4 + N·d)` exactly, with d = GF·ε of arm 1
 * and r the bridge output over the excitation. Arms in a ring 1-2-3-4, supply
 * across (1|4) and (2|3): adjacent arms subtract, opposite arms add.
 * B: bridge factor. N: non-linearity, 0 for a circuit that is linear.
 * Source: r = R1/(R1+R2) − R4/(R3+R4) with each circuit's arms put in; Dally and
 * Riley, Experimental Stress Analysis, the Wheatstone bridge.
 */
export interface Circuit {
  /** Changes of arms 1 to 4 as multiples of d. */
  readonly arms: (poisson: number) => readonly [number, number, number, number];
  readonly bridgeFactor: (poisson: number) => number;
  readonly nonlinearity: (poisson: number) => number;
  readonly usesPoisson: boolean;
  readonly gauges: 1 | 2 | 4;
}

export const CIRCUITS: Readonly<Record<BridgeCircuit, Circuit>> = {
  quarter: {
    arms: () => [1, 0, 0, 0],
    bridgeFactor: () => 1,
    nonlinearity: () => 2,
    usesPoisson: false,
    gauges: 1,
  },
  'half-poisson': {
    arms: (nu) => [1, -nu, 0, 0],
    bridgeFactor: (nu) => 1 + nu,
    nonlinearity: (nu) => 2 * (1 - nu),
    usesPoisson: true,
    gauges: 2,
  },
  'half-bending': {
    arms: () => [1, -1, 0, 0],
    bridgeFactor: () => 2,
    nonlinearity: () => 0,
    usesPoisson: false,
    gauges: 2,
  },
  'half-opposite': {
    arms: () => [1, 0, 1, 0],
    bridgeFactor: () => 2,
    nonlinearity: () => 2,
    usesPoisson: false,
    gauges: 2,
  },
  'full-bending': {
    arms: () => [1, -1, 1, -1],
    bridgeFactor: () => 4,
    nonlinearity: () => 0,
    usesPoisson: false,
    gauges: 4,
  },
  'full-bending-poisson': {
    arms: (nu) => [1, -1, nu, -nu],
    bridgeFactor: (nu) => 2 * (1 + nu),
    nonlinearity: () => 0,
    usesPoisson: true,
    gauges: 4,
  },
  'full-axial-poisson': {
    arms: (nu) => [1, -nu, 1, -nu],
    bridgeFactor: (nu) => 2 * (1 + nu),
    nonlinearity: (nu) => 2 * (1 - nu),
    usesPoisson: true,
    gauges: 4,
  },
  'full-torsion': {
    arms: () => [1, -1, 1, -1],
    bridgeFactor: () => 4,
    nonlinearity: () => 0,
    usesPoisson: false,
    gauges: 4,
  },
};
