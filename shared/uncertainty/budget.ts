import type { BridgeResponse } from '../model/calibration.ts';
import type { Pascal, Strain } from '../model/units.ts';
import {
  combinedVariance,
  effectiveDegrees,
  factorTable,
  truncatedDegrees,
  type Contribution,
} from './combined.ts';
import { standardOf, type Knowledge } from './knowledge.ts';
import { quadraticAt, scaled, type Quadratic } from './quadratic.ts';
import { STRAIN_INPUTS, strainSensitivity, type StrainInput } from './sensitivity.ts';

/** What is stated of a channel's inputs, each in its unit of `STRAIN_INPUTS`. */
export type Tolerances = Readonly<Partial<Record<StrainInput, Knowledge>>>;

export type BudgetInput = StrainInput | 'youngsModulus';

export const INPUT_NAMES: Readonly<Record<BudgetInput, string>> = {
  gaugeFactor: 'gauge factor',
  inputGain: 'input gain',
  excitation: 'excitation',
  leadResistance: 'lead resistance',
  poisson: 'Poisson’s ratio',
  misalignment: 'misalignment',
  thermalOutput: 'thermal output',
  zero: 'zero',
  zeroSignal: 'zero',
  noise: 'noise',
  noiseSignal: 'noise',
  resolution: 'resolution',
  resolutionSignal: 'resolution',
  youngsModulus: 'Young’s modulus',
};

/** One input of a budget, ready for any strain. */
export interface Term {
  readonly input: BudgetInput;
  readonly unit: '1' | 'Ohm' | 'V/V' | 'm/m';
  /** Standard uncertainty of the input, in `unit`. */
  readonly standard: number;
  readonly degrees: number;
  /** Of the result (m/m, or Pa of a stress) per `unit`, as a quadratic in the strain. */
  readonly sensitivity: Quadratic;
}

export interface BudgetLine extends Omit<Term, 'sensitivity'> {
  readonly name: string;
  readonly sensitivity: number;
  /** |sensitivity|·standard, in the unit of the result. */
  readonly contribution: number;
  /** Of the variance of the result, 0 to 1. */
  readonly share: number;
}

/** GUM (JCGM 100:2008) clause 7.2.7: what is to be told of a result's uncertainty. */
export interface Budget {
  /** The strain it holds for. */
  readonly at: Strain;
  readonly lines: readonly BudgetLine[];
  /** u_c, in m/m, or Pa of a stress. */
  readonly combined: number;
  /** ν_eff as the formula gives it; k is that of `truncatedDegrees`. */
  readonly effectiveDegrees: number;
  readonly countedDegrees: number;
  readonly coverage: number;
  readonly k: number;
  /** U = k·u_c. */
  readonly expanded: number;
}

const isStrainInput = (name: string): name is StrainInput => name in STRAIN_INPUTS;

/** The terms of a strain, in the order of `STRAIN_INPUTS`. */
export const strainTerms = (response: BridgeResponse, tolerances: Tolerances): Term[] =>
  Object.keys(STRAIN_INPUTS)
    .filter(isStrainInput)
    .flatMap((input) => {
      const known = tolerances[input];
      if (!known) return [];
      const { uncertainty: standard, degrees } = standardOf(known);
      const sensitivity = strainSensitivity(response, input);
      return [{ input, unit: STRAIN_INPUTS[input], standard, degrees, sensitivity }];
    });

/**
 * The terms of σ = ε·perStrain (`stressPerStrain`), Pa, from those of the strain and a share of
 * Young's modulus. In shear G = E/2(1+ν) moves with E alike; ν is taken as known there.
 */
export const stressTerms = (
  ofStrain: readonly Term[],
  perStrain: Pascal,
  youngsModulus: Knowledge | null,
): Term[] => {
  const terms = ofStrain.map((term) => ({
    ...term,
    sensitivity: scaled(term.sensitivity, perStrain),
  }));
  if (!youngsModulus) return terms;
  const { uncertainty: standard, degrees } = standardOf(youngsModulus);
  const sensitivity: Quadratic = [0, perStrain, 0];
  return [...terms, { input: 'youngsModulus', unit: '1', standard, degrees, sensitivity }];
};

const contributionAt = (term: Term, at: Strain): Contribution => ({
  amount: quadraticAt(term.sensitivity, at) * term.standard,
  degrees: term.degrees,
});

/** The budget at one strain; `coverage` as a share, 0 to 1. */
export const budgetAt = (terms: readonly Term[], at: Strain, coverage: number): Budget => {
  const contributions = terms.map((term) => contributionAt(term, at));
  const variance = combinedVariance(contributions);
  const degrees = effectiveDegrees(contributions);
  const k = factorTable(coverage)(degrees);
  const lines = terms.map((term, i): BudgetLine => {
    const contribution = Math.abs(contributions[i]?.amount ?? NaN);
    return {
      ...term,
      name: INPUT_NAMES[term.input],
      sensitivity: quadraticAt(term.sensitivity, at),
      contribution,
      share: variance > 0 ? contribution ** 2 / variance : 0,
    };
  });
  return {
    at,
    lines,
    combined: Math.sqrt(variance),
    effectiveDegrees: degrees,
    countedDegrees: truncatedDegrees(degrees),
    coverage,
    k,
    expanded: k * Math.sqrt(variance),
  };
};
