import { type LeastSquaresFit, leastSquares, type Prior } from '../numerics/least-squares.ts';
import { robustDeviation, rootMeanSquare } from '../numerics/statistics.ts';
import { type Basis, orthonormalBasis } from './basis.ts';
import { DRAG, evaluateModel, type Model, OMEGA, problemOf } from './model.ts';
import { combinationCovariance, fitResidualNoise, noiseLevel, type ResidualNoise } from './residual-noise.ts';
import { pick, type Series, sampling } from './series.ts';

/** A model fitted to a series, with what the residuals say about its uncertainty. */
export interface TwistFit {
  readonly model: Model;
  readonly parameters: Float64Array;
  /** Covariance of the parameters (zero for held ones), row by row: noise with its correlation, and priors. */
  readonly covariance: Float64Array;
  /** 1 for every row of the series that was used, 0 for outliers. */
  readonly used: Uint8Array;
  /** The used samples, their residuals (observed less model) and the model's derivatives at them. */
  readonly samples: Series;
  readonly residual: Float64Array;
  readonly jacobian: readonly Float64Array[];
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
/** More outliers than this share are no outliers: the model is wrong, and nothing is left out. */
const MOST_OUTLIERS = 0.15;

/**
 * Fits a model by least squares: first all samples, then without outliers and with the priors weighed against the noise found near
 * the twist's frequency, until both settle. Null where nothing can be evaluated or the columns can't be told apart.
 */
export function fitTwist(series: Series, model: Model, start: Float64Array, previous?: TwistFit): TwistFit | null {
  const count = series.time_s.length;
  let used = previous?.used ?? new Uint8Array(count).fill(1);
  let parameters = start;
  let level = previous?.level ?? startLevel(series, model, start);
  for (let round = 0; ; round++) {
    const samples = pick(series, used);
    const scale = Math.sqrt(level);
    const fit = leastSquares(problemOf(model, samples, scale), parameters, {
      fixed: model.fixed,
      priors: model.priors,
      sumTolerance: 1e-9,
      stepTolerance: 1e-12,
      maxEvaluations: 60,
    });
    if (fit.status === 'undefined_start' || fit.covariance === null) return null;
    parameters = fit.parameters;
    const result = judge(series, samples, model, fit, used, scale);
    const next = withoutOutliers(series, result);
    const settled = next.every((value, i) => value === used[i]) && Math.abs(Math.log(result.level / level)) < 0.05;
    if (settled || round >= 5) return result;
    used = next;
    level = result.level;
  }
}

function startLevel(series: Series, model: Model, start: Float64Array): number {
  const value = new Float64Array(series.time_s.length);
  if (!evaluateModel(model, start, series.time_s, value, null)) return 1;
  const rms = rootMeanSquare(value.map((v, i) => series.value[i]! - v));
  return Math.max(rms * rms, Number.MIN_VALUE * 1e20);
}

function judge(
  series: Series,
  samples: Series,
  model: Model,
  fit: LeastSquaresFit,
  used: Uint8Array,
  scale: number,
): TwistFit {
  const parameters = fit.parameters;
  const residual = fit.residual.map((value) => value * scale);
  const jacobian = fit.jacobian.map((column) => column.map((value) => -value * scale));
  const basis = basisOf(model, jacobian);
  const noise = fitResidualNoise(
    samples.time_s,
    residual,
    basis.q.filter((_, k) => !boundByPrior(fit, model.priors, basis.from[k]!)),
    sampling(series).medianInterval_s,
  );
  const frequency = parameters[OMEGA]! / (2 * Math.PI);
  // A perfect record has no noise: a floor far below any camera's keeps the sums finite.
  const level = Math.max(noiseLevel(noise, frequency), 1e-24 * rootMeanSquare(series.value) ** 2, 1e-300);
  return {
    model,
    parameters,
    covariance: sandwich(fit, jacobian, noise, model.priors, scale),
    used,
    samples,
    residual,
    jacobian,
    basis,
    noise,
    level,
    sumOfSquares: residual.reduce((sum, value) => sum + value * value, 0),
    converged: fit.status === 'converged' || fit.status === 'stalled',
  };
}

/** Orthonormal directions of the free parameters: those held by priors after the rest, omega last. */
function basisOf(model: Model, jacobian: readonly Float64Array[]): Basis {
  const prior = new Set(model.priors.map((p) => p.parameter));
  const free = [...jacobian.keys()].filter((k) => !model.fixed[k] && k !== OMEGA);
  return orthonormalBasis(jacobian, [...free.filter((k) => !prior.has(k)), ...free.filter((k) => prior.has(k)), OMEGA]);
}

/** A parameter its prior knows better than the data absorbs no noise. */
function boundByPrior(fit: LeastSquaresFit, priors: readonly Prior[], parameter: number): boolean {
  const prior = priors.find((p) => p.parameter === parameter);
  const variance = fit.covariance![parameter * (fit.parameters.length + 1)]!;
  return prior !== undefined && variance > 0.5 * prior.u ** 2;
}

/** C (J' R J / scale⁴ + P) C, C the fit's inverse of J'J / scale² + P, R the covariance of the residuals, P that of the priors' weights. */
function sandwich(
  fit: LeastSquaresFit,
  jacobian: readonly Float64Array[],
  noise: ResidualNoise,
  priors: readonly Prior[],
  scale: number,
): Float64Array {
  const size = fit.parameters.length;
  const inverse = fit.covariance!;
  const rows = noise.slot.length;
  const weights = Array.from({ length: size }, (_, k) => {
    const column = new Float64Array(rows);
    for (let j = 0; j < size; j++) {
      const c = inverse[k * size + j]! / (scale * scale);
      if (c !== 0) for (let i = 0; i < rows; i++) column[i] = column[i]! + c * jacobian[j]![i]!;
    }
    return column;
  });
  const covariance = combinationCovariance(noise, weights);
  for (const { parameter, u } of priors) {
    for (let a = 0; a < size; a++) {
      for (let b = 0; b < size; b++) {
        const at = a * size + b;
        covariance[at] = covariance[at]! + (inverse[a * size + parameter]! * inverse[b * size + parameter]!) / (u * u);
      }
    }
  }
  return covariance;
}

function withoutOutliers(series: Series, fit: TwistFit): Uint8Array {
  const value = new Float64Array(series.time_s.length);
  if (!evaluateModel(fit.model, fit.parameters, series.time_s, value, null)) return fit.used;
  const limit = OUTLIER * robustDeviation(fit.residual);
  const next = new Uint8Array(value.length);
  let left = 0;
  for (let i = 0; i < value.length; i++) {
    next[i] = limit === 0 || Math.abs(series.value[i]! - value[i]!) <= limit ? 1 : 0;
    if (next[i] === 0) left++;
  }
  return left > MOST_OUTLIERS * value.length ? new Uint8Array(value.length).fill(1) : next;
}

/** Standard uncertainty of parameter `k` of a fit. */
export function uncertaintyOf(fit: TwistFit, k: number): number {
  return Math.sqrt(Math.max(0, fit.covariance[k * fit.parameters.length + k]!));
}

/** By how much chi-square falls when the drag is freed of its prior: the prior's pull is taken out of its estimate. */
export function dragEvidence(fit: TwistFit): number {
  const prior = fit.model.priors.find((p) => p.parameter === DRAG);
  const u = uncertaintyOf(fit, DRAG);
  if (prior === undefined || !(u > 0)) return 0;
  const information = 1 / (u * u) - 1 / (prior.u * prior.u);
  if (!(information > 0)) return 0;
  const unpulled = fit.parameters[DRAG]! / (u * u) - prior.value / (prior.u * prior.u);
  return (unpulled * unpulled) / information;
}
