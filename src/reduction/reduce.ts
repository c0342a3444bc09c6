import { chiSquareProbability } from '../numerics/distributions.ts';
import type { Check } from '../oscillation/ring-down.ts';
import { budgetOf, correlationOf, uncertaintyOf } from './budget.ts';
import type { ScaledCandidate } from './candidates.ts';
import { checksOf } from './checks.ts';
import { chooseModel, type ModelChoice, rivals } from './choose-model.ts';
import { coilConstant } from './coil-constant.ts';
import { curveOf } from './curve.ts';
import { expectedField, u_modelHorizontal_T } from './expected-field.ts';
import { knownFrom } from './fibre-sentences.ts';
import { fibreFindings, fibreSegments } from './fibre-sources.ts';
import { fittedPoints } from './fitted-points.ts';
import { inertia as inertiaOf } from './inertia.ts';
import { leaveOneOut } from './leave-one-out.ts';
import { rivalSources, scenarioSources } from './model-sources.ts';
import { modelOf } from './model-summary.ts';
import { monteCarlo } from './monte-carlo.ts';
import { observe } from './observations.ts';
import type {
  Budget,
  FibreOrigin,
  FibreSource,
  FitSummary,
  Reduction,
  ReductionInput,
  ResultName,
} from './reduction.ts';
import { type ResultInputs, type ResultValues, resultNames, results } from './results.ts';
import { noModelField } from './sentences.ts';
import { type Source, type SourceContext, sources } from './sources.ts';
import { compareSweeps, repeatedCurrents } from './sweep-comparison.ts';
import { at } from './sweep-model.ts';
import { distinctCurrents, selectPoints } from './used-points.ts';

/**
 * From frequencies and currents to field, moment and stiffness, with a budget. What can't be had is null, with a sentence in
 * `checks`; nothing that a user can meet throws.
 */
export function reduce(input: ReductionInput): Reduction {
  const { apparatus, place } = input;
  const selection = selectPoints(input.points, fibreSegments(apparatus));
  const data = observe(selection.used, apparatus?.meter);
  const coil = apparatus?.coil === undefined ? null : coilConstant(apparatus.coil, apparatus.magnet);
  const inertia = apparatus?.magnet === undefined ? null : inertiaOf(apparatus.magnet);
  const fibre = fibreFindings(apparatus, input.points, inertia);
  const choice = distinctCurrents(selection.used) < 2 ? null : chooseModel(data, fibre.part);
  const candidate = choice?.chosen ?? null;
  const context: SourceContext = {
    inputs: resultInputs(candidate, coil?.value ?? null, inertia?.value ?? null),
    candidate,
    coil,
    inertia,
    meter: apparatus?.meter,
    fibre: fibre.part,
  };
  const values = results(context.inputs);
  const from = [
    ...sources(context),
    ...scenarioSources(context, values),
    ...rivalSources(context, values, choice === null ? [] : rivals(choice)),
  ];
  const u = (name: ResultName) => uncertaintyOf(name, from);
  const expected = place === undefined ? null : expectedField(place);
  const expectedChecks: Check[] =
    expected !== null && !expected.ok ? [noModelField(expected.reason, place?.date ?? '')] : [];
  const details = {
    fibre_sources: fibre.sources,
    fibre_lengths: fibre.lengths,
    points: fittedPoints(input.points, data, candidate, apparatus?.meter),
    leave_one_out: candidate === null ? [] : leaveOneOut(candidate, context.inputs, values, u),
    sweeps: candidate === null ? null : compareSweeps(selection.used, candidate, coil?.value ?? null),
    repeats: candidate === null ? [] : repeatedCurrents(candidate),
    model: choice === null ? null : modelOf(choice, knownFrom(usedOrigins(fibre.sources))),
    expected_field:
      expected?.ok !== true
        ? null
        : {
            ...expected.field,
            u_horizontal_T: u_modelHorizontal_T,
            measured_less_expected_share:
              values.ambient_T === null ? null : values.ambient_T / expected.field.horizontal_T - 1,
          },
  };
  return {
    ...withUncertainties(values, from),
    points_used: candidate === null ? [] : selection.used.map(({ id }) => id),
    points_left_out: selection.leftOut,
    checks: [
      ...checksOf({ selection, data, choice, context, values, sources: from, ...details }),
      ...fibre.checks,
      ...expectedChecks,
    ],
    fit: candidate === null ? null : fitSummary(candidate, choice),
    ...details,
    budget: budgets(values, from),
    correlation: correlationOf(values, from),
    monte_carlo:
      (input.monteCarloDraws ?? 0) > 0 && (candidate !== null || coil !== null || inertia !== null)
        ? monteCarlo(context, Math.floor(input.monteCarloDraws ?? 0), input.seed ?? 1, u)
        : null,
    curve: candidate === null ? null : curveOf(candidate),
  };
}

/** Where the stiffness that was used is known from. */
function usedOrigins(sources: readonly FibreSource[]): FibreOrigin[] {
  return sources.filter(({ weight }) => weight > 0).map(({ origin }) => origin);
}

function resultInputs(candidate: ScaledCandidate | null, coil: number | null, inertia: number | null): ResultInputs {
  const signs = candidate?.fit.model.signs ?? null;
  return {
    parameters: candidate?.fit.parameters ?? null,
    side: signs?.every((sign) => sign < 0) === true ? -1 : 1,
    horizontal: candidate?.proposal.kind === 'turning',
    fibre: candidate !== null && candidate.fibre !== 'assumed',
    coil_T_per_A: coil,
    felt_T_per_A: coil,
    inertia_kg_m2: inertia,
  };
}

function withUncertainties(values: ResultValues, from: readonly Source[]) {
  const u = Object.fromEntries(
    resultNames.map((name) => [`u_${name}`, values[name] === null ? null : uncertaintyOf(name, from)]),
  ) as { [name in ResultName as `u_${name}`]: number | null };
  return { ...values, ...u };
}

function budgets(values: ResultValues, from: readonly Source[]): { [name in ResultName]?: Budget } {
  const out: { [name in ResultName]?: Budget } = {};
  for (const name of resultNames) {
    const value = values[name];
    if (value !== null) out[name] = budgetOf(name, value, from);
  }
  return out;
}

function fitSummary(candidate: ScaledCandidate, choice: ModelChoice | null): FitSummary {
  const { fit } = candidate;
  const p = fit.parameters;
  const named: readonly (readonly [number, string, string])[] = [
    [at.slope, 'slope', 'Hz²/A'],
    [at.along, 'ambient field along the axis over the coil constant', 'A'],
    ...(fit.model.fixed.across
      ? []
      : [[at.across, 'ambient field across the axis over the coil constant', 'A'] as const]),
    [at.fibre, 'fibre’s part of f0²', 'Hz²'],
    ...(fit.model.fixed.twist
      ? []
      : [[at.twist, 'fibre’s untwisted direction from the ambient field', 'rad'] as const]),
    ...(choice !== null && fit.model.directions
      ? candidate.data.frames.map(
          (frame, k) => [at.zeros + k, `direction of the coil axis in ${frame}`, 'rad'] as const,
        )
      : []),
  ];
  const covariance = (a: number, b: number) => fit.covariance[a * p.length + b]!;
  return {
    chi_square: candidate.statedChiSquare,
    dof: fit.dof,
    p_value: fit.dof > 0 ? 1 - chiSquareProbability(candidate.statedChiSquare, fit.dof) : null,
    scale_frequencies: candidate.scaleFrequencies,
    scale_directions: candidate.scaleDirections,
    parameters: named.map(([k, name, unit]) => ({
      place: k,
      name,
      unit,
      value: p[k]!,
      u: Math.sqrt(covariance(k, k)),
    })),
    correlation: named.map(([a]) =>
      named.map(([b]) => (a === b ? 1 : covariance(a, b) / Math.sqrt(covariance(a, a) * covariance(b, b)))),
    ),
  };
}
