import { accept, refuse, type Result } from '../../model/frame.ts';
import type { SectionPoint } from './fibre.ts';
import { weighted } from './weighted.ts';

/**
 * The plane ε(y, z) = ε0 + κy·z − κz·y through the strains of gauges at a section, by least squares
 * with equal weights: p = (XᵀX)⁻¹Xᵀε, rows of X [1, z, −y]. Gauges are numbered as their points.
 */
export interface PlaneFit {
  readonly points: readonly SectionPoint[];
  /** By gauge: what a strain of 1 there adds to ε0 (1), κy (1/m), κz (1/m). The pseudo-inverse. */
  readonly rows: readonly [Float64Array, Float64Array, Float64Array];
  /** Row i: what a strain of 1 at each gauge adds to the residual of gauge i; I − X(XᵀX)⁻¹Xᵀ. */
  readonly residualRows: readonly Float64Array[];
  /** Share of each gauge's own strain in its fitted one, 1/n to 1; at 1 it can never be checked. */
  readonly leverage: readonly number[];
  /** n − 3. */
  readonly freedom: number;
}

const UNKNOWNS = 3;
/** Gauges that lie off the best line by less than this share of their spread along it lie on it. */
const ON_A_LINE = 1e-3;

const meanOf = (figures: readonly number[]): number =>
  figures.reduce((sum, figure) => sum + figure, 0) / figures.length;

/** Root of the ratio of the spreads across and along the line that fits best. */
const slenderness = (uu: number, vv: number, uv: number): number => {
  const [half, turn] = [(uu + vv) / 2, Math.hypot((uu - vv) / 2, uv)];
  // The product of both spreads is the determinant: small ones keep their digits.
  return Math.sqrt(Math.max(0, uu * vv - uv * uv)) / (half + turn);
};

/**
 * Refused: fewer than three gauges, a coordinate that is no number, gauges on one line. Solved about
 * the gauges' centre, so that 2 × 2 normal equations keep their digits wherever the centroid lies.
 */
export const fitPlane = (points: readonly SectionPoint[]): Result<PlaneFit> => {
  const n = points.length;
  if (n < UNKNOWNS) {
    return refuse('too-few-gauges', 'gauges', 'three or more gauges at the section', String(n));
  }
  const astray = points.find(({ y, z }) => !Number.isFinite(y) || !Number.isFinite(z));
  if (astray) {
    return refuse('gauge-nowhere', 'gauges', 'y and z as numbers', `y ${astray.y}, z ${astray.z}`);
  }
  const u0 = meanOf(points.map(({ z }) => z));
  const v0 = meanOf(points.map(({ y }) => -y));
  const centred = points.map(({ y, z }) => ({ u: z - u0, v: -y - v0 }));
  const sum = (of: (at: { u: number; v: number }) => number) => n * meanOf(centred.map(of));
  const [uu, vv, uv] = [sum(({ u }) => u * u), sum(({ v }) => v * v), sum(({ u, v }) => u * v)];
  if (!(slenderness(uu, vv, uv) > ON_A_LINE)) {
    return refuse('gauges-on-a-line', 'gauges', 'gauges off one line', `${n} gauges on one line`);
  }
  const determinant = uu * vv - uv * uv;
  const aboutY = Float64Array.from(centred, ({ u, v }) => (vv * u - uv * v) / determinant);
  const aboutZ = Float64Array.from(centred, ({ u, v }) => (uu * v - uv * u) / determinant);
  const along = Float64Array.from(
    centred,
    (_, i) => 1 / n - u0 * (aboutY[i] ?? NaN) - v0 * (aboutZ[i] ?? NaN),
  );
  /** What the strain at gauge j adds to the fitted strain of gauge i. */
  const hat = (i: number, j: number): number => {
    const { u, v } = centred[i] ?? { u: NaN, v: NaN };
    return 1 / n + u * (aboutY[j] ?? NaN) + v * (aboutZ[j] ?? NaN);
  };
  return accept({
    points,
    rows: [along, aboutY, aboutZ],
    residualRows: points.map((_, i) =>
      Float64Array.from(points, (_point, j) => (i === j ? 1 : 0) - hat(i, j)),
    ),
    leverage: points.map((_, i) => hat(i, i)),
    freedom: n - UNKNOWNS,
  });
};

/** Measured less fitted strain of each gauge, m/m. */
export const residualsOf = ({ residualRows }: PlaneFit, strains: ArrayLike<number>): number[] =>
  residualRows.map((row) => weighted(row, strains));

/** √(SSR/(n − 3)), m/m; NaN with three gauges, which fit any plane. */
export const residualDeviation = ({ freedom }: PlaneFit, residuals: readonly number[]): number =>
  freedom > 0 ? Math.sqrt(residuals.reduce((sum, e) => sum + e * e, 0) / freedom) : NaN;

/** Residual deviation sample by sample, m/m, without allocation; as `residualDeviation`. */
export const fillResidualDeviation = (
  { residualRows, freedom }: PlaneFit,
  gauges: readonly Float64Array[],
  out: Float64Array,
): void => {
  for (let i = 0; i < out.length; i++) {
    let squares = 0;
    for (let k = 0; k < residualRows.length; k++) {
      const row = residualRows[k];
      let residual = 0;
      for (let j = 0; j < gauges.length; j++) {
        residual += (row?.[j] ?? NaN) * (gauges[j]?.[i] ?? NaN);
      }
      squares += residual * residual;
    }
    out[i] = freedom > 0 ? Math.sqrt(squares / freedom) : NaN;
  }
};
