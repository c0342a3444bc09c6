import type { Estimate } from '../numerics/estimate.ts';
import { combinedUncertainty, effectiveDof } from '../numerics/welch-satterthwaite.ts';
import { type Fitted, uncertaintyOf } from './parameter-covariance.ts';

/** Value and standard uncertainty of a function of the parameters: derivatives over half a standard uncertainty to either side. */
export function derived(fit: Fitted, dof: number, f: (p: Float64Array) => number): Estimate {
  const { parameters, covariance } = fit;
  const n = parameters.length;
  const gradient = parameters.map((value, k) => {
    const u = uncertaintyOf(fit, k);
    if (u === 0) return 0;
    const moved = parameters.slice();
    moved[k] = value + u / 2;
    const high = f(moved);
    moved[k] = value - u / 2;
    return (high - f(moved)) / u;
  });
  let variance = 0;
  for (let a = 0; a < n; a++)
    for (let b = 0; b < n; b++) variance += gradient[a]! * covariance[a * n + b]! * gradient[b]!;
  return { value: f(parameters), u: Math.sqrt(Math.max(0, variance)), dof };
}

/** Adds relative uncertainties that the fit doesn't know of, the clock's say, each taken as exactly known. */
export function withRelative(estimate: Estimate, ...relative: readonly number[]): Estimate {
  const others = { u: Math.abs(estimate.value) * Math.hypot(...relative), dof: Number.POSITIVE_INFINITY };
  return {
    value: estimate.value,
    u: combinedUncertainty([estimate, others]),
    dof: effectiveDof([estimate, others]),
  };
}
