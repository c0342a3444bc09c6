import type { ScaledCandidate } from './candidates.ts';
import type { ResultName } from './reduction.ts';
import { type ResultValues, resultNames, results } from './results.ts';
import type { Source, SourceContext } from './sources.ts';

/** What a misalignment, or another way of the fibre to follow the bar, would change: each scenario's difference with its probability. */
export function scenarioSources(context: SourceContext, values: ResultValues): Source[] {
  const scenarios = context.candidate?.scenarios ?? [];
  return scenarios.map(({ fit, weight }) =>
    alternative('misalignment, not seen', context, values, fit.parameters, weight),
  );
}

/**
 * Other models that explain the same data nearly as well: what the results would be with them, at their Akaike weight. About
 * the chosen model's values the root mean square of the difference is its size times the root of the weight.
 */
export function rivalSources(
  context: SourceContext,
  values: ResultValues,
  rivals: readonly ScaledCandidate[],
): Source[] {
  const { candidate } = context;
  if (candidate === null) return [];
  const weights = rivals.map((rival) => Math.exp(-(rival.criterion - candidate.criterion) / 2));
  const total = 1 + weights.reduce((sum, weight) => sum + weight, 0);
  return rivals.flatMap((rival, i) => {
    const weight = weights[i]! / total;
    if (weight < 1e-4) return [];
    return [alternative('choice of model', context, values, rival.fit.parameters, weight)];
  });
}

function alternative(
  row: string,
  { inputs }: SourceContext,
  values: ResultValues,
  parameters: Float64Array,
  weight: number,
): Source {
  const others = results({ ...inputs, parameters });
  const sensitivity: { [name in ResultName]?: number } = {};
  for (const name of resultNames) {
    const [here, there] = [values[name], others[name]];
    if (here !== null && there !== null && here !== there) sensitivity[name] = there - here;
  }
  const dof = Number.POSITIVE_INFINITY;
  return { row, value: null, u: Math.sqrt(weight), unit: '1', dof, pool: null, law: 'either', sensitivity };
}
