import { linearLeastSquares } from '../numerics/linear-least-squares.ts';
import type { Observations } from './observations.ts';

/** One way of sharing the points out to the two sides of the reversal, with the plain lines it gives. */
export interface BranchSplit {
  /** +1 where coil and ambient field together point along a positive current's field, -1 on the other side. */
  readonly signs: Int8Array;
  /** The reversal was taken to lie here, between two currents; null: all points on one side. */
  readonly reversal_A: number | null;
  readonly slope: number;
  readonly along_A: number;
  /** The fibre's part of f0²; 0 where all points lie on one side, since it can't be told from the field then. */
  readonly fibre_Hz2: number;
  /** Sum of squared residuals over their uncertainties. */
  readonly chiSquare: number;
}

/**
 * All ways in which the currents can lie about the reversal, with lines f0² = slope · |I + along| + fibre fitted by weighted
 * least squares; best first. Those whose lines contradict themselves (a falling f0² on the far side, a reversal well outside the
 * gap it was put in) are left out.
 */
export function branchSplits(data: Observations): BranchSplit[] {
  const currents = [...new Set(data.current_A)].sort((a, b) => a - b);
  const splits: BranchSplit[] = [];
  for (let below = 0; below <= currents.length; below++) {
    const first = currents[below];
    const last = currents[below - 1];
    const signs = Int8Array.from(data.current_A, (current) => (first !== undefined && current >= first ? 1 : -1));
    const split = fitSplit(data, signs, first !== undefined && last !== undefined ? (first + last) / 2 : null);
    if (split === null || !isConsistent(split, last ?? null, first ?? null)) continue;
    const fewest = Math.min(below, currents.length - below);
    if (isPlausible(fewest, split.fibre_Hz2 / (split.slope * Math.abs(split.along_A)))) splits.push(split);
  }
  return splits.sort((a, b) => a.chiSquare - b.chiSquare);
}

/**
 * Whether points on both sides of a reversal are to be believed: a single current on one of them can always be explained by a
 * stiff enough fibre, so that it counts only where the fibre's share stays below a half. `fewest`: number of different currents on
 * the side that has fewer.
 */
export function isPlausible(fewest: number, fibreShare: number): boolean {
  return fewest !== 1 || fibreShare < 0.5;
}

function fitSplit(data: Observations, signs: Int8Array, reversal_A: number | null): BranchSplit | null {
  const slopeColumn = data.current_A.map((current, i) => current * signs[i]!);
  const columns = [slopeColumn, Float64Array.from(signs)];
  if (reversal_A !== null) columns.push(new Float64Array(signs.length).fill(1));
  if (columns.length > signs.length) return null;
  let u = data.u_y;
  let fit = linearLeastSquares(columns, data.y, u);
  // Twice: the weights depend on the slope through the current's uncertainty.
  for (let turn = 0; turn < 2 && fit !== null; turn++) {
    const slope = fit.parameters[0]!;
    u = data.u_y.map((own, i) => Math.hypot(own, slope * data.u_current_A[i]!));
    fit = linearLeastSquares(columns, data.y, u);
  }
  if (fit === null) return null;
  const slope = fit.parameters[0]!;
  return {
    signs,
    reversal_A,
    slope,
    along_A: fit.parameters[1]! / slope,
    fibre_Hz2: fit.parameters[2] ?? 0,
    chiSquare: fit.sumOfSquares,
  };
}

/** The slope rises away from the reversal, which lies in its gap or, since it is not sharp, not far beside it. */
function isConsistent(split: BranchSplit, last: number | null, first: number | null): boolean {
  if (!(split.slope > 0) || !Number.isFinite(split.along_A)) return false;
  const reversal = -split.along_A;
  const room = first !== null && last !== null ? 0.5 * (first - last) : 0;
  if (first !== null && reversal > first + room + (last === null ? Math.abs(first) * 0.05 : 0)) return false;
  return !(last !== null && reversal < last - room - (first === null ? Math.abs(last) * 0.05 : 0));
}
