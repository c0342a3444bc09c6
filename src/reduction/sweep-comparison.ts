import { studentProbability } from '../numerics/distributions.ts';
import type { ScaledCandidate } from './candidates.ts';
import type { RepeatedCurrent, SweepComparison } from './reduction.ts';
import { at } from './sweep-model.ts';
import type { UsablePoint } from './used-points.ts';

/**
 * Compares rising with falling steps by the weighted means of their residuals of f0²: a drift of the field, a magnet that loses
 * moment or iron that is magnetised leaves a difference. Null where one of them is missing.
 */
export function compareSweeps(
  points: readonly UsablePoint[],
  { data, fit }: ScaledCandidate,
  coil_T_per_A: number | null,
): SweepComparison | null {
  const side = (sweep: 'rising' | 'falling') => {
    let weight = 0;
    let sum = 0;
    let count = 0;
    points.forEach((point, i) => {
      if (point.sweep !== sweep) return;
      const u =
        fit.residual[i]! / fit.standardised[i]! ||
        Math.hypot(data.u_y[i]!, fit.parameters[at.slope]! * data.u_current_A[i]!);
      weight += 1 / (u * u);
      sum += fit.residual[i]! / (u * u);
      count++;
    });
    return { mean: sum / weight, variance: 1 / weight, count };
  };
  const rising = side('rising');
  const falling = side('falling');
  if (rising.count === 0 || falling.count === 0) return null;
  const difference = falling.mean - rising.mean;
  const u = Math.sqrt(rising.variance + falling.variance);
  const slope = fit.parameters[at.slope]!;
  return {
    rising: rising.count,
    falling: falling.count,
    difference_Hz2: difference,
    u_difference_Hz2: u,
    difference_T: coil_T_per_A === null ? null : (difference / slope) * coil_T_per_A,
    p_value: 2 * studentProbability(-Math.abs(difference / u), Number.POSITIVE_INFINITY),
  };
}

/** Currents at which several used points were taken, with the scatter of f0² there. */
export function repeatedCurrents({ data, fit }: ScaledCandidate): RepeatedCurrent[] {
  const groups = new Map<number, number[]>();
  data.current_A.forEach((current, i) => {
    groups.set(current, [...(groups.get(current) ?? []), i]);
  });
  return [...groups]
    .filter(([, members]) => members.length > 1)
    .map(([current_A, members]) => {
      const y = members.map((i) => data.y[i]!);
      const mean = y.reduce((sum, value) => sum + value, 0) / y.length;
      const scatter = Math.sqrt(y.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (y.length - 1));
      const slope = fit.parameters[at.slope]!;
      const variance = members.reduce((sum, i) => sum + data.u_y[i]! ** 2 + (slope * data.u_current_A[i]!) ** 2, 0);
      return {
        current_A,
        ids: members.map((i) => data.ids[i]!),
        mean_f0_squared_Hz2: mean,
        scatter_Hz2: scatter,
        scatter_over_u: scatter / Math.sqrt(variance / members.length),
      };
    });
}
