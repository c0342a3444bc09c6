import type { LeastSquaresFit, Prior } from '../numerics/least-squares.ts';
import { combinationCovariance, type ResidualNoise } from './residual-noise.ts';

/**
 * Covariance of a fit's parameters where the residuals are correlated: C (J' R J + level² P) C, with C the fit's inverse of
 * J'J + level P, R the covariance of the residuals, P the priors' weights. Rows and columns of held parameters are zero.
 */
export function parameterCovariance(
  fit: LeastSquaresFit,
  noise: ResidualNoise,
  priors: readonly Prior[],
  level: number,
): Float64Array {
  const size = fit.parameters.length;
  const inverse = fit.covariance!;
  const rows = noise.slot.length;
  const weights = Array.from({ length: size }, (_, k) => {
    const column = new Float64Array(rows);
    for (let j = 0; j < size; j++) {
      const c = inverse[k * size + j]!;
      if (c !== 0) for (let i = 0; i < rows; i++) column[i] = column[i]! + c * fit.jacobian[j]![i]!;
    }
    return column;
  });
  const covariance = combinationCovariance(noise, weights);
  for (const { parameter, u } of priors) {
    const weight = (level / u) ** 2;
    for (let a = 0; a < size; a++) {
      for (let b = 0; b < size; b++) {
        const at = a * size + b;
        covariance[at] = covariance[at]! + weight * inverse[a * size + parameter]! * inverse[b * size + parameter]!;
      }
    }
  }
  return covariance;
}

/** Fitted parameters with their covariance, row by row. */
export interface Fitted {
  readonly parameters: Float64Array;
  readonly covariance: Float64Array;
}

/** Standard uncertainty of parameter `k` of a fit. */
export function uncertaintyOf(fit: Fitted, k: number): number {
  return Math.sqrt(Math.max(0, fit.covariance[k * fit.parameters.length + k]!));
}

/** What the data alone say of a parameter that has a prior: the prior's pull taken out of the estimate; null where they say nothing. */
export function withoutPrior(fit: Fitted, prior: Prior): { value: number; u: number } | null {
  const u = uncertaintyOf(fit, prior.parameter);
  if (!(u > 0)) return null;
  const information = 1 / (u * u) - 1 / (prior.u * prior.u);
  if (!(information > 1e-3 / (prior.u * prior.u))) return null;
  const pulled = fit.parameters[prior.parameter]! / (u * u) - prior.value / (prior.u * prior.u);
  return { value: pulled / information, u: 1 / Math.sqrt(information) };
}
