import { strain, type Strain } from '../../model/units.ts';
import { fitPlane, residualDeviation, residualsOf, type PlaneFit } from './plane-fit.ts';
import { weighted } from './weighted.ts';

/** A section's plane, and the same without each gauge in turn. */
export interface SectionWatch {
  readonly fit: PlaneFit;
  /** null: without this gauge the others lie on a line or are too few. */
  readonly without: readonly (PlaneFit | null)[];
}

export const watchSection = (fit: PlaneFit): SectionWatch => ({
  fit,
  without: fit.points.map((_, i) => {
    const rest = fitPlane(fit.points.filter((_point, j) => j !== i));
    return rest.ok ? rest.value : null;
  }),
});

/** What one gauge's strain is to the plane of all. */
export interface GaugeResidual {
  /** Measured less fitted, m/m. */
  readonly residual: Strain;
  /** Residual over its own standard deviation, u·√(1−h); null where it has none (h = 1). */
  readonly studentized: number | null;
  /**
   * The same with the deviation that the other gauges' residuals show in place of u, n − 4 degrees
   * of freedom; null with four gauges or fewer, and where the others fit without any residual.
   */
  readonly externallyStudentized: number | null;
  /** How far it would be off the plane of the others, if it alone is wrong: e/(1−h). */
  readonly error: Strain | null;
}

/**
 * `unchecked`: three gauges fit any plane. `agree`: no residual beyond chance. `one`: without this
 * gauge, and without no other, the rest agree. `undecided`: they do not agree, and without any one
 * of the suspects the rest would; none where no single gauge explains it: several wrong, or the
 * section does not stay plane.
 */
export type SectionVerdict =
  | { readonly kind: 'unchecked' }
  | { readonly kind: 'agree' }
  | { readonly kind: 'one'; readonly gauge: number }
  | { readonly kind: 'undecided'; readonly suspects: readonly number[] };

export interface SectionJudgement {
  readonly verdict: SectionVerdict;
  readonly gauges: readonly GaugeResidual[];
  /** √(SSR/(n − 3)), m/m; null with three gauges. */
  readonly deviation: Strain | null;
  /**
   * Share of the residuals' squares in the pattern y·z of warping (a bimoment): 1 with four flange
   * tips, whatever their fault. null where the gauges cannot tell, or nothing is left over.
   */
  readonly warpingShare: number | null;
}

/** Two-sided 0.1 %: Baarda's data snooping with a known deviation (value from memory). */
export const CRITICAL = 3.29;
/** Below it 1 − h is rounding. */
const UNCHECKED = 1e-9;

const squares = (figures: readonly number[]): number => weighted(figures, figures);

const freedomOf = ({ leverage }: PlaneFit, gauge: number): number => {
  const own = 1 - (leverage[gauge] ?? NaN);
  return own > UNCHECKED ? own : 0;
};

const gaugeResidual = (
  fit: PlaneFit,
  residuals: readonly number[],
  gauge: number,
  deviation: Strain,
): GaugeResidual => {
  const residual = strain(residuals[gauge] ?? NaN);
  const own = freedomOf(fit, gauge);
  if (own === 0) return { residual, studentized: null, externallyStudentized: null, error: null };
  const total = squares(residuals);
  const rest = total - residual ** 2 / own;
  const isSpread = fit.freedom > 1 && rest > UNCHECKED * total;
  return {
    residual,
    studentized: residual / (deviation * Math.sqrt(own)),
    externallyStudentized: isSpread ? residual / Math.sqrt((rest / (fit.freedom - 1)) * own) : null,
    error: strain(residual / own),
  };
};

const agrees = (fit: PlaneFit, strains: readonly number[], deviation: Strain): boolean => {
  const residuals = residualsOf(fit, strains);
  return residuals.every((residual, gauge) => {
    const own = freedomOf(fit, gauge);
    return own === 0 || Math.abs(residual) <= CRITICAL * deviation * Math.sqrt(own);
  });
};

const verdictOf = (
  { fit, without }: SectionWatch,
  strains: readonly number[],
  deviation: Strain,
): SectionVerdict => {
  if (fit.freedom === 0) return { kind: 'unchecked' };
  if (agrees(fit, strains, deviation)) return { kind: 'agree' };
  const suspects = without.flatMap((rest, gauge) => {
    const others = strains.filter((_, j) => j !== gauge);
    return rest !== null && agrees(rest, others, deviation) ? [gauge] : [];
  });
  const [only, ...more] = suspects;
  return only !== undefined && more.length === 0
    ? { kind: 'one', gauge: only }
    : { kind: 'undecided', suspects };
};

const warpingShareOf = (fit: PlaneFit, residuals: readonly number[]): number | null => {
  const warping = fit.points.map(({ y, z }) => y * z);
  const pattern = residualsOf(fit, warping);
  const [own, total] = [squares(pattern), squares(residuals)];
  if (!(own > UNCHECKED * squares(warping)) || !(total > 0)) return null;
  return weighted(pattern, residuals) ** 2 / (own * total);
};

/**
 * Which gauge of a section is not to be believed, if the strains can tell. `strains` by gauge in
 * m/m, all finite; `deviation` > 0 is the standard uncertainty of one gauge's strain, gauge factor
 * and noise in it. With four gauges every studentized residual is of one size, for they leave one
 * degree of freedom: that one is wrong, or the section warps, is all that four can say. Source:
 * studentized residuals and leave-one-out, Cook and Weisberg, Residuals and Influence in Regression
 * (1982), ch. 2; test of each by a known deviation, Baarda (1968).
 */
export const judgeSection = (
  watch: SectionWatch,
  strains: readonly number[],
  deviation: Strain,
): SectionJudgement => {
  const { fit } = watch;
  const residuals = residualsOf(fit, strains);
  return {
    verdict: verdictOf(watch, strains, deviation),
    gauges: residuals.map((_, gauge) => gaugeResidual(fit, residuals, gauge, deviation)),
    deviation: fit.freedom > 0 ? strain(residualDeviation(fit, residuals)) : null,
    warpingShare: fit.freedom > 0 ? warpingShareOf(fit, residuals) : null,
  };
};

/** How much better the best explanation must be than the next. */
const CLEARLY = 2;

/**
 * Of several suspects the one that something else speaks against: `expected` is what each gauge
 * should show, m/m, by calculation or by what it showed under this load before. For each suspect
 * the others are believed and its own strain is put on their plane; the suspect is named whose
 * correction brings the section at least twice as near to what is expected as any other's. null
 * where none does. Common practice, no source.
 */
export const mostSuspect = (
  { gauges }: SectionJudgement,
  suspects: readonly number[],
  strains: readonly number[],
  expected: readonly number[],
): number | null => {
  const distances = suspects.map((gauge) => {
    const error = gauges[gauge]?.error ?? NaN;
    const off = strains.map((shown, i) => shown - (i === gauge ? error : 0) - (expected[i] ?? NaN));
    return { gauge, distance: Math.sqrt(squares(off)) };
  });
  const [best, next] = distances.sort((a, b) => a.distance - b.distance);
  if (best === undefined || next === undefined) return best?.gauge ?? null;
  return next.distance >= CLEARLY * best.distance && next.distance > 0 ? best.gauge : null;
};
