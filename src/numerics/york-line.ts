/** A straight line y = intercept + slope x through points with standard uncertainties in both coordinates. */
export interface YorkLine {
  readonly slope: number;
  readonly intercept: number;
  /**
   * Standard uncertainties by the expressions of York et al. 2004 (taken at the adjusted points, not scaled by the
   * scatter). Other published conventions differ by a few per cent on scattered data: the observed-point form of York
   * 1968, and either of them multiplied by sqrt(chiSquare / dof).
   */
  readonly u_slope: number;
  readonly u_intercept: number;
  /** Covariance of slope and intercept in the same convention. */
  readonly covariance: number;
  /** Sum of squared weighted residuals; expected about `dof` where the uncertainties are right. */
  readonly chiSquare: number;
  /** Points less two. */
  readonly dof: number;
  /** Weight of each point: 1 / (u_y² + slope² u_x²). */
  readonly weight: Float64Array;
}

/**
 * Best straight line with uncorrelated uncertainties in x and y: York, Evensen, López Martínez and De Basabe Delgado,
 * Unified equations for the slope, intercept, and standard errors of the best straight line, Am. J. Phys. 72 (2004)
 * 367, equations 13. Columns are of equal length. Every point needs an uncertainty above 0 in at least one coordinate
 * (RangeError otherwise). Null for fewer than two distinct x, or where the slope does not settle.
 */
export function yorkLine(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  u_x: ArrayLike<number>,
  u_y: ArrayLike<number>,
): YorkLine | null {
  const n = x.length;
  for (let i = 0; i < n; i++) {
    if (!(u_x[i]! > 0 || u_y[i]! > 0)) {
      throw new RangeError(
        `yorkLine: expected an uncertainty above 0 in x or y of point ${i}, got ${u_x[i]} and ${u_y[i]}`,
      );
    }
  }
  let slope = startSlope(x, y);
  if (slope === null) return null;
  const weight = new Float64Array(n);
  const beta = new Float64Array(n);
  let xMean = 0;
  let yMean = 0;
  for (let turn = 0; turn < 500; turn++) {
    let sum = 0;
    xMean = 0;
    yMean = 0;
    for (let i = 0; i < n; i++) {
      weight[i] = 1 / (u_y[i]! ** 2 + slope ** 2 * u_x[i]! ** 2);
      sum += weight[i]!;
      xMean += weight[i]! * x[i]!;
      yMean += weight[i]! * y[i]!;
    }
    xMean /= sum;
    yMean /= sum;
    let top = 0;
    let bottom = 0;
    for (let i = 0; i < n; i++) {
      const dx = x[i]! - xMean;
      const dy = y[i]! - yMean;
      beta[i] = weight[i]! * (dx * u_y[i]! ** 2 + slope * dy * u_x[i]! ** 2);
      top += weight[i]! * beta[i]! * dy;
      bottom += weight[i]! * beta[i]! * dx;
    }
    const next: number = top / bottom;
    if (!Number.isFinite(next)) return null;
    const settled = Math.abs(next - slope) <= 1e-15 * Math.abs(next);
    slope = next;
    if (settled) break;
  }
  return finish(x, y, slope, xMean, yMean, weight, beta);
}

function finish(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  slope: number,
  xMean: number,
  yMean: number,
  weight: Float64Array,
  beta: Float64Array,
): YorkLine {
  const n = weight.length;
  const intercept = yMean - slope * xMean;
  let sum = 0;
  let adjustedMean = 0;
  let chiSquare = 0;
  for (let i = 0; i < n; i++) {
    sum += weight[i]!;
    adjustedMean += weight[i]! * (xMean + beta[i]!);
    chiSquare += weight[i]! * (y[i]! - slope * x[i]! - intercept) ** 2;
  }
  adjustedMean /= sum;
  let spread = 0;
  for (let i = 0; i < n; i++) spread += weight[i]! * (xMean + beta[i]! - adjustedMean) ** 2;
  const variance = 1 / spread;
  return {
    slope,
    intercept,
    u_slope: Math.sqrt(variance),
    u_intercept: Math.sqrt(1 / sum + adjustedMean ** 2 * variance),
    covariance: -adjustedMean * variance,
    chiSquare,
    dof: n - 2,
    weight,
  };
}

/** Slope of the ordinary least-squares line; null for fewer than two distinct x. */
function startSlope(x: ArrayLike<number>, y: ArrayLike<number>): number | null {
  const n = x.length;
  let xMean = 0;
  let yMean = 0;
  for (let i = 0; i < n; i++) {
    xMean += x[i]! / n;
    yMean += y[i]! / n;
  }
  let top = 0;
  let bottom = 0;
  for (let i = 0; i < n; i++) {
    top += (x[i]! - xMean) * (y[i]! - yMean);
    bottom += (x[i]! - xMean) ** 2;
  }
  return bottom > 0 ? top / bottom : null;
}
