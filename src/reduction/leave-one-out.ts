import type { ScaledCandidate } from './candidates.ts';
import { without } from './observations.ts';
import type { LeaveOneOut, ResultName } from './reduction.ts';
import { type ResultInputs, type ResultValues, results } from './results.ts';
import { fitSweep } from './sweep-fit.ts';

const watched = [
  'ambient_T',
  'moment_to_inertia',
  'fibre_stiffness_N_m_per_rad',
] as const satisfies readonly ResultName[];

/**
 * Fits the chosen model again without each point in turn. `u` gives the standard uncertainties of the results with all points.
 * Points without which nothing can be fitted have null changes.
 */
export function leaveOneOut(
  candidate: ScaledCandidate,
  inputs: ResultInputs,
  all: ResultValues,
  u: (name: ResultName) => number,
): LeaveOneOut[] {
  const { data, fit } = candidate;
  return data.ids.map((id, i) => {
    const { signs } = fit.model;
    const model = { ...fit.model, signs: signs === null ? null : signs.filter((_, k) => k !== i) };
    const rest = without(data, i);
    const again = new Set(rest.current_A).size < 2 ? null : fitSweep(rest, model, fit.parameters);
    const values = again === null ? null : results({ ...inputs, parameters: again.parameters });
    const changes = watched.map((name) => {
      const [before, after] = [all[name], values?.[name] ?? null];
      return before === null || after === null ? null : after - before;
    });
    const relative = changes.flatMap((change, k) => (change === null ? [] : [Math.abs(change) / u(watched[k]!)]));
    return {
      id,
      ambient_change_T: changes[0]!,
      moment_to_inertia_change: changes[1]!,
      fibre_stiffness_change_N_m_per_rad: changes[2]!,
      largest_change_in_u: relative.length === 0 ? null : Math.max(...relative.filter(Number.isFinite), 0),
    };
  });
}
