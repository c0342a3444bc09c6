import { type LeastSquaresFit, leastSquares, type Prior } from '../numerics/least-squares.ts';
import { robustDeviation, rootMeanSquare } from '../numerics/statistics.ts';
import { type Basis, dot, orthonormalBasis, subtract } from './basis.ts';
import { evaluateModel, type Model, OMEGA, problemOf } from './model.ts';
import { parameterCovariance } from './parameter-covariance.ts';
import { fitResidualNoise, noiseLevel, type ResidualNoise } from './residual-noise.ts';
import { pick, type Series, sampling } from './series.ts';

/** A model fitted to a series, with what the residuals say about its uncertainty. */
export interface TwistFit {
  readonly model: Model;
  readonly parameters: Float64Array;
  /** Covariance of the parameters (zero for held ones), row by row: noise with its correlation, and priors. */
  readonly covariance: Float64Array;
  /** The fit's inverse of J'J and priors for noise of variance `level`, row by row: turns J'y / level into a change of parameters. */
  readonly inverse: Float64Array;
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
  const floor = 1e-24 * rootMeanSquare(series.value) ** 2 + 1e-300;
  for (let round = previous === undefined ? 0 : 1; ; round++) {
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
    const residual = fit.residual.map((value) => value * scale);
    const next = withoutOutliers(series, model, parameters, residual);
    const unchanged = next.every((value, i) => value === used[i]);
    used = next;
    if (round === 0) {
      // A first look only: what is noise is asked once the curve fits.
      level = Math.max(robustDeviation(residual) ** 2, floor);
      continue;
    }
    const { basis, noise } = noiseOf(series, samples, model, fit, residual, scale);
    const found = Math.max(noiseLevel(noise, parameters[OMEGA]! / (2 * Math.PI)), floor);
    const settled = unchanged && Math.abs(Math.log(found / level)) < 0.05;
    level = found;
    if (!settled && round < 6) continue;
    return {
      model,
      parameters,
      covariance: parameterCovariance(fit, noise, model.priors, scale),
      inverse: fit.covariance.map((value) => (value * found) / (scale * scale)),
      used: usedRows(series, samples),
      samples,
      residual,
      jacobian: fit.jacobian.map((column) => column.map((value) => -value * scale)),
      basis,
      noise,
      level,
      sumOfSquares: dot(residual, residual),
      converged: fit.status === 'converged' || fit.status === 'stalled',
    };
  }
}

/** The rows of the series whose samples took part. */
function usedRows(series: Series, samples: Series): Uint8Array {
  const rows = new Uint8Array(series.time_s.length);
  let k = 0;
  for (let i = 0; i < rows.length; i++) {
    if (series.time_s[i] === samples.time_s[k]) {
      rows[i] = 1;
      k++;
    }
  }
  return rows;
}

function startLevel(series: Series, model: Model, start: Float64Array): number {
  const value = new Float64Array(series.time_s.length);
  if (!evaluateModel(model, start, series.time_s, value, null)) return 1;
  const rms = rootMeanSquare(value.map((v, i) => series.value[i]! - v));
  return Math.max(rms * rms, Number.MIN_VALUE * 1e20);
}

function noiseOf(
  series: Series,
  samples: Series,
  model: Model,
  fit: LeastSquaresFit,
  residual: Float64Array,
  scale: number,
): { basis: Basis; noise: ResidualNoise } {
  const basis = basisOf(
    model,
    fit.jacobian.map((column) => column.map((value) => -value * scale)),
  );
  // What the priors keep the curve from following is no noise: it is taken out to first order.
  const rest = residual.slice();
  for (const q of basis.q) subtract(rest, q, dot(rest, q));
  const absorbed = basis.q.filter((_, k) => !boundByPrior(fit, model.priors, basis.from[k]!));
  return { basis, noise: fitResidualNoise(samples.time_s, rest, absorbed, sampling(series).medianInterval_s) };
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

function withoutOutliers(series: Series, model: Model, p: Float64Array, residual: Float64Array): Uint8Array {
  const value = new Float64Array(series.time_s.length);
  if (!evaluateModel(model, p, series.time_s, value, null)) return new Uint8Array(value.length).fill(1);
  const limit = OUTLIER * robustDeviation(residual);
  const next = new Uint8Array(value.length);
  let left = 0;
  for (let i = 0; i < value.length; i++) {
    next[i] = limit === 0 || Math.abs(series.value[i]! - value[i]!) <= limit ? 1 : 0;
    if (next[i] === 0) left++;
  }
  return left > MOST_OUTLIERS * value.length ? new Uint8Array(value.length).fill(1) : next;
}
