import { blankRest, wrappedLine } from './bar-on-fibre.ts';
import type { ScaledCandidate } from './candidates.ts';
import type { Curve } from './reduction.ts';
import { at, predict } from './sweep-model.ts';

const steps = 200;

/**
 * f0² of the fitted model on an even grid that covers all currents and none, with the standard uncertainty that the fit's
 * parameters give it. Where a model has no rest direction (just at the reversal) the grid has a gap.
 */
export function curveOf({ data, fit }: ScaledCandidate): Curve {
  const low = Math.min(0, ...data.current_A);
  const high = Math.max(0, ...data.current_A);
  const margin = 0.04 * (high - low);
  const currents = Array.from({ length: steps + 1 }, (_, i) => low - margin + ((high - low + 2 * margin) * i) / steps);
  const curve = { current_A: [] as number[], f0_squared_Hz2: [] as number[], u_f0_squared_Hz2: [] as number[] };
  const rests: number[] = [];
  const rest = blankRest();
  const p = fit.parameters;
  for (const current of currents) {
    if (!predict(fit.model, p, nearest(data.current_A, current, -p[at.along]!), current, rest)) continue;
    let variance = 0;
    for (let k = 0; k < at.zeros; k++) {
      for (let l = 0; l < at.zeros; l++) {
        variance += rest.dy[k + 1]! * fit.covariance[k * p.length + l]! * rest.dy[l + 1]!;
      }
    }
    curve.current_A.push(current);
    curve.f0_squared_Hz2.push(rest.y);
    curve.u_f0_squared_Hz2.push(Math.sqrt(Math.max(variance, 0)));
    rests.push((wrappedLine(rest.angle) * 180) / Math.PI);
  }
  return { ...curve, rest_from_axis_deg: fit.model.directions ? rests : null };
}

/** Index of the point whose side of the reversal a current is on, for lines with a sign at each point. */
function nearest(currents: Float64Array, current: number, reversal: number): number {
  return Math.max(
    currents.findIndex((other) => other > reversal === current > reversal),
    0,
  );
}
