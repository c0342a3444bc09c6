import type { Estimate } from '../numerics/estimate.ts';
import { linearLeastSquares } from '../numerics/linear-least-squares.ts';
import { yorkLine } from '../numerics/york-line.ts';

/** The same bar at the same place on a fibre of some length. */
export interface FibreRun {
  readonly length_m: number;
  readonly u_length_m: number;
  readonly f0_Hz: { readonly value: number; readonly u: number };
}

/** f0² = magnetic part + slope / length, as fitted. */
export interface FibreLengthLine {
  /** f0² of an endless fibre, that is of the field alone, Hz². */
  readonly magnetic_Hz2: Estimate;
  /** Hz² m. */
  readonly slope_Hz2_m: Estimate;
  /** Covariance of the two. */
  readonly covariance: number;
  /** Standard deviation of f0² about the line, Hz²; null for two lengths. */
  readonly scatter_Hz2: number | null;
}

/**
 * Separates fibre and field by several lengths of one fibre: a fibre's stiffness goes with 1 / length, so that f0² against
 * 1 / length is a line whose intercept is the field's. Without uncertainties (all `u` 0) an ordinary least-squares line with
 * uncertainties from its scatter; else York's line, raised to the scatter where that is larger. Null for fewer than two
 * different lengths, or for two without uncertainties.
 */
export function fibreFromLengths(runs: readonly FibreRun[]): FibreLengthLine | null {
  const x = Float64Array.from(runs, ({ length_m }) => 1 / length_m);
  const y = Float64Array.from(runs, ({ f0_Hz }) => f0_Hz.value ** 2);
  if (new Set(x).size < 2) return null;
  const u_x = Float64Array.from(runs, ({ length_m, u_length_m }) => u_length_m / length_m ** 2);
  const u_y = Float64Array.from(runs, ({ f0_Hz }) => 2 * f0_Hz.value * f0_Hz.u);
  const weighted = u_y.every((u, i) => u > 0 || u_x[i]! > 0);
  const dof = runs.length - 2;
  if (weighted) {
    const line = yorkLine(x, y, u_x, u_y);
    if (line === null) return null;
    const raise = dof > 0 ? Math.max(1, line.chiSquare / dof) : 1;
    const own = raise > 1 ? dof : Number.POSITIVE_INFINITY;
    return {
      magnetic_Hz2: { value: line.intercept, u: line.u_intercept * Math.sqrt(raise), dof: own },
      slope_Hz2_m: { value: line.slope, u: line.u_slope * Math.sqrt(raise), dof: own },
      covariance: line.covariance * raise,
      scatter_Hz2: scatter(x, y, line.intercept, line.slope),
    };
  }
  if (dof < 1) return null;
  const fit = linearLeastSquares([new Float64Array(x.length).fill(1), x], y);
  if (fit === null) return null;
  const variance = fit.sumOfSquares / dof;
  return {
    magnetic_Hz2: { value: fit.parameters[0]!, u: Math.sqrt(fit.cofactor[0]! * variance), dof },
    slope_Hz2_m: { value: fit.parameters[1]!, u: Math.sqrt(fit.cofactor[3]! * variance), dof },
    covariance: fit.cofactor[1]! * variance,
    scatter_Hz2: Math.sqrt(variance),
  };
}

function scatter(x: Float64Array, y: Float64Array, intercept: number, slope: number): number | null {
  if (x.length < 3) return null;
  return Math.sqrt(x.reduce((sum, value, i) => sum + (y[i]! - intercept - slope * value) ** 2, 0) / (x.length - 2));
}
