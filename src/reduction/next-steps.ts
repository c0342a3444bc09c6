import { quantile } from '../numerics/statistics.ts';
import { blankRest, type Turn } from './bar-on-fibre.ts';
import type { Reduction, ResultName } from './reduction.ts';
import { type ResultInputs, results } from './results.ts';
import { at, predict, type SweepModel } from './sweep-model.ts';

/** The results that a further step can tighten. */
export type Tightened = 'ambient_T' | 'moment_to_inertia' | 'fibre_stiffness_N_m_per_rad';

/** What one more step at a current would leave of the uncertainties (1: nothing gained). */
export interface NextStep {
  readonly current_A: number;
  /** u of the result with that step over u without, everything else in the budget included. */
  readonly remaining: { readonly [name in Tightened]: number | null };
}

/** Candidate steps in the order of their currents, and the best of them for each result. */
export interface NextSteps {
  readonly steps: readonly NextStep[];
  readonly best: { readonly [name in Tightened]: NextStep | null };
}

/** What the further steps are taken to be like; what is left out is that of the steps so far (median). */
export interface NextStepOptions {
  /** Currents that could be set, A (default: an even grid over the range so far and its mirror image). */
  readonly currents_A?: readonly number[] | undefined;
  readonly u_f0_relative?: number | undefined;
  readonly u_current_A?: number | undefined;
}

const tightened = ['ambient_T', 'moment_to_inertia', 'fibre_stiffness_N_m_per_rad'] as const;

/**
 * Which current to film next: for each candidate the fit's covariance with one more frequency there (the linear update
 * C - C j j' C / (j' C j + u²), that is a c-optimal next point for each result; Atkinson, Donev and Tobias, Optimum
 * Experimental Designs, 2007, chapter 10, from memory). Null without a fit.
 */
export function nextSteps(reduction: Reduction, options: NextStepOptions = {}): NextSteps | null {
  const { model, fit } = reduction;
  const used = reduction.points.filter((point) => point.used);
  if (model === null || fit === null || used.length === 0) return null;
  const { parameters, covariance } = unpack(reduction);
  const u_relative =
    options.u_f0_relative ??
    quantile(
      used.map((point) => point.u_f0_squared_Hz2 / (2 * point.f0_squared_Hz2)),
      0.5,
    );
  const u_current =
    options.u_current_A ??
    quantile(
      used.map((point) => point.u_current_A),
      0.5,
    );
  const turn: Turn = model.turn === 'one side' ? 'with the field' : model.turn;
  const shape: SweepModel = {
    turn: model.fibre === 'assumed' && model.turn === 'one side' ? 'set back' : turn,
    signs: null,
    directions: false,
    fixed: { across: false, fibre: false, twist: false },
    priors: [],
  };
  const rest = blankRest();
  const steps = (options.currents_A ?? grid(used.map((point) => point.current_A))).flatMap((current_A) => {
    if (!predict(shape, parameters, 0, current_A, rest)) return [];
    const own = Math.hypot(2 * rest.y * u_relative, rest.dy[0]! * u_current) * fit.scale_frequencies;
    const after = updated(covariance, rest.dy.subarray(1), own ** 2);
    const remaining = Object.fromEntries(
      tightened.map((name) => [name, left(reduction, name, parameters, covariance, after)]),
    ) as NextStep['remaining'];
    return [{ current_A, remaining }];
  });
  const best = Object.fromEntries(
    tightened.map((name) => [
      name,
      steps.reduce<NextStep | null>((least, step) => {
        const value = step.remaining[name];
        return value !== null && value < (least?.remaining[name] ?? 1) ? step : least;
      }, null),
    ]),
  ) as NextSteps['best'];
  return { steps, best };
}

/** Even steps over the currents so far and their mirror images. */
function grid(currents: readonly number[]): number[] {
  const reach = Math.max(...currents.map(Math.abs));
  return Array.from({ length: 81 }, (_, i) => (reach * (i - 40)) / 40);
}

/** Physical parameters and their covariance out of a reduction. */
function unpack({ fit }: Reduction): { parameters: Float64Array; covariance: Float64Array } {
  const parameters = new Float64Array(at.zeros);
  const covariance = new Float64Array(at.zeros ** 2);
  const rows = fit?.parameters ?? [];
  rows.forEach((row, i) => {
    const k = row.place;
    if (k >= at.zeros) return;
    parameters[k] = row.value;
    rows.forEach((other, j) => {
      if (other.place < at.zeros) covariance[k * at.zeros + other.place] = fit!.correlation[i]![j]! * row.u * other.u;
    });
  });
  return { parameters, covariance };
}

function updated(covariance: Float64Array, row: Float64Array, variance: number): Float64Array {
  const n = at.zeros;
  const moved = new Float64Array(n);
  for (let k = 0; k < n; k++) for (let l = 0; l < n; l++) moved[k] = moved[k]! + covariance[k * n + l]! * row[l]!;
  const total = row.reduce((sum, value, k) => sum + value * moved[k]!, 0) + variance;
  return covariance.map((value, i) => value - (moved[Math.floor(i / n)]! * moved[i % n]!) / total);
}

/** Share of a result's uncertainty that is left, with what does not come from the fit unchanged. */
function left(
  reduction: Reduction,
  name: Tightened,
  parameters: Float64Array,
  before: Float64Array,
  after: Float64Array,
): number | null {
  const inputs: ResultInputs = {
    parameters,
    side: 1,
    horizontal: reduction.model?.kind === 'turning',
    fibre: true,
    coil_T_per_A: reduction.coil_constant_T_per_A,
    felt_T_per_A: reduction.coil_constant_T_per_A,
    inertia_kg_m2: reduction.inertia_kg_m2,
  };
  const gradient = Array.from({ length: at.zeros }, (_, k) => derivative(inputs, parameters, k, name));
  if (gradient.some((value) => value === null)) return null;
  const variance = (covariance: Float64Array) => {
    let sum = 0;
    for (let k = 0; k < at.zeros; k++) {
      for (let l = 0; l < at.zeros; l++) sum += gradient[k]! * covariance[k * at.zeros + l]! * gradient[l]!;
    }
    return Math.max(sum, 0);
  };
  const [fitBefore, fitAfter] = [variance(before), variance(after)];
  const stated = reduction[`u_${name}` satisfies keyof Reduction & `u_${ResultName}`];
  const rest = Math.max((stated ?? 0) ** 2 - fitBefore, 0);
  return fitBefore + rest > 0 ? Math.sqrt((fitAfter + rest) / (fitBefore + rest)) : null;
}

function derivative(inputs: ResultInputs, parameters: Float64Array, k: number, name: Tightened): number | null {
  const step = 1e-6 * (Math.abs(parameters[k]!) || 1e-3);
  const at_ = (shift: number) =>
    results({ ...inputs, parameters: parameters.map((v, i) => (i === k ? v + shift : v)) })[name];
  const [above, below] = [at_(step), at_(-step)];
  return above === null || below === null ? null : (above - below) / (2 * step);
}
