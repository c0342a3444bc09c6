import { dot, subtract } from '../numerics/dot.ts';
import { type LeastSquaresFit, leastSquares, type Prior } from '../numerics/least-squares.ts';
import { robustDeviation, rootMeanSquare } from '../numerics/statistics.ts';
import { type Basis, orthonormalBasis } from './basis.ts';
import { type Evaluation, evaluateModel, type Model, OMEGA, problemOf } from './model.ts';
import { parameterCovariance } from './parameter-covariance.ts';
import { fitResidualNoise, noiseLevel, type ResidualNoise } from './residual-noise.ts';
import { pick, type Series, sampling } from './series.ts';

/** A model fitted to a series, with what the residuals say about its uncertainty. Its evaluation is at the used samples. */
export interface TwistFit extends Evaluation {
  readonly model: Model;
  /** Covariance of the parameters (zero for held ones), row by row: noise with its correlation, and priors. */
  readonly covariance: Float64Array;
  /** The fit's inverse of J'J and priors for noise of variance `level`, row by row: turns -J'y / level into the change that y added to the data makes. */
  readonly inverse: Float64Array;
  /** 1 for every row of the series that was used, 0 for outliers. */
  readonly used: Uint8Array;
  readonly samples: Series;
  /** What the derivatives by the free parameters span, omega's last. */
  readonly basis: Basis;
  readonly noise: ResidualNoise;
  /** Variance per sample of the noise near the twist's frequency, as if white. */
  readonly level: number;
  /** Sum of squares of the residuals, without priors. */
  readonly sumOfSquares: number;
  readonly converged: boolean;
}

/** Residuals beyond this many robust standard deviations are taken for bad poses. */
const OUTLIER = 5;
/** Rounds of fitting, weighing the noise and leaving out; two or three are usual. */
const MOST_ROUNDS = 6;
/** More outliers than this share are no outliers: the model is wrong, and nothing is left out. */
const MOST_OUTLIERS = 0.15;

/**
 * Fits a model by least squares: first all samples, then without outliers and with the priors weighed against the noise found near
 * the twist's frequency, until both settle. Null where nothing can be evaluated or the columns can't be told apart.
 */
export function fitTwist(series: Series, model: Model, start: Float64Array, previous?: TwistFit): TwistFit | null {
  let used = previous?.used ?? new Uint8Array(series.time_s.length).fill(1);
  let samples = pick(series, used);
  let known: Evaluation | null = previous?.samples.time_s.length === samples.time_s.length ? previous : null;
  let parameters = start;
  let level = previous?.level ?? startLevel(series, model, start);
  const floor = 1e-24 * rootMeanSquare(series.value) ** 2 + 1e-300;
  const { medianInterval_s } = sampling(series);
  for (let round = 0; ; round++) {
    const sigma = Math.sqrt(level);
    const fit = leastSquares(problemOf(model, samples, known), parameters, {
      fixed: model.fixed,
      priors: model.priors.map((prior) => ({ ...prior, u: prior.u / sigma })),
      // The first curve only shows which samples are bad and how large the noise is.
      sumTolerance: round === 0 && previous === undefined ? 1e-4 : 1e-9,
      stepTolerance: 1e-12,
      maxEvaluations: 60,
      damping: 1e-8,
    });
    if (fit.status === 'undefined_start' || fit.covariance === null) return null;
    const { residual } = fit;
    parameters = fit.parameters;
    const deviation = robustDeviation(residual);
    const next = withoutOutliers(series, model, parameters, residual, deviation);
    if (next.some((value, i) => value !== used[i]) && round < MOST_ROUNDS) {
      // What is noise is asked once it is known which samples are.
      used = next;
      samples = pick(series, used);
      known = null;
      if (previous === undefined) level = Math.max(deviation ** 2, floor);
      continue;
    }
    const { basis, noise } = noiseOf(samples, model, fit, residual, level, medianInterval_s);
    const found = Math.max(noiseLevel(noise, parameters[OMEGA]! / (2 * Math.PI)), floor);
    const settled = (round > 0 || previous !== undefined) && Math.abs(Math.log(found / level)) < 0.05;
    level = found;
    known = { parameters, residual, jacobian: fit.jacobian };
    if (!settled && round < MOST_ROUNDS) continue;
    return {
      ...known,
      model,
      covariance: parameterCovariance(fit, noise, model.priors, sigma * sigma),
      inverse: fit.covariance.map((value) => value * found),
      used,
      samples,
      basis,
      noise,
      level,
      sumOfSquares: dot(residual, residual),
      converged: fit.status === 'converged' || fit.status === 'stalled',
    };
  }
}

/** Variance of the noise before anything is fitted: third differences of what the start leaves show little of what it gets wrong. */
function startLevel(series: Series, model: Model, start: Float64Array): number {
  const apart = apartFrom(series, model, start);
  if (apart === null) return 1;
  const third = apart.subarray(3).map((v, i) => v - 3 * apart[i + 2]! + 3 * apart[i + 1]! - apart[i]!);
  const square = rootMeanSquare(apart) ** 2;
  // Of white noise they have 1 + 9 + 9 + 1 times the variance.
  return Math.max(Math.min(robustDeviation(third) ** 2 / 20, square), 1e-6 * square, Number.MIN_VALUE * 1e20);
}

function noiseOf(
  samples: Series,
  model: Model,
  fit: LeastSquaresFit,
  residual: Float64Array,
  level: number,
  step_s: number,
): { basis: Basis; noise: ResidualNoise } {
  const basis = basisOf(model, fit.jacobian);
  // What the priors keep the curve from following is no noise: it is taken out to first order.
  const rest = residual.slice();
  for (const q of basis.q) subtract(rest, q, dot(rest, q));
  const absorbed = basis.q.filter((_, k) => !boundByPrior(fit, model.priors, level, basis.from[k]!));
  return { basis, noise: fitResidualNoise(samples.time_s, rest, absorbed, step_s) };
}

/** Orthonormal directions of the free parameters: those held by priors after the rest, omega last. */
function basisOf(model: Model, jacobian: readonly Float64Array[]): Basis {
  const prior = new Set(model.priors.map((p) => p.parameter));
  const free = [...jacobian.keys()].filter((k) => !model.fixed[k] && k !== OMEGA);
  return orthonormalBasis(jacobian, [...free.filter((k) => !prior.has(k)), ...free.filter((k) => prior.has(k)), OMEGA]);
}

/** A parameter its prior knows better than the data absorbs no noise. */
function boundByPrior(fit: LeastSquaresFit, priors: readonly Prior[], level: number, parameter: number): boolean {
  const prior = priors.find((p) => p.parameter === parameter);
  const variance = level * fit.covariance![parameter * (fit.parameters.length + 1)]!;
  return prior !== undefined && variance > 0.5 * prior.u ** 2;
}

/** Marks with 1 the rows of the series that lie on the curve, to within what the residuals scatter by. */
function withoutOutliers(
  series: Series,
  model: Model,
  p: Float64Array,
  residual: Float64Array,
  deviation: number,
): Uint8Array {
  const count = series.time_s.length;
  const all = new Uint8Array(count).fill(1);
  const apart = residual.length === count ? residual : apartFrom(series, model, p);
  const limit = OUTLIER * deviation;
  if (apart === null || limit === 0) return all;
  const next = new Uint8Array(count);
  let left = 0;
  for (let i = 0; i < count; i++) {
    next[i] = Math.abs(apart[i]!) <= limit ? 1 : 0;
    if (next[i] === 0) left++;
  }
  return left > MOST_OUTLIERS * count ? all : next;
}

/** What a model leaves of a series; null where it has no value. */
function apartFrom(series: Series, model: Model, p: Float64Array): Float64Array | null {
  const value = new Float64Array(series.time_s.length);
  if (!evaluateModel(model, p, series.time_s, value, null)) return null;
  return value.map((v, i) => series.value[i]! - v);
}
